import { build } from './host/build.mjs';
import { handOver } from './host/children.mjs';
import { installDependencies } from './host/dependencies.mjs';
import { conduct } from './host/lifecycle.mjs';
import { requireNode } from './host/node.mjs';
import { forServer, installPackages } from './host/packages.mjs';
import { openDataFolder } from './host/paths.mjs';
import { step } from './host/steps.mjs';

await conduct(
  async () => {
    requireNode();
    const folder = openDataFolder();
    await Promise.all([
      step('Debian packages', () => installPackages(folder, forServer)),
      step('Packages from npm', () => installDependencies(folder)),
    ]);
    // After the rest: nothing may run beside what is measured.
    await step('Web app build', () => build(folder));
    return handOver(process.execPath, ['--import', 'tsx', 'tests/bench/run.ts', ...process.argv.slice(2)]);
  },
  { codeWhenStopped: 130 },
);
