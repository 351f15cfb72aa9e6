import { beforeAll, describe, expect, it } from 'vitest';
import type { Api } from '@/tests/setup/api';
import { minutesAgo } from './fixtures/moments';
import { expectProblem, places } from './fixtures/problems';
import {
  document,
  groundShot,
  newLayer,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

/** The layer lies at 399.5 ft, 0.10 ft low to 0.05 ft high. */
const LAYER = 399.5;
const HERE = { easting: 5150, northing: 8150 };

describe('grade shots', () => {
  let site: SiteOrganization;
  let design: Awaited<ReturnType<typeof newLayer>>;
  beforeAll(async () => {
    site = await newSiteOrganization();
    design = await newLayer(site.admin, site.at);
  });

  let count = 0;
  const post = (shots: object[], caller: Api = site.admin) => {
    const gradeShots = shots.map((shot) => ({
      clientId: `g-${++count}`,
      layer: 'subgrade',
      observedAt: minutesAgo(30),
      ...shot,
    }));
    return site.upload(document(`u-${count}`, { gradeShots }), caller);
  };
  /** One check by coordinates, so far above the layer. */
  const check = async (above: number, further: object = {}) => {
    const { body } = await post([{ position: { ...HERE, elevation: LAYER + above }, ...further }]).expect(
      201,
    );
    return body.gradeChecks[0];
  };
  const codes = (items: { code: string }[]) => items.map(({ code }) => code);

  it('by coordinates answer the deviation with the trade’s sign and label', async () => {
    const high = await check(0.03);
    expect(high).toMatchObject({
      layer: 'subgrade',
      layerVersion: 1,
      label: 'C 0.03',
      verdict: 'pass',
      independent: true,
      setupId: null,
      standardDeviation: null,
      conformanceProbability: 1,
      tolerance: { below: 0.1, above: 0.05 },
      surface: { id: design.surface.id, sha256: design.surface.sha256 },
      units: { length: 'ft' },
    });
    expect(high.deviation).toBeCloseTo(0.03, 9);
    expect(high.deviationNormal).toBeCloseTo(0.03, 9);
    expect(high.designElevation).toBeCloseTo(400, 9);
    expect(high.layerElevation).toBeCloseTo(399.5, 9);
    expect(high.finishElevation).toBeCloseTo(400, 9);
    expect(codes(high.reasons)).toEqual(['judged_as_read']);
    expect((await check(-0.07)).label).toBe('F 0.07');
    expect((await check(0.004)).label).toBe('GRADE');
    const read = await site.admin.get(site.at(`/grade-checks/${high.id}`)).expect(200);
    expect(read.body).toEqual(high);
  });

  it('without any σ are judged as read, at both limits', async () => {
    const verdicts = [];
    for (const above of [-0.1001, -0.1, 0.05, 0.0501]) verdicts.push((await check(above)).verdict);
    expect(verdicts).toEqual(['fail', 'pass', 'pass', 'fail']);
  });

  // Limits of p = Φ((above − d)/u) − Φ((−below − d)/u) for u = 0.01 ft: one-sided 95 % points of the normal
  // distribution, z = 1.6449 (JCGM 106:2012, 7.4; tables of the normal distribution).
  const z = 1.6449;
  const u = 0.01;
  const sigma = { horizontal: u, vertical: u };
  it.each([
    ['pass', 0.05 - z * u - 1e-5],
    ['hold', 0.05 - z * u + 1e-5],
    ['hold', 0.05 + z * u - 1e-5],
    ['fail', 0.05 + z * u + 1e-5],
    ['pass', -0.1 + z * u + 1e-5],
    ['hold', -0.1 + z * u - 1e-5],
    ['hold', -0.1 - z * u + 1e-5],
    ['fail', -0.1 - z * u - 1e-5],
  ])('with a σ of 0.01 ft %s at a deviation of %f ft', async (verdict, above) => {
    const answered = await check(above, { sigma });
    expect(answered.standardDeviation).toBeCloseTo(u, 12);
    expect(answered.verdict).toBe(verdict);
    const p = answered.conformanceProbability;
    expect(Math.abs(p - (verdict === 'fail' || above > 0.05 || above < -0.1 ? 0.05 : 0.95))).toBeLessThan(
      2e-4,
    );
    const expected = {
      pass: [],
      hold: ['too_close_to_call'],
      fail: [above > 0 ? 'ground_high' : 'ground_low'],
    };
    expect(codes(answered.reasons)).toEqual(expected[verdict as 'pass']);
  });

  it('say so where no reading with their σ could prove the tolerance', async () => {
    // 0.15 ft of tolerance are 2 × 1.96 × 0.0383 ft.
    expect(codes((await check(-0.025, { sigma: { horizontal: 1, vertical: 0.038 } })).reasons)).toEqual([]);
    const answered = await check(-0.025, { sigma: { horizontal: 1, vertical: 0.039 } });
    expect(answered.verdict).toBe('hold');
    expect(codes(answered.reasons)).toEqual(['method_not_capable']);
  });

  it('from a setup in force are placed from it, with the setup’s own uncertainty', async () => {
    const { body } = await site.upload(document('s-1', { setups: [resection('s-1')] })).expect(201);
    const release = { releasedAt: minutesAgo(60), validMinutes: 120 };
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/release`), release).expect(200);
    const ground = { ...HERE, elevation: LAYER + 0.02 };
    const answer = await post([
      { setup: 's-1', shot: groundShot(ground) },
      { setup: body.setups[0].id, shot: groundShot({ ...ground, elevation: LAYER - 0.2 }) },
    ]).expect(201);
    const [good, low] = answer.body.gradeChecks;
    expect(good.point.easting).toBeCloseTo(HERE.easting, 4);
    expect(good.point.northing).toBeCloseTo(HERE.northing, 4);
    expect(good.deviation).toBeCloseTo(0.02, 4);
    expect(good).toMatchObject({
      verdict: 'pass',
      setupId: body.setups[0].id,
      independent: true,
      reasons: [],
    });
    expect(good.standardDeviation).toBeGreaterThan(0.0005);
    expect(good.standardDeviation).toBeLessThan(0.01);
    expect(low).toMatchObject({ verdict: 'fail', label: 'F 0.20' });
  });

  it('are judged by whether the setup was in force when they were observed', async () => {
    const { body } = await site.upload(document('s-2', { setups: [resection('s-2')] })).expect(201);
    const [{ id }] = body.setups;
    const shot = groundShot({ ...HERE, elevation: LAYER });
    const at = async (minutes: number) => {
      const answer = await post([{ setup: 's-2', shot, observedAt: minutesAgo(minutes) }]).expect(201);
      const [made] = answer.body.gradeChecks;
      return [made.verdict, ...codes(made.reasons)];
    };
    const notInForce = ['hold', 'setup_not_in_force'];
    expect(await at(30)).toEqual(notInForce);
    const release = { releasedAt: minutesAgo(60), validMinutes: 30 };
    await site.admin.post(site.at(`/setups/${id}/release`), release).expect(200);
    expect(await at(61)).toEqual(notInForce);
    expect(await at(59)).toEqual(['pass']);
    expect(await at(31)).toEqual(['pass']);
    expect(await at(29)).toEqual(notInForce);
    // The next release does not reach back over the gap.
    await site.admin.post(site.at(`/setups/${id}/release`), { releasedAt: minutesAgo(10) }).expect(200);
    expect(await at(5)).toEqual(['pass']);
    expect(await at(15)).toEqual(notInForce);
    await site.admin.post(site.at(`/setups/${id}/withdraw`), {}).expect(200);
    expect(await at(5)).toEqual(['pass']);
    expect(await at(-5)).toEqual(notInForce);
  });

  it('stand under any release that covers them: a second, shorter one does not end the first', async () => {
    const { body } = await site.upload(document('s-7', { setups: [resection('s-7')] })).expect(201);
    const [{ id }] = body.setups;
    const release = (minutes: number, validMinutes: number) =>
      site.admin
        .post(site.at(`/setups/${id}/release`), { releasedAt: minutesAgo(minutes), validMinutes })
        .expect(200);
    const { validUntil } = (await release(60, 120)).body;
    const second = await release(50, 20);
    expect(second.body).toMatchObject({ status: 'released', validUntil });
    const shot = groundShot({ ...HERE, elevation: LAYER });
    const at = [61, 55, 40, 10].map((minutes) => ({ setup: 's-7', shot, observedAt: minutesAgo(minutes) }));
    const answer = await post(at).expect(201);
    expect(answer.body.gradeChecks.map((c: { verdict: string }) => c.verdict)).toEqual([
      'hold',
      'pass',
      'pass',
      'pass',
    ]);
    await site.admin.post(site.at(`/setups/${id}/withdraw`), {}).expect(200);
    const late = await post([{ setup: 's-7', shot, observedAt: minutesAgo(-5) }]).expect(201);
    expect(codes(late.body.gradeChecks[0].reasons)).toEqual(['setup_not_in_force']);
  });

  it('are held where the setup was refitted or failed since', async () => {
    const { body } = await site.upload(document('s-3', { setups: [resection('s-3'), resection('s-4')] }));
    for (const { id } of body.setups)
      await site.admin.post(site.at(`/setups/${id}/release`), { releasedAt: minutesAgo(60) }).expect(200);
    const refit = { exclude: ['orient-HT-1/left'], reason: 'Sun.' };
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/refits`), refit).expect(201);
    const closing = {
      clientId: 'c',
      setup: 's-4',
      purpose: 'closing',
      shots: shotsTo('HT-5', { moved: { northing: 1 } }),
    };
    await site.upload(document('closing', { setupChecks: [closing] })).expect(201);
    const shot = groundShot({ ...HERE, elevation: LAYER });
    const answer = await post([
      { setup: 's-3', shot },
      { setup: 's-4', shot },
    ]).expect(201);
    const [refitted, failed] = answer.body.gradeChecks;
    expect([refitted.verdict, codes(refitted.reasons)]).toEqual(['hold', ['setup_superseded']]);
    expect([failed.verdict, codes(failed.reasons)]).toEqual(['hold', ['setup_failed_since']]);
  });

  it('are not independent where the setup guided a machine on that layer', async () => {
    await site.admin.post(site.at('/layers'), {
      units: { length: 'ft' },
      name: 'base',
      surfaceId: design.surface.id,
      offset: -0.2,
      tolerance: { below: 1, above: 1 },
    });
    const { body } = await site.upload(document('s-5', { setups: [resection('s-5')] })).expect(201);
    const order = { machine: 'DZ-3', layer: 'subgrade', offset: -0.5, releasedAt: minutesAgo(60) };
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/release`), order).expect(200);
    const shot = groundShot({ ...HERE, elevation: LAYER });
    const answer = await post([
      { setup: 's-5', shot },
      { setup: 's-5', shot, layer: 'base' },
      { setup: 's-5', position: { ...HERE, elevation: LAYER } },
    ]).expect(201);
    const independent = answer.body.gradeChecks.map((c: { independent: boolean }) => c.independent);
    expect(independent).toEqual([false, true, false]);
  });

  it('outside the surface are held without a deviation', async () => {
    const square = [
      [0, 0, 10],
      [100, 0, 10],
      [0, 100, 10],
    ];
    const tin = { units: { length: 'ft' }, name: 'Corner', represents: 'base', points: square };
    const { body: surface } = await site.admin.post(site.at('/surfaces'), tin).expect(201);
    const layer = {
      units: { length: 'ft' },
      name: 'corner',
      surfaceId: surface.id,
      offset: 0,
      tolerance: { below: 1, above: 1 },
    };
    await site.admin.post(site.at('/layers'), layer).expect(201);
    const position = { easting: 90, northing: 90, elevation: 10 };
    const { body } = await post([
      { layer: 'corner', position },
      { layer: 'corner', position: { ...position, northing: 5 } },
    ]).expect(201);
    expect(body.gradeChecks[0]).toMatchObject({
      verdict: 'hold',
      deviation: null,
      deviationNormal: null,
      designElevation: null,
      layerElevation: null,
      label: null,
      conformanceProbability: null,
    });
    expect(codes(body.gradeChecks[0].reasons)).toEqual(['outside_surface']);
    // The base is not the finish, which is not known here.
    expect(body.gradeChecks[1]).toMatchObject({ verdict: 'pass', finishElevation: null });
  });

  it('on a slope answer the deviation along the normal beside the vertical one', async () => {
    const plane = {
      through: { easting: 5000, northing: 8000, elevation: 400 },
      azimuth: 0,
      slopePercent: 75,
    };
    const slope = { units: { length: 'ft' }, name: 'Bank', represents: 'finish', plane };
    const { body: surface } = await site.admin.post(site.at('/surfaces'), slope).expect(201);
    const layer = {
      units: { length: 'ft' },
      name: 'bank',
      surfaceId: surface.id,
      offset: 0,
      tolerance: { below: 1, above: 1 },
    };
    await site.admin.post(site.at('/layers'), layer).expect(201);
    const { body } = await post([
      {
        layer: 'bank',
        position: { easting: 5000, northing: 8000, elevation: 400.5 },
        sigma: { horizontal: 0.04, vertical: 0.03 },
      },
    ]).expect(201);
    // 3-4-5: the cosine of a slope of 75 % is 0.8.
    expect(body.gradeChecks[0].deviation).toBeCloseTo(0.5, 9);
    expect(body.gradeChecks[0].deviationNormal).toBeCloseTo(0.4, 9);
    // √(0.03² + (0.75·0.04)²)
    expect(body.gradeChecks[0].standardDeviation).toBeCloseTo(0.0424264, 6);
  });

  it('take the project’s σ of positions where they state none', async () => {
    await site.admin.patch(site.at(''), { positionSigma: { horizontal: 0.02, vertical: 0.03 } }).expect(200);
    expect((await check(0)).standardDeviation).toBeCloseTo(0.03, 9);
    expect((await check(0, { sigma })).standardDeviation).toBeCloseTo(0.01, 9);
    await site.admin.patch(site.at(''), { positionSigma: null }).expect(200);
  });

  it('are refused one by one with what is wrong', async () => {
    const position = { ...HERE, elevation: LAYER };
    const { zenith: _z, ...flat } = groundShot(position);
    const { prismConstantMm: _p, ...stateless } = groundShot(position);
    const geodetic = { latitude: 40, longitude: -105, ellipsoidalHeight: 1600, datum: 'EPSG:6319' };
    await site.upload(document('s-6', { setups: [resection('s-6')] })).expect(201);
    const { body } = await post([
      { position, layer: 'nowhere' },
      {},
      { position, shot: groundShot(position), setup: 's-6' },
      { shot: groundShot(position) },
      { shot: groundShot(position), setup: 'nowhere' },
      { shot: flat, setup: 's-6' },
      { shot: stateless, setup: 's-6' },
      { geodetic },
      { position: { easting: 1, northing: 2 } },
      { position },
      { shot: groundShot(position), setup: 's-6', sigma },
    ]).expect(201);
    expect(places(body.refused).sort()).toEqual([
      '/gradeShots/0/layer layer_unknown',
      '/gradeShots/1 one_of_required',
      '/gradeShots/10/sigma mutually_exclusive',
      '/gradeShots/2 mutually_exclusive',
      '/gradeShots/3/setup required',
      '/gradeShots/4/setup setup_unknown',
      '/gradeShots/5/shot reading_incomplete',
      '/gradeShots/6/shot/prismConstantMm prism_state_required',
      '/gradeShots/7/geodetic frame_unsupported',
      '/gradeShots/8/position/elevation required',
    ]);
    expect(body.gradeChecks).toHaveLength(1);
  });

  it('are listed by layer and verdict', async () => {
    const fails = await site.admin
      .get(site.at('/grade-checks?verdict=fail&layer=subgrade&limit=200'))
      .expect(200);
    expect(fails.body.data.length).toBeGreaterThan(0);
    for (const c of fails.body.data) expect(c).toMatchObject({ verdict: 'fail', layer: 'subgrade' });
    const none = await site.admin.get(site.at('/grade-checks?layer=nowhere')).expect(200);
    expect(none.body.data).toEqual([]);
    expectProblem(await site.admin.get(site.at('/grade-checks?verdict=maybe')), 'invalid', [
      '?verdict invalid_value',
    ]);
  });
});
