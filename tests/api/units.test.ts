import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem, places } from './fixtures/problems';
import {
  document,
  newLayer,
  newSite,
  newSiteOrganization,
  resection,
  type SentShot,
  type SiteOrganization,
  UNITS,
} from './fixtures/site';

const FOOT = 0.3048;

/** Degrees, minutes and seconds of an angle, to a ten-thousandth of a second. */
function dms(degrees: number, separators: [string, string, string] = ['-', '-', '']): string {
  const units = Math.round(degrees * 3600e4);
  const [d, m, s] = [Math.floor(units / 3600e4), Math.floor(units / 60e4) % 60, (units % 60e4) / 1e4];
  return `${d}${separators[0]}${String(m).padStart(2, '0')}${separators[1]}${s.toFixed(4)}${separators[2]}`;
}

describe('units', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await newLayer(site.admin, site.at);
  });

  /** The one setup with its angles in another form. */
  const withAngles = (angle: (degrees: number) => number | string) =>
    resection('').shots.map((shot) => ({
      ...shot,
      horizontal: angle(shot.horizontal),
      zenith: angle(shot.zenith),
    }));
  const post = async (clientId: string, units: object, shots: object[], fields: object = {}) => {
    const sent = { ...document(clientId, { setups: [{ ...resection(clientId), shots, ...fields }] }), units };
    return (await site.upload(sent).expect(201)).body.setups[0];
  };

  it('of angles lead to the same setup: degrees, gon, radians and three ways of writing seconds', async () => {
    const plain = await post('deg', UNITS, resection('').shots);
    const forms: [string, string, (degrees: number) => number | string][] = [
      ['gon', 'gon', (d) => (d * 10) / 9],
      ['rad', 'rad', (d) => (d * Math.PI) / 180],
      ['dms-1', 'dms', (d) => dms(d)],
      ['dms-2', 'dms', (d) => dms(d, [' ', ' ', ''])],
      ['dms-3', 'dms', (d) => dms(d, ['°', "'", '"'])],
    ];
    for (const [name, angle, form] of forms) {
      const setup = await post(name, { ...UNITS, angle }, withAngles(form));
      // A ten-thousandth of a second is 2·10⁻⁷ ft in 400 ft.
      expect(setup.position.easting).toBeCloseTo(plain.position.easting, 6);
      expect(setup.position.elevation).toBeCloseTo(plain.position.elevation, 6);
      expect(setup.orientation).toBeCloseTo(plain.orientation, 6);
      expect(setup.units).toEqual({ length: 'ft', angle: 'deg' });
    }
  });

  it('of length lead to the same setup in another unit, and answer in the project’s', async () => {
    const metric = (shot: SentShot) => ({
      ...shot,
      slopeDistance: shot.slopeDistance * FOOT,
      targetHeight: shot.targetHeight * FOOT,
    });
    const feet = await post('feet', UNITS, resection('').shots);
    const height = { instrumentHeight: 5.12 * FOOT };
    const setup = await post('metres', { ...UNITS, length: 'm' }, resection('').shots.map(metric), height);
    expect(setup.units.length).toBe('ft');
    expect(setup.position.easting).toBeCloseTo(feet.position.easting, 8);
    expect(setup.position.elevation).toBeCloseTo(feet.position.elevation, 8);
    expect(setup.instrumentHeight).toBeCloseTo(5.12, 12);
  });

  it('of answers follow ?length=', async () => {
    const { id } = await post('asked', UNITS, resection('').shots);
    const feet = (await site.admin.get(site.at(`/setups/${id}`))).body;
    const metres = (await site.admin.get(site.at(`/setups/${id}?length=m`)).expect(200)).body;
    const survey = (await site.admin.get(site.at(`/setups/${id}?length=ftUS`)).expect(200)).body;
    expect([metres.units.length, survey.units.length]).toEqual(['m', 'ftUS']);
    expect(metres.position.easting).toBeCloseTo(feet.position.easting * FOOT, 9);
    expect(metres.standardDeviations.elevation).toBeCloseTo(feet.standardDeviations.elevation * FOOT, 12);
    expect(metres.accuracyAtWork.radius).toBeCloseTo(500 * FOOT, 9);
    expect(survey.position.northing).toBeCloseTo((feet.position.northing * FOOT * 3937) / 1200, 8);
    for (const same of ['orientation', 'verdict', 'fit'] as const) expect(metres[same]).toEqual(feet[same]);
    expect(metres.standardDeviations.orientationArcsec).toBe(feet.standardDeviations.orientationArcsec);
    const wrong = await site.admin.get(site.at(`/setups/${id}?length=yd`));
    expectProblem(wrong, 'invalid', ['?length invalid_value']);
  });

  it('are required with whatever needs them, and told once', async () => {
    const air = { atmosphere: { temperature: 59, pressure: 29.5 } };
    const sent = document('bare', { setups: [resection('bare', air)] });
    expectProblem(await site.upload({ ...sent, units: undefined }), 'invalid', ['/units units_required']);
    const none = await site.upload({ ...sent, units: { angle: 'deg' } });
    expectProblem(none, 'invalid', ['/units/length units_required']);
    const length = await site.upload({ ...sent, units: { length: 'ft' } });
    expectProblem(length, 'nothing_accepted', [
      '/units/temperature units_required',
      '/units/pressure units_required',
      '/units/angle units_required',
    ]);
    const wrong = await site.upload({ ...sent, units: { ...UNITS, length: 'yd', angle: 'mil' } });
    expectProblem(wrong, 'invalid', ['/units/length invalid_value', '/units/angle invalid_value']);
  });

  it('are not asked of items that do not need them', async () => {
    const position = { easting: 5000, northing: 8000, elevation: 399.5 };
    const shot = { clientId: 'g', layer: 'subgrade', position, observedAt: minutesAgo(5) };
    const sent = { clientId: 'lean', units: { length: 'ft' }, gradeShots: [shot] };
    await site.upload(sent).expect(201);
  });

  it('of the other foot are converted once that is confirmed', async () => {
    const sent = {
      ...document('other', { setups: [resection('other')] }),
      units: { ...UNITS, length: 'ftUS' },
    };
    expectProblem(await site.upload(sent), 'invalid', ['/units/length units_conflict']);
    const { body } = await site.upload({ ...sent, confirmUnits: true }).expect(201);
    expect(body.setups[0].instrumentHeight).toBeCloseTo((5.12 * 1200) / 3937 / FOOT, 12);
  });

  it('mark angles that are written in another unit than was declared', async () => {
    const shots = resection('').shots;
    const text = [{ ...shots[0], horizontal: '12-04-31.0' }, ...shots.slice(1)];
    const number = withAngles((d) => dms(d)).map((shot, i) => (i === 0 ? { ...shot, zenith: 89.5 } : shot));
    const deg = await site.upload(document('d', { setups: [{ ...resection('d'), shots: text }] }));
    expect(places(deg.body.errors)).toEqual(['/setups/0/shots/0/horizontal angle_invalid']);
    const sent = document('m', { setups: [{ ...resection('m'), shots: number }] });
    const seconds = await site.upload({ ...sent, units: { ...UNITS, angle: 'dms' } });
    expect(places(seconds.body.errors)).toEqual(['/setups/0/shots/0/zenith angle_invalid']);
  });

  it.each([
    '12-60-00',
    '12-00-60',
    '12-00-60.0',
    '12-04',
    '12.5',
    '12-04-31-5',
    '1204-31-00',
    '12-04--31',
    '',
    '٣-04-31',
  ])('refuse the angle %j', async (horizontal) => {
    const shots = withAngles((d) => dms(d)).map((shot, i) => (i === 0 ? { ...shot, horizontal } : shot));
    const sent = document('bad', { setups: [{ ...resection('bad'), shots }] });
    const answer = await site.upload({ ...sent, units: { ...UNITS, angle: 'dms' } });
    expectProblem(answer, 'nothing_accepted', ['/setups/0/shots/0/horizontal angle_invalid']);
  });

  it('of the atmosphere lead to the same correction', async () => {
    const air = (clientId: string, units: object, temperature: number, pressure: number) =>
      post(clientId, { ...UNITS, ...units }, resection('').shots, { atmosphere: { temperature, pressure } });
    // 410 ft up the standard atmosphere (ISO 2533) stands at 998 hPa; 1 inHg = 33.86389 hPa, 1 mmHg = 1.333224 hPa
    // (NIST SP 811, B.8).
    const a = await air('air-1', { temperature: 'C', pressure: 'hPa' }, 25, 998);
    const b = await air('air-2', { temperature: 'F', pressure: 'inHg' }, 77, 998 / 33.86389);
    const c = await air('air-3', { temperature: 'C', pressure: 'mmHg' }, 25, 998 / 1.333224);
    for (const other of [b, c]) {
      expect(other.position.easting).toBeCloseTo(a.position.easting, 9);
      expect(other.position.northing).toBeCloseTo(a.position.northing, 9);
    }
    const codes = a.notes.map((n: { code: string }) => n.code);
    expect(codes).not.toContain('atmosphere_unknown');
  });

  it('keep two projects of different units apart', async () => {
    const metric = await site.admin.post('/projects', {
      name: 'Metric',
      lengthUnit: 'm',
      frame: { kind: 'local' },
    });
    const points = [{ name: 'HT-1', easting: 10, northing: 20, elevation: 30 }];
    const path = `/projects/${metric.body.id}/control-points`;
    await site.admin.post(path, { units: { length: 'ft' }, points }).expect(201);
    expect((await site.admin.get(`${path}/HT-1`)).body).toMatchObject({ units: { length: 'm' } });
    expect((await site.admin.get(`${path}/HT-1`)).body.easting).toBeCloseTo(3.048, 12);
    await newSite(site.admin, 'In feet');
  });
});
