import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Failure } from './failure.mjs';
import { root } from './paths.mjs';

/** Holds against the version that package.json asks for, before npm would only warn of it. */
export function requireNode() {
  const { engines } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'));
  const [major, minor] = /(\d+)\.(\d+)/.exec(engines.node).slice(1).map(Number);
  const [ourMajor, ourMinor] = process.versions.node.split('.').map(Number);
  if (ourMajor > major || (ourMajor === major && ourMinor >= minor)) return;
  throw new Failure(
    `Hubtack needs Node.js ${major}.${minor} or newer, and this is ${process.versions.node}.`,
    {
      remedy: 'Install a newer one (https://nodejs.org) and start again.',
    },
  );
}
