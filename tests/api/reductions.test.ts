import { beforeAll, describe, expect, it } from 'vitest';
import type * as z from 'zod';
import type { Setup } from '@/openapi/schemas/setup';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  FITTED,
  newSiteOrganization,
  resection,
  type SentShot,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

type SetupAnswer = z.output<typeof Setup>;

let site: SiteOrganization;
beforeAll(async () => {
  site = await newSiteOrganization();
});

let posted = 0;
const newId = () => `reduced-${++posted}`;

async function accepted(fields: Record<string, unknown>): Promise<SetupAnswer> {
  const { body } = await site.upload(document(newId(), { setups: [resection(newId(), fields)] }));
  expect(body.refused ?? body).toEqual([]);
  return body.setups[0];
}

/** (n−1)·10⁶ by the closed formula of the IAG 1999, written out anew: 410 ft is 1000 hPa or so, in inches and °F. */
function refractivity(fahrenheit: number, inches: number, humidity: number, micrometres: number): number {
  const celsius = ((fahrenheit - 32) * 5) / 9;
  const hectopascal = inches * 33.86389;
  const group = 287.6155 + 4.8866 / micrometres ** 2 + 0.068 / micrometres ** 4;
  const vapour = humidity * 6.1078 * 10 ** ((7.5 * celsius) / (237.3 + celsius));
  const kelvin = celsius + 273.15;
  return (273.15 / 1013.25) * group * (hectopascal / kelvin) - (11.27 * vapour) / kelvin;
}
/** 12 °C, 1013.25 hPa, 60 %. */
const reference = (micrometres: number) => refractivity(53.6, 1013.25 / 33.86389, 0.6, micrometres);

describe('the first velocity correction', () => {
  const atmosphere = { temperature: 95, pressure: 29.4 };

  it('follows temperature, pressure and humidity, and says what was taken', async () => {
    const { reductions } = await accepted({ atmosphere: { ...atmosphere, humidityPercent: 80 } });
    expect(reductions.ppm).toBeCloseTo(reference(0.658) - refractivity(95, 29.4, 0.8, 0.658), 3);
    expect(reductions.atmosphere).toEqual({
      temperatureC: expect.closeTo(35, 9),
      pressureHpa: expect.closeTo(995.598, 3),
      humidityPercent: expect.closeTo(80, 9),
      humiditySource: 'stated',
    });
    expect(reductions.carrierWavelengthNm).toBeCloseTo(658, 9);
    expect(reductions.referenceRefractivity).toBeCloseTo(reference(0.658), 3);
    expect(reductions.refraction).toMatchObject({ coefficient: 0.13, sigma: 0.3 });
  });

  it('takes 60 % where no humidity was sent, and says so', async () => {
    const { reductions } = await accepted({ atmosphere });
    expect(reductions.atmosphere).toMatchObject({ humidityPercent: 60, humiditySource: 'default' });
    expect(reductions.ppm).toBeCloseTo(reference(0.658) - refractivity(95, 29.4, 0.6, 0.658), 3);
  });

  it('takes the wet bulb of a psychrometer', async () => {
    const { reductions } = await accepted({
      atmosphere: { temperature: 86, pressure: 29.53, wetBulb: 68 },
    });
    // 30 °C and 20 °C at 1000 hPa: e = 23.38 − 0.000662·1000·10 = 16.76 hPa of 42.4 (WMO tables: 40 %).
    expect(reductions.atmosphere!.humiditySource).toBe('wetBulb');
    expect(reductions.atmosphere!.humidityPercent).toBeCloseTo(39.5, 0);
  });

  it('is that of the instrument’s own carrier and setting', async () => {
    const instrument = {
      name: 'TS-9',
      kind: 'totalStation',
      carrierWavelengthNm: 850,
      referenceRefractivity: 281.5,
    };
    await site.admin.post(site.at('/instruments'), instrument).expect(201);
    const { reductions } = await accepted({ instrument: 'TS-9', atmosphere });
    expect(reductions.ppm).toBeCloseTo(281.5 - refractivity(95, 29.4, 0.6, 0.85), 3);
    expect(reductions).toMatchObject({ referenceRefractivity: 281.5 });
  });

  it('takes out first what the instrument applied: the same distances, the same station', async () => {
    const shots = (resection('x').shots as SentShot[]).map((shot) => ({
      ...shot,
      slopeDistance: shot.slopeDistance * 1.00004,
      appliedPpm: 40,
    }));
    const [plain, applied] = [await accepted({ atmosphere }), await accepted({ atmosphere, shots })];
    expect(applied.position.easting).toBeCloseTo(plain.position.easting, 5);
    expect(applied.fit.sigma0).toBeCloseTo(plain.fit.sigma0, 3);
  });

  it('is null without an atmosphere: what was applied stands', async () => {
    const { reductions, notes } = await accepted({});
    expect(reductions).toMatchObject({ ppm: null, atmosphere: null, carrierWavelengthNm: null });
    expect(notes.map(({ code }) => code)).toContain('atmosphere_unknown');
  });

  it.each([
    [{ wetBulb: 100 }, 'invalid_value'],
    [{ wetBulb: 30 }, 'invalid_value'],
    [{ wetBulb: 50 }, 'invalid_value'],
    [{ wetBulb: 80, humidityPercent: 40 }, 'mutually_exclusive'],
  ])('refuses %o', async (fields, code) => {
    const sent = { ...resection(newId()), atmosphere: { ...atmosphere, ...fields } };
    expectProblem(await site.upload(document(newId(), { setups: [sent] })), 'nothing_accepted', [
      `/setups/0/atmosphere/wetBulb ${code}`,
    ]);
  });
});

describe('the coefficient of refraction', () => {
  it('may be chosen for a setup, and bends its heights', async () => {
    const usual = await accepted({});
    const chosen = await accepted({ refraction: { coefficient: -1, sigma: 0.05 } });
    expect(chosen.reductions.refraction).toMatchObject({ coefficient: -1, sigma: 0.05 });
    expect(Math.abs(chosen.reductions.refraction.fitted - -1)).toBeLessThan(0.5);
    expect(chosen.instrumentElevation).not.toBeCloseTo(usual.instrumentElevation!, 4);
  });
});

/** A setup whose instrument shows these errors, arcseconds. */
function withErrors(collimation: number, index: number, sets = 1, turn = 0) {
  return Array.from({ length: sets }, (_, i) =>
    FITTED.flatMap((mark) =>
      shotsTo(mark, { clientId: `${mark}/${i + 1}` }).map((shot) => {
        const side = shot.face === 'left' ? 1 : -1;
        const sine = Math.abs(Math.sin((shot.zenith * Math.PI) / 180));
        const horizontal = shot.horizontal + (side * collimation) / 3600 / sine + (i * turn) / 3600;
        return {
          ...shot,
          set: i + 1,
          horizontal: (horizontal + 360) % 360,
          zenith: shot.zenith + index / 3600,
        };
      }),
    ),
  ).flat();
}

describe('two faces and sets', () => {
  it('show 2c and index with σ and leave neither in the means', async () => {
    const { faceErrors, position } = await accepted({ shots: withErrors(7, -5) });
    expect(faceErrors!.twoCollimationArcsec).toBeCloseTo(14, 3);
    expect(faceErrors!.verticalIndexArcsec).toBeCloseTo(-5, 3);
    // Stated 1″ of a direction in both faces, four pairs.
    expect(faceErrors!.twoCollimationSigmaArcsec).toBeCloseTo(1, 2);
    expect(faceErrors!.verticalIndexSigmaArcsec).toBeCloseTo(0.5, 6);
    expect(faceErrors!.twoCollimationSpreadArcsec).toBeLessThan(1e-3);
    expect(faceErrors).toMatchObject({ collimationPairs: 4, indexPairs: 4 });
    expect(position.easting).toBeCloseTo(5100, 4);
  });

  it('of directions come with their means and spread', async () => {
    const { directionSets, notes } = await accepted({ shots: withErrors(0, 0, 3, 0.5) });
    expect(directionSets).toMatchObject({ sets: 3, degreesOfFreedom: 6, asStated: true });
    expect(directionSets!.standardDeviationArcsec).toBeLessThan(1e-3);
    expect(directionSets!.statedArcsec).toBeCloseTo(1, 9);
    expect(directionSets!.directions.map(({ target }) => target)).toEqual([...FITTED]);
    const [first] = shotsTo('HT-1');
    // In the orientation of the first set, whatever the circle was turned by later.
    expect((directionSets!.directions[0].mean - first.horizontal) * 3600).toBeCloseTo(0, 3);
    expect(notes.map(({ code }) => code)).not.toContain('directions_scatter');
    expect((await accepted({})).directionSets).toBeNull();
  });

  it('that scatter more than stated are told', async () => {
    const shots = withErrors(0, 0, 2).map((shot, i) =>
      shot.set === 2 ? { ...shot, horizontal: shot.horizontal + ((i >> 1) % 2 ? 6 : -6) / 3600 } : shot,
    );
    const { directionSets, notes } = await accepted({ shots });
    expect(directionSets!.asStated).toBe(false);
    // Residuals of ±3″ in each of two sets: Σr² = 8·9 of three degrees of freedom.
    expect(directionSets!.standardDeviationArcsec).toBeCloseTo(Math.sqrt(24), 1);
    expect(directionSets!.ofMeanArcsec).toBeCloseTo(Math.sqrt(12), 1);
    expect(notes.map(({ code }) => code)).toContain('directions_scatter');
  });
});

describe('the collimation of an instrument', () => {
  const collimation = async (name: string) =>
    (await site.admin.get(site.at(`/instruments/${name}/collimation`)).expect(200)).body;
  const register = (name: string) =>
    site.admin
      .post(site.at('/instruments'), {
        name,
        kind: 'totalStation',
        accuracy: { directionArcsec: 1, zenithArcsec: 1, distanceMm: 1, distancePpm: 1 },
        collimationSigmaArcsec: 2,
      })
      .expect(201);

  it('is unknown before any setup in both faces', async () => {
    await register('TS-21');
    const one = shotsTo('HT-1').filter(({ face }) => face === 'left');
    const left = (resection('x').shots as SentShot[]).filter(({ face }) => face === 'left');
    expect(one).toHaveLength(1);
    await accepted({ instrument: 'TS-21', shots: left });
    const body = await collimation('TS-21');
    expect(body).toMatchObject({ instrument: 'TS-21', calibration: 1, data: [] });
    expect(body.twoCollimation).toMatchObject({ state: 'unknown', currentArcsec: null, change: null });
    expect(body.twoCollimation.action).toContain('both faces');
  });

  it('is followed setup by setup, flagged where it changed, and begins anew with a calibration', async () => {
    await register('TS-22');
    const errors = [3, 3.4, 2.8, 3.1, 15, 15.3];
    const made: SetupAnswer[] = [];
    for (const [i, error] of errors.entries()) {
      const fields = { instrument: 'TS-22', station: `S-${i + 1}`, observedAt: minutesAgo(600 - 60 * i) };
      made.push(await accepted({ ...fields, shots: withErrors(error, 1) }));
    }
    const body = await collimation('TS-22');
    expect(body.data.map(({ station }: { station: string }) => station)).toEqual(
      [6, 5, 4, 3, 2, 1].map((n) => `S-${n}`),
    );
    expect(body.data[0]).toMatchObject({
      setupId: made[5].id,
      twoCollimationArcsec: expect.closeTo(30.6, 2),
      collimationPairs: 4,
    });
    expect(body.twoCollimation).toMatchObject({ state: 'changed', allowanceArcsec: expect.closeTo(4, 9) });
    expect(body.twoCollimation.change).toMatchObject({ setupId: made[4].id, station: 'S-5' });
    expect(body.twoCollimation.change.fromArcsec).toBeCloseTo(2 * 3.075, 1);
    expect(body.twoCollimation.currentArcsec).toBeCloseTo(2 * 15.15, 1);
    expect(body.twoCollimation.text).toMatch(
      /^2c changed from 6\.\d″ to 30\.3 ± \S+″ at S-5|^2c changed from/,
    );
    expect(body.verticalIndex).toMatchObject({ state: 'steady', large: false });
    expect(body.verticalIndex.currentArcsec).toBeCloseTo(1, 2);

    const path = site.at('/instruments/TS-22/calibrations');
    await site.admin.post(path, { collimationSigmaArcsec: 2, note: 'Adjusted.' }).expect(201);
    expect((await collimation('TS-22')).twoCollimation.state).toBe('unknown');
    await accepted({ instrument: 'TS-22', observedAt: minutesAgo(5), shots: withErrors(0.3, 0) });
    const anew = await collimation('TS-22');
    expect(anew).toMatchObject({ calibration: 2, twoCollimation: { state: 'steady', change: null } });
    expect(anew.data).toHaveLength(7);
  });

  it('counts a refitted setup once, and takes a limit', async () => {
    await register('TS-23');
    const setup = await accepted({ instrument: 'TS-23' });
    const exclude = setup.targets[3].shots;
    await site.admin.post(site.at(`/setups/${setup.id}/refits`), { exclude, reason: 'Leaning.' }).expect(201);
    await accepted({ instrument: 'TS-23' });
    expect((await collimation('TS-23')).data).toHaveLength(2);
    const path = site.at('/instruments/TS-23/collimation');
    expect((await site.admin.get(`${path}?limit=1`).expect(200)).body.data).toHaveLength(1);
    expectProblem(await site.admin.get(`${path}?limit=0`), 'invalid');
    expectProblem(await site.admin.get(site.at('/instruments/TS-77/collimation')), 'not_found');
  });
});
