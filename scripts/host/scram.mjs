import { createHash, createHmac, pbkdf2Sync, randomBytes } from 'node:crypto';

/** A password as PostgreSQL stores it (RFC 5803), so that the server and its log never see the plain one. */
export function scramVerifier(password, salt = randomBytes(16), iterations = 4096) {
  const salted = pbkdf2Sync(password, salt, iterations, 32, 'sha256');
  const keyed = (text) => createHmac('sha256', salted).update(text).digest();
  const storedKey = createHash('sha256').update(keyed('Client Key')).digest('base64');
  const serverKey = keyed('Server Key').toString('base64');
  return `SCRAM-SHA-256$${iterations}:${salt.toString('base64')}$${storedKey}:${serverKey}`;
}
