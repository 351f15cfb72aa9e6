import { readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { signalTo, watchChildren } from './children.mjs';
import { Failure } from './failure.mjs';
import { startedAt } from './processes.mjs';
import { step } from './steps.mjs';

const patienceMilliseconds = 15_000;

/**
 * One start per data folder. Its processes are kept in running.json, so that the next start finds and ends
 * what a killed one has left behind, and tells a live one from it.
 */
export async function claim(folder) {
  const file = join(folder, 'running.json');
  const found = read(file);
  if (found && isAlive(found.self)) {
    throw new Failure(`Hubtack is running from this folder already (process ${found.self.pid}).`, {
      remedy: `Stop that one with Ctrl-C where it runs, or with: kill ${found.self.pid}`,
    });
  }
  const leftBehind = (found?.children ?? []).filter(isAlive);
  if (leftBehind.length > 0)
    await step('What a killed start left running, stopped', () => endAll(leftBehind));

  const self = named({ pid: process.pid });
  const write = (children) => {
    writeFileSync(`${file}.new`, JSON.stringify({ self, children: children.map(named) }), { mode: 0o600 });
    renameSync(`${file}.new`, file);
  };
  write([]);
  watchChildren(write);
  process.once('exit', () => rmSync(file, { force: true }));
}

async function endAll(entries) {
  // Newest first: the hub's processes before the database that they use.
  for (const entry of entries.reverse()) {
    signalTo(entry.pid, entry.stop);
    const deadline = performance.now() + patienceMilliseconds;
    while (isAlive(entry)) {
      if (performance.now() > deadline) signalTo(-entry.pid, entry.force);
      await pause(50);
    }
  }
}

const named = ({ pid, stop, force }) => ({ pid, stop, force, startedAt: startedAt(pid) });

const isAlive = ({ pid, startedAt: then }) => then !== null && startedAt(pid) === then;

function read(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}
