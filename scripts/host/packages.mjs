import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { findServerPrograms } from './binaries.mjs';
import { run } from './children.mjs';
import { Failure } from './failure.mjs';
import { openLog } from './logs.mjs';
import { asRoot } from './paths.mjs';

export const forServer = [{ name: 'postgresql', isPresent: () => findServerPrograms() !== null }];

export const forTests = [
  ...forServer,
  { name: 'python3-scipy', isPresent: hasScipy },
  { name: 'chromium', isPresent: () => isOnPath('chromium') },
  { name: 'curl', isPresent: () => isOnPath('curl') },
];

/** Installs those Debian packages that are missing, or says what a person has to install. */
export async function installPackages(folder, wanted) {
  const names = wanted.filter(({ isPresent }) => !isPresent()).map(({ name }) => name);
  if (names.length === 0) return false;
  const apt = aptCommand();
  if (!apt) {
    throw new Failure(`Missing on this machine, and not for this user to install: ${names.join(', ')}.`, {
      remedy: `On Debian: sudo apt-get install -y --no-install-recommends ${names.join(' ')}\nThen start again.`,
    });
  }
  const aptGet = (...args) => {
    const [command, ...rest] = [...apt, '-o', 'DPkg::Lock::Timeout=120', '-q', ...args];
    return run(`Debian's ${names.join(', ')} could not be installed.`, command, rest, {
      log: openLog(folder, 'apt'),
      remedy: `Try by hand: apt-get update && apt-get install -y --no-install-recommends ${names.join(' ')}`,
    });
  };
  const install = () => aptGet('install', '-y', '--no-install-recommends', ...names);
  if (!hasLists()) {
    await aptGet('update');
    await install();
  } else {
    // Lists of an older day may name versions that the archive no longer has.
    await install().catch(() => aptGet('update').then(install));
  }
  const missing = wanted.filter(({ isPresent }) => !isPresent()).map(({ name }) => name);
  if (missing.length > 0) throw new Failure(`Installed, and still not found: ${missing.join(', ')}.`);
  return names.join(', ');
}

function aptCommand() {
  if (!isOnPath('apt-get')) return null;
  const quiet = ['env', 'DEBIAN_FRONTEND=noninteractive', 'apt-get'];
  if (asRoot) return quiet;
  return spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0
    ? ['sudo', '-n', ...quiet]
    : null;
}

function hasLists() {
  const folder = '/var/lib/apt/lists';
  return existsSync(folder) && readdirSync(folder).some((name) => name.includes('_Packages'));
}

// Debian's python3 finds it there; another python3 in front on the PATH may well not.
function hasScipy() {
  return existsSync('/usr/lib/python3/dist-packages/scipy');
}

function isOnPath(name) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin'];
  return folders.some((folder) => folder && existsSync(join(folder, name)));
}
