import { request } from 'node:http';
import { gzipSync } from 'node:zlib';
import { beforeAll, describe, expect, it } from 'vitest';
import { newSecret } from '@/lib/access/secrets';
import { systemRuntime } from '@/lib/runtime';
import { expectProblem } from './fixtures/problems';
import { send } from './fixtures/send';
import { newSiteOrganization, type SiteOrganization } from './fixtures/site';

const SMALL = 16_384;

describe('whoever the hub does not know', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const stranger = newSecret('htk', systemRuntime);
  /** Announces a body to the uploads, sends none of it, and answers the status that comes all the same. */
  const announce = (headers: Record<string, string | number>) =>
    new Promise<number>((resolve, reject) => {
      const asked = request(`${site.hub.url}/api/v1${site.at('/uploads')}`, {
        method: 'POST',
        headers: { Authorization: `Bearer ${stranger}`, 'Content-Type': 'application/json', ...headers },
      });
      const waiting = setTimeout(() => reject(new Error('The hub waits for the body.')), 5_000);
      asked.on('error', reject);
      asked.on('response', ({ statusCode = 0 }) => {
        clearTimeout(waiting);
        resolve(statusCode);
        asked.destroy();
      });
      asked.flushHeaders();
    });

  it.each([
    ['compressed', { 'Content-Encoding': 'gzip', 'Content-Length': 200 }],
    ['long', { 'Content-Length': SMALL + 1 }],
    ['of unknown length', { 'Transfer-Encoding': 'chunked' }],
  ])('is refused before a body is read that is %s', async (_, headers) => {
    expect(await announce(headers)).toBe(401);
  });

  it('sends no long body to what is open to everybody, nor one that becomes long', async () => {
    const text = JSON.stringify({ email: 'nobody@test.example', password: 'three quiet herons' });
    const signIn = (body: Buffer | string, encoding = 'identity') =>
      send(`${site.hub.url}/api/v1/sessions`, {
        headers: { 'Content-Type': 'application/json', 'Content-Encoding': encoding },
        body,
      });
    expectProblem((await signIn(text.padEnd(SMALL))) as never, 'sign_in_failed');
    expectProblem((await signIn(text.padEnd(SMALL + 1))) as never, 'body_too_large');
    expectProblem((await signIn(gzipSync(text), 'gzip')) as never, 'sign_in_failed');
    expectProblem((await signIn(gzipSync(text.padEnd(SMALL + 1)), 'gzip')) as never, 'body_too_large');
  });
});

describe('a small body', () => {
  it('costs little, though its text is the slowest to bring into one form', async () => {
    const site = await newSiteOrganization();
    // Combining marks in the wrong order: each has to pass all those before it.
    const marks = ['\u0345', '\u0315', '\u0300', '\u0327', '\u0334']
      .map((mark) => mark.repeat(30_000))
      .join('');
    const points = [{ name: `A${marks}`, easting: 1, northing: 1 }];
    const began = performance.now();
    const answer = await site.admin.post(site.at('/control-points'), { units: { length: 'ft' }, points });
    expectProblem(answer, 'nothing_accepted', ['/points/0/name name_invalid']);
    expect(performance.now() - began).toBeLessThan(3_000);
  });
});
