import { createHash } from 'node:crypto';
import { crc32 } from 'node:zlib';
import type { Runtime } from '@/lib/runtime';

const ALPHABET = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz';
const RANDOM_BYTES = 20;
/** 62^27 > 2^160 and 62^6 > 2^32: fixed lengths, so that a pattern can recognise a leaked secret. */
const RANDOM_DIGITS = 27;
const CHECK_DIGITS = 6;
const SECRET = new RegExp(`^(?:htk|hti)_[0-9A-Za-z]{${RANDOM_DIGITS + CHECK_DIGITS}}$`);
const SHOWN = 10;

/** `htk_` API keys and `hti_` invitations: 160 random bits and a CRC-32 over what stands before it. */
export type SecretKind = 'htk' | 'hti';

function base62(value: bigint, digits: number): string {
  let text = '';
  for (let rest = value, i = 0; i < digits; i++, rest /= 62n) text = ALPHABET[Number(rest % 62n)] + text;
  return text;
}

export function newSecret(kind: SecretKind, runtime: Runtime): string {
  const random = BigInt(`0x${runtime.random(RANDOM_BYTES).toString('hex')}`);
  const body = `${kind}_${base62(random, RANDOM_DIGITS)}`;
  return body + base62(BigInt(crc32(body)), CHECK_DIGITS);
}

/** Whether a text has the form and the checksum of a secret: a mistyped one needs no look into the database. */
export function isSecret(text: string, kind: SecretKind): boolean {
  if (!SECRET.test(text) || !text.startsWith(`${kind}_`)) return false;
  const body = text.slice(0, -CHECK_DIGITS);
  return text.slice(-CHECK_DIGITS) === base62(BigInt(crc32(body)), CHECK_DIGITS);
}

/** What is kept of a secret, an address or a session: its SHA-256 (sound for secrets of 112 bits and more). */
export function sha256(text: string | Uint8Array): Buffer {
  return createHash('sha256').update(text).digest();
}

/** The first characters, by which people tell keys apart. */
export function shownPrefix(secret: string): string {
  return secret.slice(0, SHOWN);
}

/** An address as it is compared: without regard to case. */
export function emailHandle(email: string): Buffer {
  return sha256(`email:${normalEmail(email)}`);
}

export function normalEmail(email: string): string {
  return email.trim().normalize('NFC').toLowerCase();
}
