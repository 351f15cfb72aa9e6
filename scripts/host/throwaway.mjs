import { randomBytes } from 'node:crypto';
import { chmodSync, mkdirSync, readdirSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { giveFolder, serverAccount } from './account.mjs';
import { addressesOf, forgetOtherServers } from './addresses.mjs';
import { requireServerPrograms } from './binaries.mjs';
import { signalTo, stop as stopProcess } from './children.mjs';
import { Failure } from './failure.mjs';
import { openLog } from './logs.mjs';
import { choosePort } from './ports.mjs';
import { childrenOf, startedAt } from './processes.mjs';
import { ensureRoles, withConnection } from './roles.mjs';
import { initialise, serve, stopLeftBehind } from './server.mjs';
import { newSecret } from './state.mjs';

const prefix = 'hubtack-throwaway';
const places = [...new Set([tmpdir(), '/tmp', '/var/tmp'])];

/** A cluster with the settings of the real one that lives as long as this process at most. */
export async function startThrowawayCluster() {
  forgetOtherServers();
  const programs = requireServerPrograms();
  const account = serverAccount();
  for (const folder of abandoned()) discard({ programs, account, folder });

  const folder = newFolder(account);
  const place = { programs, account, home: join(folder, 'cluster') };
  const unhook = atExit(() => discard({ ...place, folder }));
  const passwords = { superuserPassword: newSecret(), ownerPassword: newSecret(), appPassword: newSecret() };
  await initialise({ ...place, password: passwords.superuserPassword, log: openLog(folder, 'postgres') });

  let { port, server } = await serveSomewhere(place, folder);
  const addresses = addressesOf({ port, ...passwords });
  await withConnection(addresses.superuserUrl('postgres'), (client) => ensureRoles(client, passwords));

  return {
    ...addresses,
    ownerPassword: passwords.ownerPassword,
    appPassword: passwords.appPassword,
    binDirectory: programs.folder,

    /** Ends the server as asked; SIGKILL takes all its processes at once, as a power cut would. */
    async kill(signal = 'SIGKILL') {
      const members = childrenOf(server.pid);
      signalTo(server.pid, signal);
      if (signal === 'SIGKILL') for (const pid of members) signalTo(pid, signal);
      await server.exited;
      while (members.some((pid) => startedAt(pid) !== null)) await pause(10);
    },

    async restart() {
      await stopProcess(server);
      server = await serve({ ...place, port, log: openLog(folder, 'postgres') });
    },

    async stop() {
      unhook();
      signalTo(server.pid, 'SIGQUIT');
      await server.exited;
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

// Between the choice of a port and its use another process may take it.
async function serveSomewhere(place, folder, attempts = 3) {
  const port = await choosePort();
  try {
    return { port, server: await serve({ ...place, port, log: openLog(folder, 'postgres') }) };
  } catch (error) {
    if (attempts === 1 || !error.tail?.includes('could not bind')) throw error;
    return serveSomewhere(place, folder, attempts - 1);
  }
}

function newFolder(account) {
  const name = [prefix, process.pid, startedAt(process.pid), randomBytes(4).toString('hex')].join('-');
  for (const place of places) {
    const folder = join(place, name);
    try {
      mkdirSync(join(folder, 'logs'), { recursive: true });
      chmodSync(folder, 0o711);
    } catch {
      continue;
    }
    if (giveFolder(join(folder, 'cluster'), account)) return folder;
    rmSync(folder, { recursive: true, force: true });
  }
  throw new Failure(`The test database finds no folder to live in (tried ${places.join(', ')}).`, {
    remedy: 'Set TMPDIR to a folder that this user and PostgreSQL can both reach.',
  });
}

/** Folders of this user whose process was killed before it could tidy up. */
function abandoned() {
  return places
    .flatMap((place) => namesIn(place).map((name) => ({ name, folder: join(place, name) })))
    .filter(({ name, folder }) => {
      const [pid, then] = name.slice(prefix.length + 1).split('-');
      return name.startsWith(prefix) && startedAt(Number(pid)) !== then && isOurs(folder);
    })
    .map(({ folder }) => folder);
}

function namesIn(place) {
  try {
    return readdirSync(place);
  } catch {
    return [];
  }
}

const isOurs = (folder) => statSync(folder, { throwIfNoEntry: false })?.uid === process.getuid();

function discard({ programs, account, folder }) {
  stopLeftBehind({ programs, account, home: join(folder, 'cluster') }, 'immediate');
  rmSync(folder, { recursive: true, force: true, maxRetries: 10 });
}

/** Runs when the process ends in whatever way can be noticed; other listeners keep their say over signals. */
function atExit(work) {
  const signals = ['SIGINT', 'SIGTERM', 'SIGHUP'];
  const onSignal = (signal, number) => {
    if (process.listenerCount(signal) === 1) process.exit(128 + number);
  };
  process.once('exit', work);
  for (const signal of signals) process.on(signal, onSignal);
  return () => {
    process.off('exit', work);
    for (const signal of signals) process.off(signal, onSignal);
  };
}
