import { closeSync, fstatSync, openSync, readFileSync, renameSync, statSync } from 'node:fs';
import { join } from 'node:path';

const fullAt = 20 * 1024 * 1024;

/** Opens a log to append to; one grown too big is put aside first, and one such old log is kept. */
export function openLog(folder, name) {
  const path = join(folder, 'logs', `${name}.log`);
  if ((statSync(path, { throwIfNoEntry: false })?.size ?? 0) > fullAt) renameSync(path, `${path}.old`);
  const descriptor = openSync(path, 'a', 0o600);
  const from = fstatSync(descriptor).size;
  return {
    path,
    descriptor,
    close: () => closeSync(descriptor),
    /** What was written since it was opened. */
    written: () => readFileSync(path).subarray(from).toString('utf8'),
  };
}

export function lastLines(text, lines = 30) {
  return text.trimEnd().split('\n').slice(-lines).join('\n');
}
