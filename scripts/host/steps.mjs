const terminal = process.stdout.isTTY === true;
const coloured = terminal && !process.env.NO_COLOR;
const labelWidth = 44;
const running = new Set();
let ticker;
let silent = false;

// A closed terminal must not keep the clean stop from finishing.
process.stdout.on('error', () => {});
process.stderr.on('error', () => {});

export const bold = (text) => (coloured ? `\x1b[1m${text}\x1b[22m` : text);
export const faint = (text) => (coloured ? `\x1b[2m${text}\x1b[22m` : text);
const green = (text) => (coloured ? `\x1b[32m${text}\x1b[39m` : text);

export function say(text = '') {
  clearLive();
  process.stdout.write(`${text}\n`);
}

/**
 * Runs one named piece of work, showing the seconds it takes. Steps may overlap. A step that answers
 * false had nothing to do and leaves no line; one that answers a text has it shown beside its name.
 */
export async function step(label, work) {
  const entry = { label, started: performance.now(), nextNotice: 1 };
  running.add(entry);
  if (!silent) ticker ??= setInterval(showRunning, terminal ? 100 : 500).unref();
  try {
    const result = await work();
    if (result !== false && !silent) {
      const text = typeof result === 'string' ? `${label}, ${result}` : label;
      say(`  ${green('✓')} ${text.padEnd(labelWidth)} ${faint(seconds(entry))}`);
    }
    return result;
  } finally {
    running.delete(entry);
    clearLive();
    if (running.size === 0) endTicker();
  }
}

/** Ends the telling of steps, so that what is said of a failure or a stop is the last word. */
export function endSteps() {
  clearLive();
  silent = true;
  endTicker();
}

function endTicker() {
  clearInterval(ticker);
  ticker = undefined;
}

function seconds(entry) {
  return `${((performance.now() - entry.started) / 1000).toFixed(1).padStart(6)} s`;
}

function showRunning() {
  if (terminal) {
    const all = [...running].map((entry) => `${entry.label} ${seconds(entry).trim()}`).join(' · ');
    const room = (process.stdout.columns ?? 80) - 5;
    process.stdout.write(`\r\x1b[K  … ${all.slice(0, room)}`);
    return;
  }
  for (const entry of running) {
    const elapsed = (performance.now() - entry.started) / 1000;
    if (elapsed < entry.nextNotice) continue;
    process.stdout.write(`  … ${entry.label.padEnd(labelWidth)} ${seconds(entry)}\n`);
    entry.nextNotice = Math.floor(elapsed / 10) * 10 + 10;
  }
}

function clearLive() {
  if (terminal && ticker) process.stdout.write('\r\x1b[K');
}
