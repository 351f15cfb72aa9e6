import { spawn } from 'node:child_process';
import { Cancelled, Failure } from './failure.mjs';
import { lastLines } from './logs.mjs';
import { root } from './paths.mjs';
import { childrenOf } from './processes.mjs';

// Stopped in this order, each kind waited for before the next is asked.
const kinds = ['step', 'hub', 'database'];

const running = new Set();
let cancelled = false;
let changed = () => {};

/** Calls back with every process now running, oldest first, whenever one starts or ends. */
export function watchChildren(listener) {
  changed = () => listener([...running]);
}

/**
 * Starts a process in a group of its own, so that Ctrl-C in the terminal reaches this process alone and the
 * order of stopping is ours. What it writes goes to `log`, or to the terminal where none is given; with
 * `capture` its standard output is kept instead.
 */
export function launch(name, command, args, options = {}) {
  if (cancelled) throw new Cancelled();
  const { kind = 'step', env, cwd = root, account, log, capture, ending, ownGroup = true } = options;
  const sink = log?.descriptor ?? 'inherit';
  const child = spawn(command, args, {
    env,
    cwd,
    uid: account?.uid,
    gid: account?.gid,
    detached: ownGroup,
    stdio: [ownGroup ? 'ignore' : 'inherit', capture ? 'pipe' : sink, sink],
  });
  const entry = { name, kind, log, pid: child.pid, ownGroup, written: '', end: null };
  Object.assign(entry, { stop: 'SIGTERM', force: 'SIGKILL', patienceSeconds: 25 }, ending);
  child.stdout?.setEncoding('utf8').on('data', (text) => {
    entry.written += text;
  });
  entry.exited = new Promise((resolve) => {
    const finish = (end) => {
      entry.end = end;
      running.delete(entry);
      log?.close();
      resolve(end);
      changed();
    };
    child.once('error', (error) => finish({ code: null, signal: null, error }));
    child.once('close', (code, signal) => finish({ code, signal }));
  });
  if (child.pid) {
    running.add(entry);
    changed();
  }
  return entry;
}

/** Runs a command to its end and returns what it captured; anything but exit code 0 is a failure. */
export async function run(sentence, command, args, { remedy, excerpt = lastLines, ...options } = {}) {
  const entry = launch(command, command, args, options);
  const { code, error } = await entry.exited;
  if (cancelled) throw new Cancelled();
  if (code === 0) return entry.written;
  const written = [entry.written, options.log?.written(), error?.message].filter(Boolean).join('\n');
  throw new Failure(sentence, { remedy, tail: excerpt(written) });
}

/** Gives the terminal to a command and answers its exit code. */
export async function handOver(command, args) {
  const { code, error } = await launch(command, command, args, { ownGroup: false }).exited;
  if (error) throw new Failure(`${command} could not be started: ${error.message}.`);
  return code ?? 1;
}

/** Asks a process to end in its own way and waits; what has not ended in time is made to, with all it started. */
export async function stop(entry) {
  if (entry.end) return;
  const started = entry.ownGroup ? [] : childrenOf(entry.pid);
  signalTo(entry.pid, entry.stop);
  const late = setTimeout(() => force(entry), entry.patienceSeconds * 1000);
  await entry.exited;
  clearTimeout(late);
  for (const pid of entry.ownGroup ? [-entry.pid] : started) signalTo(pid, 'SIGKILL');
}

/** Ends everything: steps under way first, then the hub's own processes, the database last. */
export async function stopAll() {
  cancelled = true;
  for (const kind of kinds) {
    await Promise.all([...running].filter((entry) => entry.kind === kind).map((entry) => stop(entry)));
  }
}

export function forceAll() {
  cancelled = true;
  for (const entry of running) force(entry);
}

function force(entry) {
  signalTo(entry.ownGroup ? -entry.pid : entry.pid, entry.force);
}

/** A process that is already gone, or belongs to root behind sudo, is left alone. */
export function signalTo(pid, signal) {
  try {
    process.kill(pid, signal);
  } catch (error) {
    if (error.code !== 'ESRCH' && error.code !== 'EPERM') throw error;
  }
}
