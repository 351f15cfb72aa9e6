import { chooseDatabase } from './host/database.mjs';
import { makePeople } from './host/demo.mjs';
import { installDependencies } from './host/dependencies.mjs';
import { chooseAddress, hubEnvironment, startHub, whenOneEnds, whenReady } from './host/hub.mjs';
import { conduct } from './host/lifecycle.mjs';
import { requireNode } from './host/node.mjs';
import { openDataFolder } from './host/paths.mjs';
import { report } from './host/report.mjs';
import { claim } from './host/running.mjs';
import { step } from './host/steps.mjs';

await conduct(async () => {
  requireNode();
  const folder = openDataFolder();
  await claim(folder);
  const address = await chooseAddress();
  const database = chooseDatabase(folder);
  const { state, isOurs } = database;

  const packages = step('Packages from npm', () => installDependencies(folder));
  const [begun] = await Promise.all([database.begin(), packages]);
  const { appUrl, server } = await database.finish(begun);

  const env = hubEnvironment({ appUrl, secret: state.values.secret, address, mode: 'development' });
  if (isOurs) await step('Demo sign-ins', () => makePeople(folder, state, env));

  // Next reloads pages and routes by itself; the worker is started anew when a file of its changes.
  const watch = ['--watch', '--watch-preserve-output'];
  const servers = [...startHub(folder, env, { watch, toTerminal: true }), ...(server ? [server] : [])];
  const broken = whenOneEnds(servers);
  await Promise.race([broken, whenReady(address)]);
  report({ address, demo: isOurs && state.values.demo, verdicts: [], notes: [], folder });
  await broken;
});
