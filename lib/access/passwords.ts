import { hash, verify } from '@node-rs/argon2';
import { Turns } from '@/lib/turns';

/** OWASP's second choice for argon2id: 19 MiB, two passes. */
const OPTIONS = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
/** One hash at a time in a process; so many wait at most that sign-ins cannot eat the machine. */
const turns = new Turns(32, 'Too many sign-ins at once.');

export function hashPassword(password: string): Promise<string> {
  return turns.take(() => hash(password.normalize('NFKC'), OPTIONS));
}

let dummy: Promise<string> | undefined;

/**
 * Whether a password belongs to a hash. Without one (no such account) a dummy is verified all the same, so that
 * the time of the answer does not tell which addresses exist.
 */
export async function verifyPassword(password: string, passwordHash: string | null): Promise<boolean> {
  dummy ??= hashPassword('no account has this password');
  const against = passwordHash ?? (await dummy);
  const matches = await turns.take(() => verify(against, password.normalize('NFKC'), OPTIONS));
  return matches && passwordHash !== null;
}

/** Passwords that everybody tries first; the length asks for the rest. */
const COMMON =
  /^(?:password|passwort|qwerty|letmein|welcome|administrator|hubtack|123456789|abcdefgh)[\W\d_]*$/i;

/** A password that is short, common or one character over and over. */
export function isWeakPassword(password: string): boolean {
  return password.length < 12 || COMMON.test(password) || new Set(password).size < 5;
}
