import { spawnSync } from 'node:child_process';
import { chmodSync, chownSync, existsSync, mkdirSync, rmdirSync, statSync } from 'node:fs';
import { Failure } from './failure.mjs';
import { asRoot } from './paths.mjs';

/** Whom the server runs as: the user at hand, or under root, which PostgreSQL refuses, Debian's postgres. */
export function serverAccount(existingHome) {
  if (!asRoot) return { uid: undefined, gid: undefined };
  const owner = existingHome && statSync(existingHome);
  if (owner && owner.uid !== 0) return { uid: owner.uid, gid: owner.gid };
  const uid = idOf('-u');
  const gid = idOf('-g');
  if (uid === null || gid === null) {
    throw new Failure('PostgreSQL does not run as root, and there is no user postgres to run it as.', {
      remedy: 'Make one (useradd --system postgres), or start as an ordinary user.',
    });
  }
  return { uid, gid };
}

/** Makes a folder that only the server's user may enter, and tells whether that user really can. */
export function giveFolder(folder, account) {
  const isNew = !existsSync(folder);
  try {
    mkdirSync(folder, { recursive: true });
    chmodSync(folder, 0o700);
    if (account.uid === undefined) return true;
    chownSync(folder, account.uid, account.gid);
  } catch {
    return false;
  }
  // Asked of the system as that user: a closed folder anywhere above shuts it out.
  const canUse = spawnSync('test', ['-w', folder], { ...account, cwd: '/' }).status === 0;
  if (!canUse && isNew) rmdirSync(folder);
  return canUse;
}

function idOf(flag) {
  const { status, stdout } = spawnSync('id', [flag, 'postgres'], { encoding: 'utf8' });
  return status === 0 ? Number(stdout) : null;
}
