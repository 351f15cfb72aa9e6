import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { newOrganization } from '@/tests/setup/organization';
import { EXAMPLES, LANGUAGES, walk } from './walks';

let organization: Awaited<ReturnType<typeof newOrganization>>;
/** A copy of the examples whose data has been spoilt. */
const spoilt = `${mkdtempSync(join(tmpdir(), 'hubtack-examples-'))}/`;

beforeAll(async () => {
  organization = await newOrganization();
  cpSync(EXAMPLES, spoilt, { recursive: true });
  for (const name of ['setup-good', 'setup-backsight']) {
    const setup = `${spoilt}data/${name}.json`;
    writeFileSync(setup, readFileSync(setup, 'utf8').replace('"face": "left"', '"face": "right"'));
  }
});

afterAll(() => rmSync(spoilt, { recursive: true }));

const WALKS = (['walk', 'control-walk'] as const).flatMap((name) =>
  LANGUAGES.map((language) => [name, language] as const),
);

describe.each(WALKS)('the %s in %s stops', (name, language) => {
  it('where a setting is missing, and names it', async () => {
    const { code, problem } = await walk(name, language, { HUBTACK_URL: organization.hub.url });
    expect(code).toBe(1);
    expect(problem).toMatch(/HUBTACK_KEY.*README/);
  });

  it('where no hub answers, and says so', async () => {
    const settings = { HUBTACK_URL: 'http://127.0.0.1:1', HUBTACK_KEY: organization.key };
    const { code, problem } = await walk(name, language, settings);
    expect(code).toBe(1);
    expect(problem).toContain('http://127.0.0.1:1 does not answer');
  });

  it('where the key may not do it, and prints the code and the detail', async () => {
    const key = await organization.newKey(['projects:read']);
    const { code, problem } = await walk(name, language, {
      HUBTACK_URL: organization.hub.url,
      HUBTACK_KEY: key,
    });
    expect(code).toBe(1);
    expect(problem).toMatch(/^POST (\/api\/v1)?\/projects: 403 \w+\. .*projects:write/m);
  });

  it('at an item that is refused, and prints pointer, code, detail and fix', async () => {
    const settings = { HUBTACK_URL: organization.hub.url, HUBTACK_KEY: organization.key };
    const { code, out, problem } = await walk(name, language, settings, spoilt);
    expect(code).toBe(1);
    expect(out).toContain('Level run');
    expect(out).not.toMatch(/Setup|Released/);
    expect(problem).toMatch(/\/setups\/0\/shots\/0\/\w+ \(face_mismatch\): .+ .+/);
  });
});
