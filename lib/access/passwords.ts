import { hash, verify } from '@node-rs/argon2';

/** OWASP's second choice for argon2id: 19 MiB, two passes. */
const OPTIONS = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
/** Hashes waiting behind the one that runs; more are turned away, so that sign-ins cannot eat the machine. */
const MAX_WAITING = 32;

/** So many attempts wait already that another would not be answered in time. */
export class BusyError extends Error {
  override readonly name = 'BusyError';
}

let tail: Promise<unknown> = Promise.resolve();
let waiting = 0;

/** One hash at a time in a process. */
function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (waiting >= MAX_WAITING) return Promise.reject(new BusyError('Too many sign-ins at once.'));
  waiting++;
  const turn = tail.then(work).finally(() => {
    waiting--;
  });
  tail = turn.catch(() => undefined);
  return turn;
}

export function hashPassword(password: string): Promise<string> {
  return inTurn(() => hash(password.normalize('NFKC'), OPTIONS));
}

let dummy: Promise<string> | undefined;

/**
 * Whether a password belongs to a hash. Without one (no such account) a dummy is verified all the same, so that
 * the time of the answer does not tell which addresses exist.
 */
export async function verifyPassword(password: string, passwordHash: string | null): Promise<boolean> {
  dummy ??= hashPassword('no account has this password');
  const against = passwordHash ?? (await dummy);
  const matches = await inTurn(() => verify(against, password.normalize('NFKC'), OPTIONS));
  return matches && passwordHash !== null;
}

/** Passwords that everybody tries first; the length asks for the rest. */
const COMMON =
  /^(?:password|passwort|qwerty|letmein|welcome|administrator|hubtack|123456789|abcdefgh)[\W\d_]*$/i;

/** A password that is short, common or one character over and over. */
export function isWeakPassword(password: string): boolean {
  return password.length < 12 || COMMON.test(password) || new Set(password).size < 5;
}
