import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { Failure } from './failure.mjs';

const oldestMajor = 15;
const debianFolder = '/usr/lib/postgresql';

/**
 * The folder of the newest PostgreSQL server programs on this machine, or of the asked major version.
 * HUBTACK_POSTGRES_BIN names one folder to use instead of looking around.
 */
export function findServerPrograms(major) {
  const named = process.env.HUBTACK_POSTGRES_BIN;
  const folders = named ? [named] : [...debianFolders(), ...(process.env.PATH ?? '').split(delimiter)];
  for (const folder of folders) {
    if (!folder || !existsSync(join(folder, 'postgres')) || !existsSync(join(folder, 'initdb'))) continue;
    const found = majorOf(folder);
    if (major ? found === major : found >= oldestMajor) return { folder, major: found };
  }
  if (!named) return null;
  throw new Failure(
    `HUBTACK_POSTGRES_BIN names ${named}, which holds no PostgreSQL ${major ?? '15 or newer'}.`,
    {
      remedy: 'Name a folder with postgres and initdb in it, or leave it out to have one found.',
    },
  );
}

export function requireServerPrograms(major) {
  const programs = findServerPrograms(major);
  if (programs) return programs;
  if (!major) throw new Failure('No PostgreSQL server, 15 or newer, is installed here.');
  throw new Failure(`The hub's data was made by PostgreSQL ${major}, which is not installed here.`, {
    remedy: `Install it (Debian: apt-get install postgresql-${major}), and start again.`,
  });
}

function debianFolders() {
  if (!existsSync(debianFolder)) return [];
  const versions = readdirSync(debianFolder).filter((name) => /^\d+$/.test(name));
  return versions.sort((a, b) => Number(b) - Number(a)).map((name) => join(debianFolder, name, 'bin'));
}

function majorOf(folder) {
  const { stdout } = spawnSync(join(folder, 'postgres'), ['--version'], { encoding: 'utf8' });
  return Number(/\(PostgreSQL\) (\d+)/.exec(stdout ?? '')?.[1] ?? 0);
}
