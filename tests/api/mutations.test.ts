import { randomUUID } from 'node:crypto';
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { type Contract, successStatus } from '@/openapi/contract';
import { CONTRACTS } from '@/openapi/contracts';
import { createUpload } from '@/openapi/contracts/uploads';
import { REQUEST_PROBLEMS } from '@/openapi/problemCodes';
import { Problem } from '@/openapi/schemas/problem';
import { withClient } from './fixtures/database';
import { BODIES, type FullOrganization, newFullOrganization, pathOf } from './fixtures/everything';
import { levelRun, pegTest } from './fixtures/levels';
import { minutesAgo } from './fixtures/moments';
import { mutate, mutations } from './fixtures/mutations';
import { type Sent, send } from './fixtures/send';
import { document, groundShot, resection, shotsTo, UNITS } from './fixtures/site';

/** Sign-in counts failures and hashes; a thousand of them would tell of the throttle alone. */
const LEFT_OUT = ['signIn', 'acceptInvitation'];

describe('a body that was mutated', () => {
  let site: FullOrganization;
  beforeAll(async () => {
    site = await newFullOrganization();
  });

  const post = (path: string, method: string, text: string) =>
    send(`${site.hub.url}/api/v1${path}`, {
      method: method.toUpperCase(),
      headers: { Authorization: `Bearer ${site.key}`, 'Content-Type': 'application/json' },
      body: text,
    });

  /** Any answer but a failure of the hub's own, in the form that its contract or the problem document has. */
  function expectAnswer(operation: Contract, answer: Sent): void {
    expect(answer.status).toBeLessThan(500);
    if (answer.status < 400) {
      expect(answer.headers['content-type']).toBe('application/json');
      operation.answers[answer.status].json?.parse(answer.body);
      return;
    }
    expect(answer.headers['content-type']).toBe('application/problem+json');
    const { code, status, errors } = Problem.strict().parse(answer.body);
    expect(status).toBe(answer.status);
    expect(REQUEST_PROBLEMS[code as keyof typeof REQUEST_PROBLEMS].status).toBe(status);
    if (status === 422 && code !== 'idempotency_mismatch') expect(errors?.length).toBeGreaterThan(0);
  }

  /** An upload with an item of each kind, all of them good. */
  function soundUpload(id: string) {
    const observedAt = minutesAgo(20);
    const place = { easting: 5100, northing: 8200, elevation: 399.5 };
    const { horizontal, zenith, ...rest } = groundShot(place);
    const bench = {
      machine: 'DZ-3',
      benchmark: 'BM-1',
      edge: 'left',
      elevations: [411.2, 411.3],
      tolerance: 0.05,
    };
    return {
      ...document(id, {
        setups: [
          {
            ...resection(`${id}-s`),
            shots: [...resection('').shots, ...shotsTo('HT-5', { purpose: 'check' })],
            atmosphere: { temperature: 59, pressure: 29.5, humidityPercent: 40 },
          },
          resection(`${id}-t`),
        ],
        setupChecks: [
          { clientId: `${id}-c`, setup: `${id}-t`, purpose: 'check', observedAt, shots: shotsTo('BM-1') },
        ],
        gradeShots: [
          { clientId: `${id}-g`, layer: 'subgrade', position: place, observedAt },
          {
            clientId: `${id}-h`,
            layer: 'subgrade',
            setup: `${id}-s`,
            shot: { horizontal, zenith, ...rest },
            observedAt,
          },
        ],
        benchChecks: [{ clientId: `${id}-b`, ...bench, setup: `${id}-s`, layer: 'subgrade', observedAt }],
        roverPoints: [],
        levelRuns: [levelRun(`${id}-l`)],
        pegTests: [pegTest(`${id}-p`)],
      }),
      units: UNITS,
      confirmUnits: false,
    };
  }

  it('and sent as an upload is answered in form, and its bytes are kept: 800 of them', async () => {
    const rows = () =>
      withClient(site.hub.superuserUrl, async (client) => {
        const sql = 'select count(*)::int as count from raw_bodies where organization_id = $1';
        return (await client.query(sql, [site.organizationId])).rows[0].count as number;
      });
    const before = await rows();
    let kept = 0;
    let run = 0;
    const seen = new Map<string, number>();
    await fc.assert(
      fc.asyncProperty(mutations, async (changes) => {
        const text = mutate(soundUpload(`m-${++run}-${randomUUID().slice(0, 8)}`), changes);
        const answer = await post(site.at('/uploads'), 'post', text);
        expectAnswer(createUpload, answer);
        const code = answer.status < 400 ? String(answer.status) : (answer.body?.code as string);
        seen.set(code, (seen.get(code) ?? 0) + 1);
        if (code !== '200' && code !== 'body_required') kept++;
      }),
      { numRuns: 800, seed: 20_310_412 },
    );
    expect((await rows()) - before).toBe(kept);
    // The mutations reach every door, not the first alone.
    for (const code of ['201', 'invalid', 'body_unreadable', 'json_too_deep'])
      expect([code, seen.get(code) ?? 0]).toEqual([code, expect.toSatisfy((n: number) => n >= 10)]);
  }, 240_000);

  it('and sent to any other operation is answered in form: 800 of them', async () => {
    const operations = CONTRACTS.filter(
      ({ body, id }) => body && id !== createUpload.id && !LEFT_OUT.includes(id),
    );
    const seen = new Set<string>();
    await fc.assert(
      fc.asyncProperty(fc.constantFrom(...operations), mutations, async (operation, changes) => {
        const text = mutate(BODIES[operation.id](randomUUID(), site), changes);
        const answer = await post(pathOf(operation, site.values), operation.method, text);
        expectAnswer(operation, answer);
        seen.add(`${operation.id} ${answer.status === successStatus(operation)}`);
      }),
      { numRuns: 800, seed: 20_310_413 },
    );
    for (const { id } of operations) expect([...seen].some((entry) => entry.startsWith(`${id} `))).toBe(true);
  }, 240_000);
});
