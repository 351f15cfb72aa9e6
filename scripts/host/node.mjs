import { Failure } from './failure.mjs';

export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major > 20 || (major === 20 && minor >= 9)) return;
  throw new Failure(`Hubtack needs Node.js 20.9 or newer, and this is ${process.versions.node}.`, {
    remedy: 'Install Node.js 20 (https://nodejs.org) and start again.',
  });
}
