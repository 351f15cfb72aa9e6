import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, realpathSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';
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
    const programs = programsIn(folder);
    if (programs && (major ? programs.major === major : programs.major >= oldestMajor)) return programs;
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

function programsIn(place) {
  if (!place || !existsSync(join(place, 'postgres'))) return null;
  // A link on the PATH may stand alone; the programs that belong together are where it leads.
  const folder = dirname(realpathSync(join(place, 'postgres')));
  if (!['initdb', 'pg_ctl'].every((name) => existsSync(join(folder, name)))) return null;
  const { stdout } = spawnSync(join(folder, 'postgres'), ['--version'], { encoding: 'utf8' });
  return { folder, major: Number(/\(PostgreSQL\) (\d+)/.exec(stdout ?? '')?.[1] ?? 0) };
}
