import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from './fixtures/problems';
import { FINISH, newSite, newSiteOrganization, type SiteOrganization } from './fixtures/site';

/** A square of 100 ft with a ridge along its middle: 10 ft at the edges, 12 ft on the ridge. */
const POINTS = [
  [0, 0, 10],
  [50, 0, 12],
  [100, 0, 10],
  [0, 100, 10],
  [50, 100, 12],
  [100, 100, 10],
];
const TRIANGLES = [
  [0, 1, 4],
  [0, 4, 3],
  [1, 2, 5],
  [1, 5, 4],
];

describe('surfaces', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const tin = (changes: object = {}) => ({
    units: { length: 'ft' },
    name: 'Ridge',
    represents: 'subgrade',
    points: POINTS,
    triangles: TRIANGLES,
    ...changes,
  });
  const post = (body: object, at = site.at) => site.admin.post(at('/surfaces'), body);
  const elevations = (id: string, points: object[], units = 'ft') =>
    site.admin.post(site.at(`/surfaces/${id}/elevations`), { units: { length: units }, points });
  const place = (easting: number, northing: number) => ({ easting, northing });

  it('answer their size, extent and the hash of their content', async () => {
    const { body } = await post(tin()).expect(201);
    expect(body).toMatchObject({
      name: 'Ridge',
      represents: 'subgrade',
      kind: 'tin',
      points: 6,
      triangles: 4,
    });
    expect(body.extent).toEqual({ minEasting: 0, maxEasting: 100, minNorthing: 0, maxNorthing: 100 });
    expect(body.sha256).toMatch(/^[0-9a-f]{64}$/);
    expect((await site.admin.get(site.at(`/surfaces/${body.id}`)).expect(200)).body).toEqual(body);
  });

  it('are the same where their content is, whatever they are called', async () => {
    const first = await post(tin()).expect(201);
    const again = await post(tin({ name: 'Called otherwise' })).expect(201);
    expect(again.body).toEqual(first.body);
    const other = await post(tin({ points: [[0, 0, 10.001], ...POINTS.slice(1)] })).expect(201);
    expect(other.body.id).not.toBe(first.body.id);
    expect(other.body.sha256).not.toBe(first.body.sha256);
    const elsewhere = await newSite(site.admin, 'Second pad');
    const there = await post(tin(), elsewhere.at).expect(201);
    expect(there.body.sha256).toBe(first.body.sha256);
    expect(there.body.id).not.toBe(first.body.id);
  });

  it('are one where two come at the same moment', async () => {
    const answers = await Promise.all([1, 2, 3, 4].map(() => post(tin({ represents: 'base' }))));
    expect(new Set(answers.map(({ body }) => body.id)).size).toBe(1);
  });

  it('answer elevation, slope and the azimuth of the fall; null outside', async () => {
    const { body: surface } = await post(tin()).expect(201);
    const { body } = await elevations(surface.id, [
      place(25, 40),
      place(75, 99),
      place(50, 50),
      place(101, 50),
    ]);
    expect(body.surface).toEqual({ id: surface.id, sha256: surface.sha256 });
    // Two feet of rise in fifty: 4 %, falling west of the ridge to the west and east of it to the east.
    expect(body.data[0].elevation).toBeCloseTo(11, 9);
    expect(body.data[0].slopePercent).toBeCloseTo(4, 9);
    expect(body.data[0].aspect).toBeCloseTo(270, 9);
    expect([0, 1]).toContain(body.data[0].triangle);
    expect(body.data[1].elevation).toBeCloseTo(11, 9);
    expect(body.data[1].aspect).toBeCloseTo(90, 9);
    expect(body.data[2].elevation).toBeCloseTo(12, 9);
    expect(body.data[3]).toBeNull();
  });

  it('triangulate points that come without triangles', async () => {
    const { triangles: _t, ...points } = tin({ name: 'Loose' });
    const { body: surface } = await post(points).expect(201);
    expect(surface.triangles).toBe(4);
    const { body } = await elevations(surface.id, [place(25, 50), place(50, 50)]);
    expect(body.data[1].elevation).toBeCloseTo(12, 9);
  });

  it('may be a plane, which has no edge', async () => {
    const plane = {
      through: { easting: 100, northing: 200, elevation: 50 },
      azimuth: 90,
      slopePercent: -1.5,
    };
    const { body: surface } = await post({ ...FINISH, name: 'Plane', plane }).expect(201);
    expect(surface).toMatchObject({ kind: 'plane', points: null, triangles: null, extent: null });
    const { body } = await elevations(surface.id, [place(200, 200), place(100, 9_000_000)]);
    expect(body.data[0]).toMatchObject({ triangle: null });
    expect(body.data[0].elevation).toBeCloseTo(48.5, 9);
    expect(body.data[0].slopePercent).toBeCloseTo(1.5, 9);
    expect(body.data[0].aspect).toBeCloseTo(90, 9);
    expect(body.data[1].elevation).toBeCloseTo(50, 6);
    const level = await post(FINISH).expect(201);
    const flat = await elevations(level.body.id, [place(0, 0)]);
    expect(flat.body.data[0]).toEqual({ elevation: 400, slopePercent: 0, aspect: null, triangle: null });
  });

  it('answer in the unit that was asked in', async () => {
    const { body: surface } = await post(tin()).expect(201);
    const { body } = await elevations(surface.id, [place(25 * 0.3048, 40 * 0.3048)], 'm');
    expect(body.units).toEqual({ length: 'm', angle: 'deg' });
    expect(body.data[0].elevation).toBeCloseTo(11 * 0.3048, 9);
    expect((await elevations(surface.id, [place(1, 1)], 'ftUS')).body.errors[0].code).toBe('units_conflict');
  });

  const refusals: [string, object, string[]][] = [
    ['with neither points nor plane', { points: undefined, triangles: undefined }, [' one_of_required']],
    ['with both', { plane: FINISH.plane }, [' mutually_exclusive']],
    ['with triangles alone', { points: undefined, plane: FINISH.plane }, ['/points required']],
    ['of two points', { points: POINTS.slice(0, 2), triangles: undefined }, ['/points invalid_value']],
    [
      'on one line',
      { points: [0, 1, 2, 3].map((i) => [i, 2 * i, 5]), triangles: undefined },
      ['/points surface_degenerate'],
    ],
    ['with two heights at one place', { points: [...POINTS, [0, 0, 11]] }, ['/points/6 point_repeated']],
    [
      'with triangles that are none',
      {
        triangles: [
          [0, 1, 9],
          [0, 0, 1],
          [0, 1, 2],
          [0, 1, 4],
        ],
      },
      ['/triangles/0 triangle_invalid', '/triangles/1 triangle_invalid', '/triangles/2 triangle_invalid'],
    ],
    ['with a short point', { points: [[0, 0], ...POINTS] }, ['/points/0 invalid_value']],
    ['with a broken index', { triangles: [[0, 1, 1.5]] }, ['/triangles/0/2 wrong_type']],
    ['that represent nothing known', { represents: 'sky' }, ['/represents invalid_value']],
    ['without units', { units: undefined }, ['/units units_required']],
  ];
  it.each(refusals)('are refused %s', async (_, changes, expected) => {
    expectProblem(await post(tin(changes)), 'invalid', expected);
  });
});

describe('layers', () => {
  let site: SiteOrganization;
  let surfaceId: string;
  beforeAll(async () => {
    site = await newSiteOrganization();
    surfaceId = (await site.admin.post(site.at('/surfaces'), FINISH).expect(201)).body.id;
  });

  const post = (changes: object = {}, query = '') =>
    site.admin.post(site.at(`/layers${query}`), {
      units: { length: 'ft' },
      name: 'subgrade',
      surfaceId,
      offset: -0.5,
      tolerance: { below: 0.1, above: 0.05, citation: 'special provision 3' },
      ...changes,
    });

  it('carry a signed offset, asymmetric limits and the words for it', async () => {
    const { body } = await post().expect(201);
    expect(body).toMatchObject({
      name: 'subgrade',
      version: 1,
      surfaceId,
      surfaceName: 'Pad',
      represents: 'finish',
      offset: -0.5,
      offsetText: '0.50 ft below Pad',
      tolerance: { below: 0.1, above: 0.05, citation: 'special provision 3' },
      acceptance: null,
    });
    expect((await post({ name: 'cap', offset: 0.25 })).body.offsetText).toBe('0.25 ft above Pad');
    expect((await post({ name: 'top', offset: 0 })).body.offsetText).toBe('on Pad');
    const metres = await site.admin.get(site.at('/layers/subgrade?length=m')).expect(200);
    expect(metres.body.offset).toBeCloseTo(-0.1524, 12);
  });

  it('stand where they are sent again, and change by ?revise=true only', async () => {
    const first = await post({ name: 'base' }).expect(201);
    expect((await post({ name: 'base' }).expect(201)).body).toEqual(first.body);
    expectProblem(await post({ name: 'base', offset: -0.6 }), 'layer_exists');
    const second = await post({ name: 'base', offset: -0.6 }, '?revise=true').expect(201);
    expect(second.body).toMatchObject({ version: 2, offset: -0.6 });
    expect((await site.admin.get(site.at('/layers/base'))).body).toEqual(second.body);
    const { body } = await site.admin.get(site.at('/layers')).expect(200);
    const bases = body.data.filter((layer: { name: string }) => layer.name === 'base');
    expect(bases).toEqual([second.body]);
  });

  it('take each of the rules of acceptance, with its clause', async () => {
    const rules = [
      { rule: 'everyPoint', citation: 'clause 4' },
      { rule: 'window', required: 4, of: 5, citation: 'clause 5' },
      { rule: 'percentWithinLimits', minimum: 90, citation: 'clause 6' },
    ];
    for (const acceptance of rules) {
      const { body } = await post({ name: acceptance.rule, acceptance }).expect(201);
      expect(body.acceptance).toEqual(acceptance);
    }
    const wrong = (acceptance: object) => post({ name: 'wrong', acceptance });
    expectProblem(await wrong({ rule: 'everyPoint' }), 'invalid', ['/acceptance/citation required']);
    const window = { rule: 'window', required: 6, of: 5, citation: 'x' };
    expectProblem(await wrong(window), 'invalid', ['/acceptance/required invalid_value']);
    expectProblem(await wrong({ rule: 'luck', citation: 'x' }), 'invalid', [
      '/acceptance/rule invalid_value',
    ]);
  });

  it('need a surface of their own project and a tolerance that can be met', async () => {
    const other = await newSite(site.admin, 'Second pad');
    const { body: foreign } = await site.admin.post(other.at('/surfaces'), FINISH).expect(201);
    for (const id of [foreign.id, '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44'])
      expectProblem(await post({ name: 'x', surfaceId: id }), 'invalid', ['/surfaceId surface_unknown']);
    const none = { below: 0, above: 0 };
    expectProblem(await post({ name: 'x', tolerance: none }), 'invalid', ['/tolerance invalid_value']);
  });
});
