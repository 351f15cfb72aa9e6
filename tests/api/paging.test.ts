import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  newLayer,
  newSite,
  newSiteOrganization,
  resection,
  type SiteOrganization,
} from './fixtures/site';

type Item = Record<string, unknown>;

describe('lists', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    const { surface } = await newLayer(site.admin, site.at);
    for (const name of ['a', 'B', 'c']) {
      await site.admin.post(site.at('/layers'), {
        units: { length: 'ft' },
        name,
        surfaceId: surface.id,
        offset: 0,
        tolerance: { below: 1, above: 1 },
      });
      await site.admin.post(site.at('/instruments'), { name, kind: 'machine' }).expect(201);
      const plane = {
        through: { easting: 0, northing: 0, elevation: name.charCodeAt(0) },
        azimuth: 0,
        slopePercent: 0,
      };
      const body = { units: { length: 'ft' }, name, represents: 'other', plane };
      await site.admin.post(site.at('/surfaces'), body).expect(201);
      await newSite(site.admin, `Site ${name}`);
      await site.admin.post('/api-keys', { name, scopes: ['events:read'] }).expect(201);
      await site.admin.post('/people', {
        name,
        email: `${name}-${site.projectId}@test.example`,
        role: 'analyst',
      });
    }
    for (const n of [1, 2, 3, 4, 5]) {
      const position = { easting: 5000, northing: 8000, elevation: 399.5 };
      const observedAt = minutesAgo(n);
      const { body } = await site
        .upload(
          document(`u-${n}`, {
            setups: [resection(`s-${n}`)],
            gradeShots: [{ clientId: `g-${n}`, layer: 'subgrade', position, observedAt }],
            benchChecks: [
              {
                clientId: `b-${n}`,
                machine: 'DZ-3',
                benchmark: 'BM-1',
                edge: 'left',
                elevations: [411],
                tolerance: 1,
                observedAt,
              },
            ],
          }),
        )
        .expect(201);
      const path = site.at(`/setups/${body.setups[0].id}`);
      await site.admin.post(`${path}/release`, { machine: 'DZ-3', layer: 'subgrade' }).expect(200);
      await site.admin.post(`${path}/withdraw`, {}).expect(200);
    }
  });

  const all = async (path: string, limit: number): Promise<Item[]> => {
    const found: Item[] = [];
    let cursor: string | null = null;
    do {
      const tail: string = cursor ? `&cursor=${cursor}` : '';
      const joint = path.includes('?') ? '&' : '?';
      const { body } = await site.admin.get(`${path}${joint}limit=${limit}${tail}`).expect(200);
      if (body.nextCursor) expect(body.data).toHaveLength(limit);
      found.push(...body.data);
      cursor = body.nextCursor;
    } while (cursor);
    return found;
  };

  const lists: [string, string, string][] = [
    ['projects', '/projects', 'id'],
    ['people', '/people', 'id'],
    ['API keys', '/api-keys', 'id'],
    ['audit entries', '/audit-entries', 'id'],
    ['control points', 'control-points', 'name'],
    ['instruments', 'instruments', 'name'],
    ['layers', 'layers', 'name'],
    ['surfaces', 'surfaces', 'id'],
    ['uploads', 'uploads', 'id'],
    ['setups', 'setups', 'id'],
    ['withdrawn setups', 'setups?status=withdrawn', 'id'],
    ['acknowledgements', 'acknowledgements', 'id'],
    ['grade checks', 'grade-checks', 'id'],
    ['bench checks', 'bench-checks', 'id'],
  ];
  const pathOf = (path: string) => (path.startsWith('/') ? path : site.at(`/${path}`));

  it.each(lists)(
    'of %s come in pages of any size, nothing twice and nothing skipped',
    async (_, path, key) => {
      const whole = await all(pathOf(path), 200);
      expect(whole.length).toBeGreaterThanOrEqual(4);
      const ids = whole.map((item) => item[key] as string);
      expect(new Set(ids).size).toBe(ids.length);
      for (const limit of [1, 3]) expect(await all(pathOf(path), limit)).toEqual(whole);
      // By name, or newest first: ids grow with time.
      expect(ids).toEqual(key === 'id' ? [...ids].sort().reverse() : [...ids].sort());
    },
  );

  it('do not repeat or skip where something is added meanwhile', async () => {
    const first = await site.admin.get('/projects?limit=2').expect(200);
    await newSite(site.admin, 'Meanwhile');
    const second = await site.admin.get(`/projects?limit=200&cursor=${first.body.nextCursor}`).expect(200);
    const names = [...first.body.data, ...second.body.data].map((p: Item) => p.name);
    expect(names).not.toContain('Meanwhile');
    expect(new Set(names).size).toBe(names.length);
    expect(names).toHaveLength((await all('/projects', 200)).length - 1);
  });

  it('refuse a cursor of another list, of other filters and of nobody', async () => {
    const { body } = await site.admin.get(site.at('/setups?limit=1')).expect(200);
    const cursor = body.nextCursor as string;
    const other = await newSite(site.admin, 'Cursor');
    const text = (at: string, ...rest: unknown[]) =>
      Buffer.from(JSON.stringify([at, ...rest])).toString('base64url');
    for (const path of [
      site.at(`/surfaces?cursor=${cursor}`),
      site.at(`/setups?status=computed&cursor=${cursor}`),
      other.at(`/setups?cursor=${cursor}`),
      '/projects?cursor=abc',
      '/projects?cursor=bnVsbA',
      `/projects?cursor=${text('not an id', 'projects')}`,
      `/projects?cursor=${text("' or 1=1 --", 'projects')}`,
      site.at(`/control-points?cursor=${text('A\u0000', 'control', site.projectId, null)}`),
      site.at(`/layers?cursor=${text('\ud800', 'layers', site.projectId)}`),
    ])
      expectProblem(await site.admin.get(path), 'cursor_invalid');
  });

  it('refuse a limit out of range, an unknown parameter, one that stands twice and one without a value', async () => {
    for (const [query, place] of [
      ['limit=0', '?limit invalid_value'],
      ['limit=201', '?limit invalid_value'],
      ['limit=1.5', '?limit wrong_type'],
      ['limit=ten', '?limit wrong_type'],
      ['limit=1e400', '?limit wrong_type'],
      ['limit=', '?limit invalid_value'],
      ['offset=3', '?offset unknown_field'],
      ['limit=1&limit=2', '?limit duplicate_key'],
    ])
      expectProblem(await site.admin.get(`/projects?${query}`), 'invalid', [place]);
  });
});
