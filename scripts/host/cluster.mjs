import { randomBytes } from 'node:crypto';
import { existsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { giveFolder, serverAccount } from './account.mjs';
import { addressesOf, forgetOtherServers } from './addresses.mjs';
import { requireServerPrograms } from './binaries.mjs';
import { Failure } from './failure.mjs';
import { openLog } from './logs.mjs';
import { shown } from './paths.mjs';
import { choosePort, isFree } from './ports.mjs';
import { ensureDatabase, ensureRoles, withConnection } from './roles.mjs';
import { dataOf, initialise, majorOfData, serve, stopLeftBehind } from './server.mjs';
import { newSecret } from './state.mjs';

export { startThrowawayCluster } from './throwaway.mjs';

export const databaseName = 'hubtack';

/** Starts the checkout's own cluster, made at the first start, and takes over what a killed start left. */
export async function startOwnCluster(folder, state) {
  forgetOtherServers();
  const place = placeOf(folder, state);
  const log = () => openLog(folder, 'postgres');
  if (!majorOfData(place.home)) {
    const passwords = {
      superuserPassword: newSecret(),
      ownerPassword: newSecret(),
      appPassword: newSecret(),
    };
    const cluster = { home: place.home, port: await choosePort(), ...passwords, prepared: false };
    state.values.cluster = cluster;
    state.save();
    await initialise({ ...place, password: cluster.superuserPassword, log: log() });
  }
  stopLeftBehind(place);
  const { cluster } = state.values;
  if (!(await isFree(cluster.port))) {
    cluster.port = await choosePort();
    state.save();
  }
  const server = await serve({ ...place, port: cluster.port, log: log() });
  const addresses = addressesOf(cluster);
  return { server, ownerUrl: addresses.ownerUrl(databaseName), appUrl: addresses.appUrl(databaseName) };
}

/** Makes the roles and the database, once. */
export async function prepareOwnCluster(state) {
  const { cluster } = state.values;
  if (cluster.prepared) return;
  await withConnection(addressesOf(cluster).superuserUrl('postgres'), async (client) => {
    await ensureRoles(client, cluster);
    await ensureDatabase(client, databaseName);
  });
  cluster.prepared = true;
  state.save();
}

function placeOf(folder, state) {
  const { home, prepared } = state.values.cluster ?? {};
  const major = home && majorOfData(home);
  if (major) return { home, account: serverAccount(dataOf(home)), programs: requireServerPrograms(major) };

  const beside = join(folder, 'cluster');
  if (prepared) {
    throw new Failure(`The hub's database is gone from ${shown(home)}.`, {
      remedy: `Bring that folder back, or remove ${shown(state.file)} to begin with an empty hub.`,
    });
  }
  if (existsSync(dataOf(beside))) {
    throw new Failure(`${shown(beside)} holds a database whose passwords (${shown(state.file)}) are gone.`, {
      remedy: 'Put that file back, or move the folder away to begin with an empty hub.',
    });
  }
  const account = serverAccount();
  return { home: newHome([home, beside], account), account, programs: requireServerPrograms() };
}

/** Beside the other data where the server's user can get there (not below a closed home), or else elsewhere. */
function newHome(wishes, account) {
  const name = `hubtack-${randomBytes(4).toString('hex')}`;
  const homes = [...wishes, join('/var/lib', name), join(tmpdir(), name)].filter(Boolean);
  const home = homes.find((candidate) => giveFolder(candidate, account));
  if (home) return home;
  throw new Failure(`The database finds no folder to live in (tried ${homes.join(', ')}).`, {
    remedy: 'Set HUBTACK_DATA to a folder that this user and PostgreSQL can both reach.',
  });
}
