import { beforeAll, describe, expect, it } from 'vitest';
import { sight } from './fixtures/geometry';
import { expectProblem } from './fixtures/problems';
import {
  document,
  MARKS,
  type Mark,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  STAND,
} from './fixtures/site';

interface Pointing {
  target: Mark;
  horizontal: number;
  zenith: number | null;
  slopeDistance: number | null;
  horizontalDistance: number;
}

describe('pointings', () => {
  let site: SiteOrganization;
  let path: string;
  beforeAll(async () => {
    site = await newSiteOrganization();
    const { body } = await site.upload(document('u', { setups: [resection('st')] })).expect(201);
    path = site.at(`/setups/${body.setups[0].id}/pointings`);
  });

  it.each([0, 5.25])('turn to every control point with a reflector %s ft above it', async (targetHeight) => {
    const { body } = await site.admin.get(`${path}?targetHeight=${targetHeight}`).expect(200);
    expect(body).toMatchObject({ targetHeight, units: { length: 'ft', angle: 'deg' } });
    const data = body.data as Pointing[];
    expect(data.map(({ target }) => target)).toEqual(Object.keys(MARKS).sort());
    for (const { target, horizontal, zenith, slopeDistance, horizontalDistance } of data) {
      const expected = sight(STAND, MARKS[target], targetHeight);
      expect(horizontal).toBeCloseTo(expected.horizontal, 5);
      expect(zenith).toBeCloseTo(expected.zenith, 5);
      expect(slopeDistance).toBeCloseTo(expected.slopeDistance, 4);
      const { easting, northing } = MARKS[target];
      const plan = Math.hypot(easting - STAND.easting, northing - STAND.northing);
      expect(horizontalDistance).toBeCloseTo(plan, 4);
    }
  });

  it('answer in another unit', async () => {
    const feet = (await site.admin.get(path)).body.data as Pointing[];
    const { body } = await site.admin.get(`${path}?length=m`).expect(200);
    expect(body.units.length).toBe('m');
    for (const [i, { slopeDistance, horizontal }] of (body.data as Pointing[]).entries()) {
      expect(slopeDistance).toBeCloseTo((feet[i].slopeDistance ?? 0) * 0.3048, 9);
      expect(horizontal).toBe(feet[i].horizontal);
    }
  });

  it('leave out a quarantined point, and the height of one that has none', async () => {
    const points = [
      { name: 'FLAT', easting: 5200, northing: 8200 },
      { name: 'HERE', easting: STAND.easting, northing: STAND.northing, elevation: STAND.elevation },
    ];
    await site.admin.post(site.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
    const bad = { status: 'quarantined', note: 'Leans.' };
    await site.admin.patch(site.at('/control-points/HT-2'), bad).expect(200);
    const data = (await site.admin.get(path).expect(200)).body.data as (Pointing & { target: string })[];
    const names = data.map(({ target }) => target as string);
    expect(names).not.toContain('HT-2');
    // Nobody turns to the mark that the instrument stands on.
    expect(names).not.toContain('HERE');
    const flat = data.find(({ target }) => (target as string) === 'FLAT');
    expect(flat).toMatchObject({ zenith: null, slopeDistance: null });
    expect(flat?.horizontalDistance).toBeCloseTo(Math.hypot(100, 100), 4);
  });

  it('refuse a target height that is none', async () => {
    for (const wrong of ['abc', '1e400', '101', ''])
      expectProblem(await site.admin.get(`${path}?targetHeight=${wrong}`), 'invalid');
  });
});
