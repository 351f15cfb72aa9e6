import { build } from './host/build.mjs';
import { chooseDatabase } from './host/database.mjs';
import { makePeople, readVerdicts, walk } from './host/demo.mjs';
import { installDependencies } from './host/dependencies.mjs';
import { Cancelled, explain, Failure } from './host/failure.mjs';
import { chooseAddress, hubEnvironment, startHub, whenOneEnds, whenReady } from './host/hub.mjs';
import { conduct } from './host/lifecycle.mjs';
import { requireNode } from './host/node.mjs';
import { openDataFolder } from './host/paths.mjs';
import { report } from './host/report.mjs';
import { claim } from './host/running.mjs';
import { step } from './host/steps.mjs';

await conduct(async () => {
  requireNode();
  const asksForDemo = readOptions(process.argv.slice(2));
  const folder = openDataFolder();
  await claim(folder);
  const address = await chooseAddress();
  const database = chooseDatabase(folder);
  const { state } = database;

  // What does not wait for one another runs side by side.
  const packages = step('Packages from npm', () => installDependencies(folder));
  const built = packages.then(() => step('Web app build', () => build(folder)));
  const connected = Promise.all([database.begin(), packages]).then(([begun]) => database.finish(begun));
  const [{ appUrl, server }] = await Promise.all([connected, built]);

  const env = hubEnvironment({ appUrl, secret: state.values.secret, address, mode: 'production' });
  const servers = [...startHub(folder, env), ...(server ? [server] : [])];
  const broken = whenOneEnds(servers);
  const withDemo = database.isOurs || asksForDemo;

  await Promise.race([broken, present()]);
  await broken;

  async function present() {
    await Promise.all([
      step('Web and worker', () => whenReady(address)),
      withDemo && step('Demo sign-ins', () => makePeople(folder, state, env)),
    ]);
    const verdicts = withDemo ? await showDemo() : [];
    report({ address, demo: withDemo && state.values.demo, verdicts, notes: notes(), folder });
  }

  // A demo that fails is told, and leaves the hub running.
  async function showDemo() {
    try {
      await step('Demo scenario through the public API', () => walk(folder, state, address));
      return state.values.demo ? await readVerdicts(state, address) : [];
    } catch (error) {
      if (error instanceof Cancelled) throw error;
      process.stderr.write(explain(error));
      return [];
    }
  }

  function notes() {
    if (!withDemo) return ['No demo was made on this server; npm start -- --demo makes one on an empty hub.'];
    if (!state.values.demo) return ['An organization exists here already, so no demo was made.'];
    return [];
  }
});

function readOptions(options) {
  const unknown = options.find((option) => option !== '--demo');
  if (unknown) {
    throw new Failure(`npm start knows no option ${unknown}.`, {
      remedy: 'The only one is --demo, and it matters with DATABASE_URL: npm start -- --demo',
    });
  }
  return options.includes('--demo');
}
