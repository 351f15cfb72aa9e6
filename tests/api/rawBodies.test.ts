import { createHash } from 'node:crypto';
import { gzipSync } from 'node:zlib';
import { beforeAll, describe, expect, it } from 'vitest';
import { UPLOAD_LIMIT } from '@/openapi/contracts/uploads';
import { withClient } from './fixtures/database';
import { expectProblem, places } from './fixtures/problems';
import { send } from './fixtures/send';
import { document, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex');

describe('the bytes of an upload', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const post = (body: Buffer | string, headers: Record<string, string> = {}, key = site.key) =>
    send(`${site.hub.url}/api/v1${site.at('/uploads')}`, {
      headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json', ...headers },
      body,
    });
  const newest = async () => (await site.admin.get(site.at('/uploads'))).body.data[0];
  const rawOf = (uploadId: string) =>
    send(`${site.hub.url}/api/v1${site.at(`/uploads/${uploadId}/raw`)}`, {
      method: 'GET',
      headers: { Authorization: `Bearer ${site.key}`, 'Accept-Encoding': 'identity' },
    });
  const kept = () =>
    withClient(site.hub.superuserUrl, async (client) => {
      const sql = 'select count(*)::int as count from raw_bodies where organization_id = $1';
      return (await client.query(sql, [site.organizationId])).rows[0].count as number;
    });

  it('are served exactly as they came, as an attachment that no browser renders', async () => {
    const text = `  ${JSON.stringify(document('odd', { setups: [resection('odd-1')] }), null, 3)}\r\n\t`;
    const { body } = await post(text);
    const upload = body?.upload as { id: string; sha256: string };
    const raw = await rawOf(upload.id);
    expect(raw.bytes.equals(Buffer.from(text))).toBe(true);
    expect(upload.sha256).toBe(sha256(raw.bytes));
    expect(raw.headers).toMatchObject({
      'content-type': 'application/octet-stream',
      'content-disposition': `attachment; filename="upload-${upload.id}.bin"`,
      'x-content-type-options': 'nosniff',
      'content-security-policy': "default-src 'none'; sandbox",
      'cache-control': 'no-store',
    });
  });

  it('are served compressed where they came compressed', async () => {
    const bytes = gzipSync(JSON.stringify(document('packed', { setups: [resection('packed-1')] })));
    const answer = await post(bytes, { 'Content-Encoding': 'gzip' });
    expect(answer.status).toBe(201);
    const upload = answer.body?.upload as { id: string };
    expect(upload).toMatchObject({ contentEncoding: 'gzip', sha256: sha256(bytes), size: bytes.length });
    const raw = await rawOf(upload.id);
    expect(raw.bytes.equals(bytes)).toBe(true);
    expect(raw.headers['content-encoding']).toBeUndefined();
    expect(raw.headers['content-disposition']).toContain('.gz"');
  });

  it('are known again compressed anew, or not at all', async () => {
    const text = JSON.stringify(document('again', { setups: [resection('again-1')] }));
    const gzip = { 'Content-Encoding': 'gzip' };
    const [first, other] = [gzipSync(text, { level: 9 }), gzipSync(text, { level: 1 })];
    expect(first.equals(other)).toBe(false);
    const keyed = { ...gzip, 'Idempotency-Key': 'packed-again' };
    const { status, bytes } = await post(first, keyed);
    expect(status).toBe(201);
    const replayed = await post(other, keyed);
    expect(replayed.headers['idempotency-replayed']).toBe('true');
    expect(replayed.bytes.equals(bytes)).toBe(true);
    for (const again of [await post(first, gzip), await post(other, gzip), await post(text)]) {
      expect(again.status).toBe(200);
      expect(again.body).toEqual(JSON.parse(bytes.toString()));
    }
    const changed = gzipSync(text.replace('ST-1', 'ST-2'));
    expectProblem((await post(changed, gzip)) as never, 'upload_conflict');
    // What came as it is may come compressed the next time.
    const plain = JSON.stringify(document('plain', { setups: [resection('plain-1')] }));
    expect((await post(plain)).status).toBe(201);
    expect((await post(gzipSync(plain), gzip)).status).toBe(200);
  });

  const sound = JSON.stringify(document('x', { setups: [resection('x')] }));
  const refusals: [string, Buffer | string, Record<string, string>, Parameters<typeof expectProblem>[1]][] = [
    ['broken JSON', sound.slice(0, -3), {}, 'body_unreadable'],
    ['text that is no JSON', 'ST-1 5000 8000', {}, 'body_unreadable'],
    ['bytes that are not UTF-8', Buffer.from([0x7b, 0x22, 0xff, 0xfe, 0x22, 0x7d]), {}, 'body_unreadable'],
    ['JSON nested 10,000 deep', '['.repeat(10_000) + ']'.repeat(10_000), {}, 'json_too_deep'],
    ['truncated gzip', gzipSync(sound).subarray(0, 200), { 'Content-Encoding': 'gzip' }, 'body_unreadable'],
    ['gzip that is none', sound, { 'Content-Encoding': 'gzip' }, 'body_unreadable'],
    ['another compression', sound, { 'Content-Encoding': 'br' }, 'media_type_unsupported'],
    ['another media type', sound, { 'Content-Type': 'text/html' }, 'media_type_unsupported'],
    ['no media type', sound, { 'Content-Type': '' }, 'media_type_unsupported'],
    [
      'another charset',
      sound,
      { 'Content-Type': 'application/json; charset=latin1' },
      'media_type_unsupported',
    ],
    ['JSON that is no object', '[1]', {}, 'invalid'],
    ['null', 'null', {}, 'invalid'],
  ];
  it.each(refusals)('are kept and listed as refused: %s', async (_, body, headers, code) => {
    const answer = await post(body, headers);
    const problem = expectProblem(answer as never, code);
    if (code === 'media_type_unsupported')
      expect(answer.headers).toMatchObject({
        accept: 'application/json, text/csv',
        'accept-encoding': 'gzip',
      });
    const upload = await newest();
    const bytes = Buffer.from(body);
    expect(upload).toMatchObject({
      clientId: null,
      status: 'refused',
      sha256: sha256(bytes),
      size: bytes.length,
    });
    expect((await rawOf(upload.id)).bytes.equals(bytes)).toBe(true);
    const { body: receipt } = await site.admin.get(site.at(`/uploads/${upload.id}`)).expect(200);
    expect(receipt.refused).toHaveLength(1);
    if (code === 'invalid') expect(receipt.refused).toEqual(problem.errors);
    else expect(places(receipt.refused)).toEqual([` ${code}`]);
  });

  const nothing: [string, () => ReturnType<typeof post>, Parameters<typeof expectProblem>[1]][] = [
    ['over the limit', () => post(Buffer.alloc(UPLOAD_LIMIT + 1, 0x20)), 'body_too_large'],
    [
      'over the limit once decompressed',
      () => post(gzipSync(Buffer.alloc(UPLOAD_LIMIT + 1, 0x20)), { 'Content-Encoding': 'gzip' }),
      'body_too_large',
    ],
    ['empty', () => post(''), 'body_required'],
    ['without a key', () => post(sound, { Authorization: '' }), 'unauthenticated'],
    ['with a key that may not post', () => post(sound, {}, site.people.analyst.key), 'forbidden'],
  ];
  it.each(nothing)('are not kept: %s', async (_, sendIt, code) => {
    const before = await kept();
    expectProblem((await sendIt()) as never, code);
    expect(await kept()).toBe(before);
  });

  it('are not kept for a project that is not there', async () => {
    const before = await kept();
    const path = '/projects/0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44/uploads';
    expectProblem(await site.admin.post(path, document('x', { setups: [resection('x')] })), 'not_found');
    expect(await kept()).toBe(before);
  });

  it('take an upload of the very limit', async () => {
    const text = JSON.stringify(document('full', { setups: [resection('full-1')] }));
    const answer = await post(text + ' '.repeat(UPLOAD_LIMIT - Buffer.byteLength(text)));
    expect(answer.status).toBe(201);
  });
});
