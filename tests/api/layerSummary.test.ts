import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  FINISH,
  groundShot,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

describe('the summary of a layer', () => {
  let site: SiteOrganization;
  let surfaceId: string;
  beforeAll(async () => {
    site = await newSiteOrganization();
    surfaceId = (await site.admin.post(site.at('/surfaces'), FINISH).expect(201)).body.id;
  });

  const makeLayer = (name: string, changes: object = {}, query = '') =>
    site.admin
      .post(site.at(`/layers${query}`), {
        units: { length: 'ft' },
        name,
        surfaceId,
        offset: 0,
        tolerance: { below: 0.1, above: 0.05 },
        ...changes,
      })
      .expect(201);
  /** Grade shots at these heights above the layer, in the order of time. */
  const shoot = (layer: string, deviations: readonly number[], tag = '') => {
    const gradeShots = deviations.map((deviation, i) => ({
      clientId: `${layer}${tag}-${i}`,
      layer,
      position: { easting: 5000 + i, northing: 8000, elevation: 400 + deviation },
      observedAt: minutesAgo(60 - i),
    }));
    return site.upload(document(`${layer}${tag}`, { gradeShots })).expect(201);
  };
  const summary = async (layer: string, query = '') =>
    (await site.admin.get(site.at(`/layers/${layer}/summary${query}`)).expect(200)).body;

  it('waits where nothing counts yet', async () => {
    await makeLayer('empty');
    expect(await summary('empty')).toMatchObject({
      count: 0,
      mean: null,
      standardDeviation: null,
      rmse: null,
      withinTolerance: 0,
      percentWithinLimits: null,
      verdict: 'hold',
      label: null,
      radio: 'Wait. Nothing counts yet on empty.',
    });
  });

  it('agrees with a plain calculation of bias, spread and share', async () => {
    await makeLayer('figures');
    const deviations = [0.02, -0.03, 0.04, 0.06, -0.11, 0.01];
    await shoot('figures', deviations);
    const body = await summary('figures');
    // By hand: Σ = −0.01, Σd² = 0.0187, n = 6.
    const n = deviations.length;
    const sum = deviations.reduce((a, b) => a + b, 0);
    const squares = deviations.reduce((a, b) => a + b * b, 0);
    expect(sum).toBeCloseTo(-0.01, 12);
    expect(squares).toBeCloseTo(0.0187, 12);
    expect(body.count).toBe(6);
    expect(body.mean).toBeCloseTo(-0.01 / 6, 9);
    expect(body.standardDeviation).toBeCloseTo(Math.sqrt((squares - sum ** 2 / n) / (n - 1)), 9);
    expect(body.rmse).toBeCloseTo(Math.sqrt(squares / n), 9);
    expect(body.withinTolerance).toBe(4);
    expect(body.verdicts).toEqual({ pass: 4, hold: 0, fail: 2 });
    expect(body).toMatchObject({ verdict: 'fail', cutVolume: null, fillVolume: null, label: 'GRADE' });
    const metres = await summary('figures', '?length=m');
    expect(metres.rmse).toBeCloseTo(body.rmse * 0.3048, 12);
    expect(metres.withinTolerance).toBe(4);
  });

  it('names the side on the radio', async () => {
    await makeLayer('high');
    await shoot('high', [0.02, 0.03, 0.04]);
    expect(await summary('high')).toMatchObject({
      verdict: 'pass',
      label: 'C 0.03',
      radio: 'Accepted. high: 3 of 3 inside tolerance, 0.03 ft high on average.',
    });
  });

  /** Grade shots on a lot of 3 × 3 places 100 ft apart, rows from the south. */
  const shootLot = (layer: string, deviations: readonly number[]) => {
    const gradeShots = deviations.map((deviation, i) => ({
      clientId: `${layer}-${i}`,
      layer,
      position: {
        easting: 5000 + 100 * (i % 3),
        northing: 8000 + 100 * Math.floor(i / 3),
        elevation: 400 + deviation,
      },
      observedAt: minutesAgo(60 - i),
    }));
    return site.upload(document(layer, { gradeShots })).expect(201);
  };
  const acceptance = { rule: 'everyPoint', citation: 'c 1' };

  it('begins with what to cut and to fill, and where', async () => {
    await makeLayer('corner', { acceptance });
    await shootLot('corner', [0, 0, 0.01, 0, 0, 0, -0.02, 0, 0.12]);
    expect(await summary('corner')).toMatchObject({
      radio:
        'Cut the north-east corner and shoot again. corner is not accepted: 1 of 9 high, none low; worst C 0.12 at corner-8.',
      reasons: [{ code: 'every_point', action: 'Cut the north-east corner (corner-8) and shoot again.' }],
    });
    await makeLayer('both', { acceptance });
    await shootLot('both', [-0.2, -0.15, -0.11, 0, 0, 0, 0.07, 0, 0.06]);
    expect((await summary('both')).radio).toBe(
      'Cut the north side, fill the south side, and shoot again. both is not accepted: 2 of 9 high, 3 low; worst F 0.20 at both-0.',
    );
    await makeLayer('about');
    await shootLot('about', [0.1, 0, 0, 0, 0.2, 0, 0, 0, 0.3]);
    expect(await summary('about')).toMatchObject({
      radio:
        'Cut at about-0, about-4 and about-8 and shoot again. about is not accepted: 3 of 9 high, none low; worst C 0.30 at about-8.',
      reasons: [
        {
          code: 'no_acceptance_rule',
          action: 'Cut at about-0, about-4 and about-8 and shoot again.',
        },
      ],
    });
  });

  it('says what is missing where it is not proven yet', async () => {
    await makeLayer('more', { acceptance: { rule: 'window', required: 2, of: 5, citation: 'c 2' } });
    await shootLot('more', [0, 0.2]);
    expect(await summary('more')).toMatchObject({
      verdict: 'hold',
      radio:
        'Wait. more is not proven yet: 1 of 2 inside tolerance, 0.10 ft high on average. Cut the east side and shoot again, with at least 3 more.',
    });
    await makeLayer('spread', {
      acceptance: { rule: 'percentWithinLimits', minimum: 99, citation: 'c 3' },
      tolerance: { below: 0.1, above: 0.1 },
    });
    await shootLot('spread', [0.1, -0.1, 0.1, -0.1, 0, 0, 0.1, 0.1, -0.1]);
    expect((await summary('spread')).radio).toBe(
      'Trim the lot closer to grade and shoot again. spread is not accepted: 9 of 9 inside tolerance, 0.01 ft high on average, but the lot as a whole lies too close to its limits.',
    );
  });

  it('asks for the offset where the lot as a whole lies off by it, and cuts nothing', async () => {
    for (const [name, shift, side, where] of [
      ['off', 0.5, 'high', 'on Pad itself'],
      ['twice', -0.5, 'low', 'at twice the offset'],
    ] as const) {
      await makeLayer(name, { offset: -0.5, acceptance });
      const lot = [0, 0.02, -0.03, 0.01, 0, 0, 0.04, 0, 0.06];
      await shootLot(
        name,
        lot.map((deviation) => deviation - 0.5 + shift),
      );
      const body = await summary(name);
      expect(body.radio).toBe(
        `Stop and check the offset. All of ${name} lies off by its own offset, 0.50 ft ${side}: wrong offset left on or off, or the wrong layer.`,
      );
      expect(body.reasons[0]).toMatchObject({
        code: 'off_by_offset',
        text: `The lot as a whole lies 0.50 ft ${side}, within the tolerance of the layer’s own offset (−0.50 ft): ground lies ${where}.`,
      });
      expect(body.reasons[1]).toEqual({ code: 'every_point', text: expect.any(String) });
    }
  });

  it('counts plain readings by each rule, as its clause says', async () => {
    const lots: [string, object, number[], string][] = [
      ['every-pass', { rule: 'everyPoint', citation: 'c 1' }, [0, 0.05, -0.1], 'pass'],
      ['every-fail', { rule: 'everyPoint', citation: 'c 1' }, [0, 0.051, -0.1], 'fail'],
      [
        'window-pass',
        { rule: 'window', required: 2, of: 3, citation: 'c 2' },
        [0.2, 0, 0, 0.2, 0, 0],
        'pass',
      ],
      [
        'window-fail',
        { rule: 'window', required: 2, of: 3, citation: 'c 2' },
        [0, 0, 0.2, 0, 0.2, 0],
        'fail',
      ],
      ['window-few', { rule: 'window', required: 2, of: 3, citation: 'c 2' }, [0, 0], 'hold'],
      ['pwl-few', { rule: 'percentWithinLimits', minimum: 90, citation: 'c 3' }, [0, 0], 'hold'],
      [
        'pwl-pass',
        { rule: 'percentWithinLimits', minimum: 90, citation: 'c 3' },
        [0, 0.01, -0.01, 0],
        'pass',
      ],
      [
        'pwl-fail',
        { rule: 'percentWithinLimits', minimum: 90, citation: 'c 3' },
        [0.2, -0.2, 0.1, 0],
        'fail',
      ],
    ];
    for (const [name, acceptance, deviations, verdict] of lots) {
      await makeLayer(name, { acceptance });
      await shoot(name, deviations);
      const body = await summary(name);
      expect([name, body.verdict]).toEqual([name, verdict]);
      expect(body.reasons[0].text).toContain((acceptance as { citation: string }).citation);
    }
  });

  it('computes percent within limits by the quality index', async () => {
    // n = 3 and one limit at Q = 1.00 (the other far away): 83.33 % (FHWA T 5080.12, table for n = 3); from Q = 1.16
    // on it is 100 %.
    const s = 0.05;
    await makeLayer('pwl', { tolerance: { below: 0.1, above: 0.1 } });
    await shoot('pwl', [-s, 0, s]);
    expect((await summary('pwl')).percentWithinLimits).toBeCloseTo(100, 6);
    await makeLayer('pwl-1', { tolerance: { below: 10, above: 0.05 } });
    await shoot('pwl-1', [-s, 0, s]);
    expect((await summary('pwl-1')).percentWithinLimits).toBeCloseTo(83.33, 2);
  });

  it('leaves out what was not in force, is outside or belongs to an earlier version', async () => {
    const square = [
      [5000, 8000, 400],
      [5300, 8000, 400],
      [5000, 8300, 400],
      [5300, 8300, 400],
    ];
    const tin = { units: { length: 'ft' }, name: 'Square', represents: 'finish', points: square };
    const { body: surface } = await site.admin.post(site.at('/surfaces'), tin).expect(201);
    await makeLayer('scope', { surfaceId: surface.id });
    const { body } = await site.upload(document('s', { setups: [resection('s')] })).expect(201);
    const ground = { easting: 5150, northing: 8150, elevation: 400 };
    const gradeShots = [
      { clientId: 'a', setup: 's', shot: groundShot(ground) },
      { clientId: 'b', position: { ...ground, easting: 9000 } },
      { clientId: 'c', position: ground },
    ].map((shot) => ({ layer: 'scope', observedAt: minutesAgo(10), ...shot }));
    await site.upload(document('scope', { gradeShots })).expect(201);
    const before = await summary('scope');
    expect(before).toMatchObject({ count: 1, notCounted: { outside: 1, notInForce: 1 } });

    await site.admin.post(site.at(`/setups/${body.setups[0].id}/release`), {}).expect(200);
    const later = {
      clientId: 'd',
      layer: 'scope',
      setup: 's',
      shot: groundShot(ground),
      observedAt: minutesAgo(-1),
    };
    await site.upload(document('scope-2', { gradeShots: [later] })).expect(201);
    expect((await summary('scope')).count).toBe(2);
    // A withdrawal makes void what was shot from the setup.
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/withdraw`), {}).expect(200);
    expect(await summary('scope')).toMatchObject({ count: 1, notCounted: { outside: 1, notInForce: 2 } });

    await makeLayer('scope', { surfaceId: surface.id, offset: -1 }, '?revise=true');
    expect(await summary('scope')).toMatchObject({ layerVersion: 2, count: 0, offset: -1 });
  });

  it.each<[string, (id: string) => Promise<unknown>]>([
    [
      'fails by a later check',
      () => {
        const shots = shotsTo('HT-5', { clientId: 'late', moved: { northing: 1 } });
        const closing = { clientId: 'late', setup: 'void-1', purpose: 'closing', shots };
        return site.upload(document('late', { setupChecks: [closing] })).expect(201);
      },
    ],
    [
      'is refitted',
      (id) => {
        const refit = { exclude: ['orient-HT-1/left'], reason: 'Sun in the glass.' };
        return site.admin.post(site.at(`/setups/${id}/refits`), refit).expect(201);
      },
    ],
  ])('counts nothing from a setup that %s, shot and sent before', async (what, happens) => {
    const name = what.startsWith('fails') ? 'void-1' : 'void-2';
    await makeLayer(name);
    const { body } = await site.upload(document(name, { setups: [resection(name)] })).expect(201);
    const [{ id }] = body.setups;
    await site.admin.post(site.at(`/setups/${id}/release`), { releasedAt: minutesAgo(60) }).expect(200);
    const shot = groundShot({ easting: 5150, northing: 8150, elevation: 400 });
    const gradeShots = [0, 1, 2].map((i) => ({
      clientId: `${name}-${i}`,
      layer: name,
      setup: name,
      shot,
      observedAt: minutesAgo(30),
    }));
    await site.upload(document(`${name}-g`, { gradeShots })).expect(201);
    expect(await summary(name)).toMatchObject({ verdict: 'pass', count: 3 });
    await happens(id);
    expect(await summary(name)).toMatchObject({
      verdict: 'hold',
      count: 0,
      notCounted: { outside: 0, notInForce: 3 },
    });
  });

  it('is of a layer that exists', async () => {
    expectProblem(await site.admin.get(site.at('/layers/nowhere/summary')), 'not_found');
  });
});
