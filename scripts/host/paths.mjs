import { chmodSync, existsSync, mkdirSync } from 'node:fs';
import { join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

export const root = resolve(fileURLToPath(new URL('../..', import.meta.url)));

export const asRoot = process.getuid?.() === 0;

/** The folder that keeps the cluster, its passwords and the logs; made where it is missing. */
export function openDataFolder() {
  const folder = resolve(process.env.HUBTACK_DATA || join(root, '.hubtack'));
  if (!existsSync(folder)) {
    mkdirSync(folder, { recursive: true });
    // Under root the server runs as another user, who must be able to pass through to its own folder.
    chmodSync(folder, asRoot ? 0o711 : 0o700);
  }
  mkdirSync(join(folder, 'logs'), { recursive: true, mode: 0o700 });
  return folder;
}

/** A path as a person in the checkout would type it. */
export function shown(path) {
  const near = relative(process.cwd(), path);
  return near.startsWith('..') ? path : near || '.';
}
