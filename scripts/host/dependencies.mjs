import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { run } from './children.mjs';
import { lastLines, openLog } from './logs.mjs';
import { root } from './paths.mjs';

/** Installs the packages of package-lock.json where node_modules does not hold just those. */
export async function installDependencies(folder) {
  if (areInstalled()) return false;
  // Building needs the development packages too, whatever NODE_ENV says around us.
  await run(
    'The packages from npm could not be installed.',
    'npm',
    ['ci', '--include=dev', '--no-audit', '--no-fund'],
    {
      env: { ...process.env, NODE_ENV: 'development' },
      log: openLog(folder, 'npm'),
      ending: { patienceSeconds: 2 },
      remedy: 'Check that the npm registry can be reached, then start again.',
      excerpt: firstErrors,
    },
  );
  return true;
}

/** npm says what is wrong first, and ends with pages of advice. */
function firstErrors(written) {
  const errors = written.split('\n').filter((line) => /^npm error ./.test(line));
  return errors.length > 0 ? errors.slice(0, 8).join('\n') : lastLines(written);
}

/** npm leaves the list of what it installed in node_modules, as the last thing it does: that is the stamp. */
function areInstalled() {
  const wanted = packagesOf(join(root, 'package-lock.json'));
  const present = packagesOf(join(root, 'node_modules', '.package-lock.json'));
  if (!wanted || !present) return false;
  return Object.entries(wanted).every(([path, entry]) => {
    if (path === '') return true;
    // Packages for other systems are listed and rightly left out.
    if (!present[path]) return entry.optional || entry.devOptional;
    return present[path].version === entry.version && present[path].integrity === entry.integrity;
  });
}

function packagesOf(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8')).packages;
  } catch {
    return null;
  }
}
