import { readdirSync, readFileSync } from 'node:fs';

/**
 * When a process was started, in ticks since the system was, or null where it has ended. A process number is
 * used again after a while; together with this it is not.
 */
export function startedAt(pid) {
  const fields = statusOf(pid);
  return fields && fields[0] !== 'Z' ? fields[19] : null;
}

export function childrenOf(parent) {
  const numbers = readdirSync('/proc').filter((name) => /^\d+$/.test(name));
  return numbers.map(Number).filter((pid) => Number(statusOf(pid)?.[1]) === parent);
}

// The name in front is in brackets and may itself hold anything.
function statusOf(pid) {
  try {
    return readFileSync(`/proc/${pid}/stat`, 'utf8')
      .replace(/^.*\) /s, '')
      .split(' ');
  } catch {
    return null;
  }
}
