import { run } from './children.mjs';
import { prepareOwnCluster, startOwnCluster } from './cluster.mjs';
import { stateNameOf, useServer } from './external.mjs';
import { openLog } from './logs.mjs';
import { forServer, installPackages } from './packages.mjs';
import { newSecret, openState } from './state.mjs';
import { step } from './steps.mjs';

/**
 * The database that the hub is to use: the server of DATABASE_URL where that is set, or else a cluster of its
 * own. `begin` needs nothing of npm's packages and `finish` does.
 */
export function chooseDatabase(folder) {
  const ownerUrl = process.env.DATABASE_URL;
  const state = openState(folder, ownerUrl ? stateNameOf(ownerUrl) : 'state');
  if (!state.values.secret) {
    state.values.secret = newSecret();
    state.save();
  }
  return ownerUrl ? theirs(folder, state, ownerUrl) : ours(folder, state);
}

function ours(folder, state) {
  return {
    state,
    isOurs: true,
    async begin() {
      await step('Debian packages', () => installPackages(folder, forServer));
      return step('Database server', () => startOwnCluster(folder, state));
    },
    async finish(cluster) {
      return step('Database', async () => {
        await prepareOwnCluster(state);
        await migrate(folder, cluster.ownerUrl);
        return cluster;
      });
    },
  };
}

function theirs(folder, state, ownerUrl) {
  return {
    state,
    isOurs: false,
    begin: async () => null,
    async finish() {
      return step('Database of DATABASE_URL', async () => {
        const connections = await useServer(ownerUrl, state);
        await migrate(folder, ownerUrl);
        return connections;
      });
    },
  };
}

async function migrate(folder, ownerUrl) {
  await run(
    'The database could not be brought up to date.',
    process.execPath,
    ['--import', 'tsx', 'scripts/migrate.ts'],
    {
      env: { ...process.env, DATABASE_OWNER_URL: ownerUrl },
      log: openLog(folder, 'migrate'),
      remedy: 'Nothing was changed by the step that failed; its words are below.',
    },
  );
}
