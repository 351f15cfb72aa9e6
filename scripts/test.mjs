import { build } from './host/build.mjs';
import { handOver, run } from './host/children.mjs';
import { installDependencies } from './host/dependencies.mjs';
import { conduct } from './host/lifecycle.mjs';
import { openLog } from './host/logs.mjs';
import { requireNode } from './host/node.mjs';
import { forTests, installPackages } from './host/packages.mjs';
import { openDataFolder } from './host/paths.mjs';
import { step } from './host/steps.mjs';

await conduct(
  async () => {
    requireNode();
    const folder = openDataFolder();
    await Promise.all([
      step('Debian packages', () => installPackages(folder, forTests)),
      step('Packages from npm', () => installDependencies(folder)).then(() =>
        step('Web app build', () => build(folder)),
      ),
    ]);
    // Whoever runs part of the tests while working has the editor for this.
    if (process.argv.length === 2) {
      await step('Types, style and the API document', () =>
        run('npm run check finds something.', 'npm', ['run', '-s', 'check'], {
          log: openLog(folder, 'check'),
        }),
      );
    }
    return handOver(process.execPath, ['node_modules/vitest/vitest.mjs', 'run', ...process.argv.slice(2)]);
  },
  { codeWhenStopped: 130 },
);
