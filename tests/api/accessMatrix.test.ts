import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { newSecret } from '@/lib/access/secrets';
import { systemRuntime } from '@/lib/runtime';
import { type Contract, successStatus } from '@/openapi/contract';
import { CONTRACTS } from '@/openapi/contracts';
import { Problem } from '@/openapi/schemas/problem';
import { SCOPE_NAMES, type Scope } from '@/openapi/scopes';
import { withClient } from './fixtures/database';
import {
  BODIES,
  type FullOrganization,
  missing,
  newFullOrganization,
  parametersOf,
  pathOf,
} from './fixtures/everything';
import { type Sent, send } from './fixtures/send';
import { newSite } from './fixtures/site';

const isPublic = ({ access }: Contract) => access === 'public';
const scopeOf = ({ access }: Contract) =>
  SCOPE_NAMES.includes(access as Scope) ? (access as Scope) : undefined;

/** Operations on the asker's own session, which a key has none of. */
const OF_SESSIONS = ['signOut'];

/** Operations on the organization as a whole, which a key for some of its projects has no part in. */
const OF_ORGANIZATIONS = [
  'listPeople',
  'createPerson',
  'getPerson',
  'updatePerson',
  'reinvitePerson',
  'createProject',
  ...CONTRACTS.filter(({ tag }) => tag === 'Webhooks').map(({ id }) => id),
];

describe('every operation', () => {
  let mine: FullOrganization;
  let theirs: FullOrganization;
  let keys: Record<'revoked' | 'expired' | 'unknown' | 'right' | 'foreign' | 'elsewhere', string>;
  const without = new Map<Scope, string>();
  beforeAll(async () => {
    [mine, theirs] = await Promise.all([newFullOrganization(), newFullOrganization()]);
    const elsewhere = await newSite(mine.admin, 'Elsewhere');
    const [revoked, expired] = [await mine.newKey(), await mine.newKey()];
    const idOf = async (key: string) => {
      const { body } = await mine.admin.get('/api-keys?limit=200');
      return body.data.find(({ prefix }: { prefix: string }) => key.startsWith(prefix)).id as string;
    };
    await mine.admin.post(`/api-keys/${await idOf(revoked)}/revoke`).expect(200);
    const expiredId = await idOf(expired);
    await withClient(mine.hub.superuserUrl, (client) =>
      client.query(`update api_keys set expires_at = now() - interval '1 second' where id = $1`, [expiredId]),
    );
    keys = {
      revoked,
      expired,
      unknown: newSecret('htk', systemRuntime),
      right: await mine.newKey(),
      foreign: theirs.key,
      elsewhere: await mine.newKey(SCOPE_NAMES, [elsewhere.projectId]),
    };
    for (const scope of SCOPE_NAMES)
      without.set(scope, await mine.newKey(SCOPE_NAMES.filter((other) => other !== scope)));
  }, 60_000);

  /** Asks for an operation with what it takes, as the holder of a key. */
  function ask(operation: Contract, key: string | null, values = mine.values, of = mine): Promise<Sent> {
    const { body, id, method } = operation;
    if (body && !(id in BODIES)) throw new Error(`There is no body for ${id} in BODIES.`);
    return send(`${mine.hub.url}/api/v1${pathOf(operation, values)}`, {
      method: method.toUpperCase(),
      headers: {
        ...(key === null ? {} : { Authorization: `Bearer ${key}` }),
        ...(body ? { 'Content-Type': 'application/json' } : {}),
      },
      body: body ? JSON.stringify(BODIES[id](randomUUID(), of)) : undefined,
    });
  }
  const codeOf = (answer: Sent) => (answer.status < 400 ? null : Problem.parse(answer.body).code);
  const outcome = (answer: Sent) => [answer.status, codeOf(answer)];
  /** What two answers to the same question have in common: all but the request's own marks. */
  const essence = ({ status, headers, bytes }: Sent) => {
    const { date: _d, 'request-id': id, etag: _e, ...rest } = headers;
    const text = bytes
      .toString()
      .replaceAll(id, '')
      .replace(/"instance":"[^"]*"/, '');
    return { status, headers: rest, text };
  };

  const all = CONTRACTS.map((operation) => [operation.id, operation] as const);
  const guarded = all.filter(([, operation]) => !isPublic(operation));
  const scoped = all.filter(([, operation]) => scopeOf(operation));
  const named = guarded.filter(([, operation]) => parametersOf(operation).length > 0);
  const ofProjects = named.filter(([, operation]) => parametersOf(operation).includes('projectId'));

  it.each(guarded)('%s is refused to whoever shows no good key', async (_, operation) => {
    expect(outcome(await ask(operation, null))).toEqual([401, 'unauthenticated']);
    expect(outcome(await ask(operation, 'htk_0123'))).toEqual([401, 'unauthenticated']);
    expect(outcome(await ask(operation, keys.unknown))).toEqual([401, 'unauthenticated']);
    expect(outcome(await ask(operation, keys.revoked))).toEqual([401, 'key_revoked']);
    expect(outcome(await ask(operation, keys.expired))).toEqual([401, 'key_expired']);
    expect((await ask(operation, null)).headers['www-authenticate']).toBe('Bearer realm="hubtack"');
  });

  it.each(scoped)('%s is refused to a key that lacks its scope', async (_, operation) => {
    const key = without.get(scopeOf(operation) as Scope) as string;
    expect(outcome(await ask(operation, key))).toEqual([403, 'forbidden']);
    // Nor does such a key learn what exists.
    const nothing = Object.fromEntries(parametersOf(operation).map((name) => [name, missing(name)]));
    expect(outcome(await ask(operation, key, nothing))).toEqual([403, 'forbidden']);
  });

  it.each(named)('%s answers somebody else’s things exactly as what does not exist', async (_, operation) => {
    const parameters = parametersOf(operation);
    for (const foreign of parameters) {
      // The asker's own things, save one that belongs to the other organization.
      const own = theirs.values;
      const borrowed = await ask(
        operation,
        keys.foreign,
        { ...own, [foreign]: mine.values[foreign] },
        theirs,
      );
      const nowhere = await ask(operation, keys.foreign, { ...own, [foreign]: missing(foreign) }, theirs);
      const isName = foreign.endsWith('Name');
      if (isName) expect(outcome(nowhere)).toEqual([404, 'not_found']);
      else {
        expect(outcome(borrowed)).toEqual([404, 'not_found']);
        expect(essence(borrowed)).toEqual(essence(nowhere));
      }
    }
    const everything = await ask(operation, keys.foreign, mine.values, theirs);
    expect(outcome(everything)).toEqual([404, 'not_found']);
    // The name that was asked for comes back in words; the rest is one and the same.
    const nameless = { ...mine.values };
    for (const name of parameters) if (!name.endsWith('Name')) nameless[name] = missing(name);
    expect(essence(everything)).toEqual(essence(await ask(operation, keys.foreign, nameless, theirs)));
  });

  it.each(ofProjects)('%s answers a key that is bound to another project the same', async (_, operation) => {
    const other = await ask(operation, keys.elsewhere);
    expect(outcome(other)).toEqual([404, 'not_found']);
    const nowhere = await ask(operation, keys.elsewhere, { ...mine.values, projectId: missing('projectId') });
    expect(essence(other)).toEqual(essence(nowhere));
  });

  it.each(guarded.filter(([id]) => OF_ORGANIZATIONS.includes(id)))(
    '%s is refused to a key that is bound to projects',
    async (_, operation) => {
      expect(outcome(await ask(operation, keys.elsewhere))).toEqual([403, 'forbidden']);
    },
  );

  it.each(named)('%s takes what cannot be an id or a name for what does not exist', async (_, operation) => {
    for (const name of parametersOf(operation)) {
      for (const wrong of ["x' or '1'='1", '-', '../..', 'ü€𝕏', '0', 'null', 'x'.repeat(200)]) {
        const answer = await ask(operation, keys.right, { ...mine.values, [name]: wrong });
        expect([answer.status, wrong]).toEqual([404, wrong]);
      }
    }
  });

  // Reading first, then what changes things: the order of the document does not matter to the others.
  const reads = guarded.filter(([, { method }]) => method === 'get');
  const writes = guarded.filter(([, { method }]) => method !== 'get');

  it.each(reads)('%s is answered to the right key, by HEAD too', async (_, operation) => {
    const answer = await ask(operation, keys.right);
    expect(answer.status).toBe(successStatus(operation));
    const head = await send(`${mine.hub.url}/api/v1${pathOf(operation, mine.values)}`, {
      method: 'HEAD',
      headers: { Authorization: `Bearer ${keys.right}` },
    });
    expect([head.status, head.bytes.length]).toEqual([answer.status, 0]);
    expect(head.headers['content-type']).toBe(answer.headers['content-type']);
  });

  // A refit comes last of what is done to a setup, a revocation of what is done to a key.
  const last = [
    'withdrawSetup',
    'refitSetup',
    'rotateApiKey',
    'revokeApiKey',
    'deleteWebhookEndpoint',
    ...OF_SESSIONS,
  ];
  const inOrder = [...writes].sort(([a], [b]) => last.indexOf(a) - last.indexOf(b));
  it.each(inOrder)('%s is done for the right key', async (id, operation) => {
    const answer = await ask(operation, keys.right);
    if (OF_SESSIONS.includes(id)) expect(outcome(answer)).toEqual([403, 'forbidden']);
    else expect(Object.keys(operation.answers).map(Number)).toContain(answer.status);
  });

  it.each(all.filter(([, operation]) => isPublic(operation)))(
    '%s is answered to anybody',
    async (_, operation) => {
      const answer = await ask(operation, null);
      expect(['unauthenticated', 'forbidden', 'internal']).not.toContain(codeOf(answer));
      if (operation.method === 'get') expect(answer.status).toBe(successStatus(operation));
    },
  );

  it('lists nothing of another organization', async () => {
    const ids = Object.entries(mine.values).filter(([name]) => !name.endsWith('Name'));
    for (const [, operation] of reads.filter(([, { path }]) => !path.includes('{'))) {
      const { bytes } = await ask(operation, keys.foreign, theirs.values, theirs);
      for (const [, id] of ids) expect(bytes.toString()).not.toContain(id);
    }
  });
});
