import { spawnSync } from 'node:child_process';
import {
  chownSync,
  existsSync,
  readFileSync,
  readlinkSync,
  realpathSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { launch, run } from './children.mjs';
import { Failure } from './failure.mjs';
import { lastLines } from './logs.mjs';

export const superuser = 'postgres';

const readyWithinSeconds = 60;

// On the command line they win over any file, so that a 2xx means durable whatever the files say.
const settings = {
  cluster_name: 'hubtack',
  listen_addresses: '127.0.0.1',
  unix_socket_directories: '',
  max_connections: 100,
  synchronous_commit: 'on',
  fsync: 'on',
  full_page_writes: 'on',
  // A hub that fills up at once is planned for its real sizes within seconds.
  autovacuum_naptime: '10s',
  password_encryption: 'scram-sha-256',
  timezone: 'UTC',
  log_timezone: 'UTC',
  log_line_prefix: '%m [%p] %q%u@%d ',
};

export const dataOf = (home) => join(home, 'data');

export function majorOfData(home) {
  const file = join(dataOf(home), 'PG_VERSION');
  return existsSync(file) ? Number(readFileSync(file, 'utf8')) : null;
}

/** Makes a new cluster in its home. It takes its final name when complete: a cut-off try leaves no half of one. */
export async function initialise({ programs, account, home, password, log }) {
  const unfinished = join(home, 'data.unfinished');
  const passwordFile = join(home, 'password');
  rmSync(unfinished, { recursive: true, force: true });
  writeFileSync(passwordFile, password, { mode: 0o600 });
  try {
    if (account.uid !== undefined) chownSync(passwordFile, account.uid, account.gid);
    const options = ['--encoding=UTF8', '--locale=C.UTF-8', '--data-checksums', '--auth=scram-sha-256'];
    await run(
      'The database cluster could not be made.',
      join(programs.folder, 'initdb'),
      [...options, `--username=${superuser}`, `--pwfile=${passwordFile}`, `--pgdata=${unfinished}`],
      { account, cwd: '/', env: serverEnvironment(), log },
    );
  } finally {
    rmSync(passwordFile, { force: true });
  }
  renameSync(unfinished, dataOf(home));
}

/** Starts the server on loopback and waits until it takes connections. */
export async function serve({ programs, account, home, port, log }) {
  const options = Object.entries({ ...settings, port }).flatMap(([name, value]) => [
    '-c',
    `${name}=${value}`,
  ]);
  const server = launch('PostgreSQL', join(programs.folder, 'postgres'), ['-D', dataOf(home), ...options], {
    kind: 'database',
    account,
    cwd: '/',
    env: serverEnvironment(),
    log,
    // A fast shutdown, and where that takes too long an immediate one.
    ending: { stop: 'SIGINT', force: 'SIGQUIT' },
  });
  const deadline = performance.now() + readyWithinSeconds * 1000;
  while (!isReady(home, server.pid)) {
    if (server.end || performance.now() > deadline) {
      throw new Failure(server.end ? 'PostgreSQL ended at its start.' : 'PostgreSQL did not become ready.', {
        remedy: `Its log is ${log.path}.`,
        tail: lastLines(log.written()),
      });
    }
    await pause(15);
  }
  return server;
}

/** Stops a server that still runs on this data though the start that owned it is gone. */
export function stopLeftBehind({ programs, account, home }, mode = 'fast') {
  const [pid] = pidFileOf(home);
  if (!pid || !existsSync(`/proc/${pid}`)) return;
  if (!worksIn(pid, dataOf(home))) {
    // The number has gone to some other process, which would make PostgreSQL refuse its own data.
    rmSync(join(dataOf(home), 'postmaster.pid'), { force: true });
    return;
  }
  const stopping = ['stop', '-D', dataOf(home), '-m', mode, '-w', '-t', '60', '-s'];
  spawnSync(join(programs.folder, 'pg_ctl'), stopping, { ...account, cwd: '/', env: serverEnvironment() });
}

// Nothing of the caller's PG… variables may reach the server.
function serverEnvironment() {
  return { PATH: process.env.PATH, LANG: 'C.UTF-8', LC_ALL: 'C.UTF-8', TZ: 'UTC' };
}

/** The server itself says so on the eighth line, which is what pg_ctl waits for, too. */
function isReady(home, pid) {
  const lines = pidFileOf(home);
  return Number(lines[0]) === pid && lines[7]?.trim() === 'ready';
}

function pidFileOf(home) {
  try {
    return readFileSync(join(dataOf(home), 'postmaster.pid'), 'utf8').split('\n');
  } catch {
    return [];
  }
}

function worksIn(pid, folder) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`) === realpathSync(folder);
  } catch {
    return false;
  }
}
