import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Failure } from './failure.mjs';

/** What one hub keeps between starts: passwords, the signing secret, ports, the demo's sign-ins. */
export function openState(folder, name) {
  const file = join(folder, `${name}.json`);
  const values = existsSync(file) ? parsed(file) : {};
  const save = () => {
    writeFileSync(`${file}.new`, `${JSON.stringify(values, null, 2)}\n`, { mode: 0o600, flush: true });
    chmodSync(`${file}.new`, 0o600);
    renameSync(`${file}.new`, file);
  };
  return { file, values, save };
}

/** 256 random bits, in letters that need no escaping in an address or in SQL. */
export const newSecret = () => randomBytes(32).toString('base64url');

function parsed(file) {
  const text = readFileSync(file, 'utf8');
  try {
    return JSON.parse(text);
  } catch (error) {
    throw new Failure(`${file} cannot be read: ${error.message}.`, {
      remedy: 'It holds the passwords of the database beside it: put back a good copy, or move both away.',
    });
  }
}
