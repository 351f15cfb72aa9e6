import { beforeAll, describe, expect, it } from 'vitest';
import type * as z from 'zod';
import type { Setup } from '@/openapi/schemas/setup';
import type { Place, Stand } from './fixtures/geometry';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  MARKS,
  type Mark,
  newLayer,
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
const newId = () => `setup-${++posted}`;
const codes = (setup: SetupAnswer) => setup.reasons.map(({ code }) => code);
const reason = (setup: SetupAnswer, code: string) => setup.reasons.find((one) => one.code === code);

async function accepted(setup: object): Promise<SetupAnswer> {
  const { body } = await site.upload(document(newId(), { setups: [setup] }));
  expect(body.refused ?? body).toEqual([]);
  return body.setups[0];
}

/** Shots with only some of their readings. */
function only(shots: SentShot[], ...kinds: ('horizontal' | 'zenith' | 'slopeDistance')[]) {
  return shots.map((shot) => {
    const {
      horizontal,
      zenith,
      slopeDistance,
      prismConstantMm,
      prismConstantAppliedMm,
      appliedPpm,
      ...rest
    } = shot;
    const state = { slopeDistance, prismConstantMm, prismConstantAppliedMm, appliedPpm };
    return {
      ...rest,
      ...(kinds.includes('horizontal') && { horizontal }),
      ...(kinds.includes('zenith') && { zenith }),
      ...(kinds.includes('slopeDistance') && state),
    };
  });
}

describe('a setup by backsight', () => {
  const STAND: Stand = { ...MARKS['HT-5'], instrumentHeight: 5.12, orientation: 37.5 };
  const shots = (mark: Mark, options: Parameters<typeof shotsTo>[1] = {}) =>
    shotsTo(mark, { stand: STAND, ...options });
  const backsight = (sent: object[], fields: object = {}) => ({
    ...resection(newId(), { stand: STAND }),
    method: 'backsight',
    stationPoint: 'HT-5',
    shots: sent,
    ...fields,
  });

  it('on two backsights passes, at the point’s own place, and says how each of them checks', async () => {
    const setup = await accepted(backsight([...shots('HT-1'), ...shots('HT-4')]));
    expect(setup).toMatchObject({ method: 'backsight', verdict: 'pass' });
    expect(setup.position.easting).toBeCloseTo(4800, 3);
    expect(setup.position.northing).toBeCloseTo(8100, 3);
    expect(setup.position.elevation).toBeCloseTo(408, 3);
    expect(setup.orientation).toBeCloseTo(37.5, 4);
    expect(setup.occupied).toMatchObject({ point: 'HT-5', version: 1, published: MARKS['HT-5'] });
    expect(setup.occupied!.without.horizontal).toBeLessThan(0.01);
    expect(setup.backsights.map(({ target }) => target)).toEqual(['HT-1', 'HT-4']);
    for (const { target, distance, height } of setup.backsights) {
      const { easting, northing, elevation } = MARKS[target as Mark];
      expect(distance!.published).toBeCloseTo(Math.hypot(easting - 4800, northing - 8100), 6);
      expect(distance).toMatchObject({ outcome: 'agreed', tolerance: 0.03 });
      expect(Math.abs(distance!.difference)).toBeLessThan(1e-3);
      expect(height!.published).toBeCloseTo(elevation - 408, 6);
      expect(height!.outcome).toBe('agreed');
    }
    expect(setup.provenance.method).toContain('backsights');
  });

  it('on one backsight is held: its distance proves the line and not the direction', async () => {
    const setup = await accepted(backsight(shots('HT-1')));
    expect(setup).toMatchObject({ verdict: 'hold', verdicts: { horizontal: 'hold', vertical: 'pass' } });
    const { text, action } = reason(setup, 'orientation_unproven')!;
    expect(text).toContain('HT-1 alone orients the circle');
    expect(action).toContain('second backsight');
    expect(setup.radio).toMatch(/^Wait\. ST-1 is not proven yet\. Shoot a second backsight/);
  });

  it('on one backsight passes with a check shot that agrees, and fails with one that does not', async () => {
    const check = shots('BM-1', { purpose: 'check' });
    expect(await accepted(backsight([...shots('HT-1'), ...check]))).toMatchObject({ verdict: 'pass' });
    const moved = shots('BM-1', { purpose: 'check', moved: { northing: 0.2 } });
    const wrong = await accepted(backsight([...shots('HT-1'), ...moved]));
    expect(wrong).toMatchObject({ verdict: 'fail' });
    expect(codes(wrong)).toContain('check_over');
  });

  it('becomes a pass by a setup check that comes later', async () => {
    const setup = await accepted(backsight(shots('HT-1')));
    const check = { clientId: newId(), setup: setup.id, purpose: 'check', shots: shots('BM-1') };
    await site.upload(document(newId(), { setupChecks: [check] })).expect(201);
    const { body } = await site.admin.get(site.at(`/setups/${setup.id}`)).expect(200);
    expect(body.verdict).toBe('pass');
  });

  it('does not see by its distance a backsight that moved sideways; a second one does', async () => {
    // HT-1 lies 200 ft east and 300 ft north of HT-5: moved across that line.
    const across = { easting: 0.3 * (300 / 360.555), northing: -0.3 * (200 / 360.555) };
    const one = await accepted(backsight(shots('HT-1', { moved: across })));
    expect(one.backsights[0].distance!.outcome).toBe('agreed');
    expect(one.verdict).toBe('hold');
    const two = await accepted(backsight([...shots('HT-1', { moved: across }), ...shots('HT-4')]));
    expect(two.verdict).toBe('fail');
  });

  it('fails on a backsight that is another mark, or lies at another height', async () => {
    const renamed = shots('HT-1').map((shot) => ({ ...shot, target: 'HT-4' }));
    const wrong = await accepted(backsight(renamed));
    expect(wrong.verdicts.horizontal).toBe('fail');
    expect(reason(wrong, 'backsight_over')!.text).toContain('The distance to HT-4 is');
    const low = await accepted(backsight(shots('HT-1'), { instrumentHeight: 4.62 }));
    expect(low.verdicts.vertical).toBe('fail');
    const text = low.reasons.map((one) => one.text).join(' ');
    expect(text).toContain('The difference of heights to HT-1 is 0.500 ft less');
    expect(low.explanations.map(({ fault }) => fault)).toContain('instrumentHeight');
  });

  it('takes a backsight without distance, and holds what nothing proves', async () => {
    const setup = await accepted(
      backsight(only([...shots('HT-1'), ...shots('HT-4')], 'horizontal', 'zenith')),
    );
    expect(setup.backsights.map(({ distance }) => distance)).toEqual([null, null]);
    expect(setup.backsights.every(({ height }) => height !== null)).toBe(true);
    expect(codes(setup)).toContain('occupied_unproven');
  });

  it('keeps its mark in a refit, and can be worked from', async () => {
    const setup = await accepted(backsight([...shots('HT-1'), ...shots('HT-4'), ...shots('HT-2')]));
    const exclude = shots('HT-2').map(({ clientId }) => clientId);
    const path = site.at(`/setups/${setup.id}`);
    const refit = await site.admin.post(`${path}/refits`, { exclude, reason: 'Leaning.' }).expect(201);
    expect(refit.body).toMatchObject({ method: 'backsight', occupied: { point: 'HT-5' }, verdict: 'pass' });
    const { body } = await site.admin.get(`${site.at(`/setups/${refit.body.id}`)}/pointings?targetHeight=0`);
    const to = body.data.find(({ target }: { target: string }) => target === 'HT-1');
    const [left] = shots('HT-1');
    expect(to.horizontal).toBeCloseTo(left.horizontal, 3);
    expect(body.data.map(({ target }: { target: string }) => target)).not.toContain('HT-5');
  });

  it.each([
    ['without stationPoint', { stationPoint: undefined }, '/setups/0/stationPoint station_point_required'],
    ['over an unknown mark', { stationPoint: 'HT-77' }, '/setups/0/stationPoint target_unknown'],
    [
      'without instrument height',
      { instrumentHeight: null },
      '/setups/0/instrumentHeight instrument_height_required',
    ],
    ['on itself', { stationPoint: 'HT-1' }, '/setups/0/shots/0/target target_is_station'],
  ])('is refused %s', async (_, fields, expected) => {
    const [shot] = shots('HT-1');
    const sent = document(newId(), { setups: [backsight([shot], fields)] });
    expectProblem(await site.upload(sent), 'nothing_accepted', [expected]);
  });

  it('is refused without any direction, and over a quarantined mark', async () => {
    const sent = document(newId(), { setups: [backsight(only(shots('HT-1'), 'zenith', 'slopeDistance'))] });
    expectProblem(await site.upload(sent), 'nothing_accepted', ['/setups/0/shots setup_not_computable']);
    const other = await newSiteOrganization();
    const status = { status: 'quarantined', note: 'Hit.' };
    await other.admin.patch(other.at('/control-points/HT-5'), status).expect(200);
    const stood = document(newId(), { setups: [backsight(shots('HT-1'))] });
    expectProblem(await other.upload(stood), 'nothing_accepted', [
      '/setups/0/stationPoint target_quarantined',
    ]);
  });
});

describe('a resection by directions alone', () => {
  const directions = (marks: readonly Mark[], stand?: Stand) =>
    only(
      marks.flatMap((mark) => shotsTo(mark, stand ? { stand } : {})),
      'horizontal',
      'zenith',
    );

  it('of three marks finds the station, and is held: each of them is needed', async () => {
    const setup = await accepted(
      resection(newId(), { shots: only(directions(['HT-1', 'HT-2', 'HT-4']) as never, 'horizontal') }),
    );
    expect(setup.position.easting).toBeCloseTo(5100, 2);
    expect(setup.position.northing).toBeCloseTo(8100, 2);
    expect(setup).toMatchObject({ position: { elevation: null }, instrumentElevation: null });
    expect(codes(setup)).toContain('single_mark_needed');
    expect(setup.geometry.leaveOneOut.map(({ position }) => position)).toEqual([null, null, null]);
    expect(setup.geometry.dangerCircle).toMatchObject({ marks: ['HT-1', 'HT-2', 'HT-4'], near: false });
  });

  it('of five marks passes, and tells where the station would be without each', async () => {
    const setup = await accepted(
      resection(newId(), { shots: directions(['HT-1', 'HT-2', 'HT-3', 'HT-4', 'HT-5']) }),
    );
    expect(setup.verdict).toBe('pass');
    expect(setup.position.elevation).toBeCloseTo(409, 2);
    expect(setup.geometry.leaveOneOut).toHaveLength(5);
    for (const { position, horizontal } of setup.geometry.leaveOneOut) {
      expect(position!.easting).toBeCloseTo(5100, 2);
      expect(position!.instrumentElevation).toBeCloseTo(414.12, 2);
      expect(horizontal).toBeLessThan(0.01);
    }
    for (const { residual, miss } of setup.targets) {
      expect(residual.easting).toBeNull();
      expect(Math.abs(miss.across!)).toBeLessThan(0.01);
      expect(miss.along).toBeNull();
    }
  });

  it('near the danger circle is held and says how near; on it, it is refused with what to do', async () => {
    const marks = ['HT-1', 'HT-2', 'HT-3'] as const;
    const { centre, radius } = circle(marks.map((mark) => MARKS[mark]));
    const at = (part: number): Stand => ({
      easting: centre.easting - radius * (1 + part),
      northing: centre.northing,
      elevation: 409,
      instrumentHeight: 5.12,
      orientation: 37.5,
    });
    const plain = (part: number) => only(directions(marks, at(part)) as never, 'horizontal');
    const near = await accepted(resection(newId(), { stand: at(0.05), shots: plain(0.05) }));
    expect(near.geometry.dangerCircle).toMatchObject({ near: true });
    expect(near.geometry.dangerCircle!.ratio).toBeCloseTo(0.05, 2);
    expect(near.geometry.dangerCircle!.radius).toBeCloseTo(radius, 3);
    expect(reason(near, 'near_danger_circle')!.text).toMatch(
      /circle through HT-1, HT-2, HT-3, 5 % of its radius/,
    );
    const on = document(newId(), { setups: [resection(newId(), { stand: at(0), shots: plain(0) })] });
    const { errors } = expectProblem(await site.upload(on), 'nothing_accepted', [
      '/setups/0/shots setup_not_computable',
    ]);
    expect(errors![0].detail).toContain('danger circle');
    expect(errors![0].fix).toContain('Measure a distance');
  });
});

describe('a resection by distances', () => {
  const ranges = (marks: readonly Mark[]) =>
    only(
      marks.flatMap((mark) => shotsTo(mark)),
      'zenith',
      'slopeDistance',
    );

  it('from two marks meets in two stations: held, both told, and not releasable', async () => {
    const shots = [...shotsTo('HT-1'), ...ranges(['HT-3'])];
    const setup = await accepted(resection(newId(), { shots }));
    expect(setup.verdict).toBe('hold');
    const places = [setup.position, ...setup.geometry.alternatives];
    expect(places).toHaveLength(2);
    expect(places.some(({ easting, northing }) => Math.hypot(easting - 5100, northing - 8100) < 0.01)).toBe(
      true,
    );
    const { text } = reason(setup, 'two_stations')!;
    expect(text).toContain('E 5100.00 ft, N 8100.00 ft');
    const release = { note: 'By eye.' };
    const path = site.at(`/setups/${setup.id}/release`);
    expectProblem(await site.admin.post(path, release), 'setup_not_releasable');
  });

  it('without any direction has a place and no orientation, and nothing is shot from it', async () => {
    const { surface: _ } = await newLayer(site.admin, site.at);
    const setup = await accepted(resection(newId(), { shots: ranges(['HT-1', 'HT-2', 'HT-3', 'HT-4']) }));
    expect(setup.position.easting).toBeCloseTo(5100, 3);
    expect(setup.position.northing).toBeCloseTo(8100, 3);
    expect(setup).toMatchObject({ verdict: 'hold', orientation: null, accuracyAtWork: { horizontal: null } });
    expect(codes(setup)).toContain('orientation_undetermined');
    const path = site.at(`/setups/${setup.id}`);
    expectProblem(await site.admin.post(`${path}/release`, { note: 'x' }), 'setup_not_releasable');
    const { body } = await site.admin.get(`${path}/pointings?targetHeight=0`).expect(200);
    expect(body.data[0]).toMatchObject({ horizontal: null });
    expect(body.data[0].slopeDistance).toBeGreaterThan(0);
    const [{ clientId: __, target: ___, purpose: ____, ...shot }] = shotsTo('HT-5');
    const observedAt = minutesAgo(1);
    const items = {
      setupChecks: [{ clientId: newId(), setup: setup.id, purpose: 'check', shots: shotsTo('BM-1') }],
      gradeShots: [{ clientId: newId(), layer: 'subgrade', setup: setup.id, shot, observedAt }],
    };
    expectProblem(await site.upload(document(newId(), items)), 'nothing_accepted', [
      '/setupChecks/0/setup setup_without_orientation',
      '/gradeShots/0/setup setup_without_orientation',
    ]);
  });

  it('says which distance took no part: nothing brought it to the horizontal', async () => {
    const whole = ['HT-1', 'HT-2', 'HT-3'].flatMap((mark) =>
      only(shotsTo(mark as Mark), 'horizontal', 'slopeDistance'),
    );
    const setup = await accepted(
      resection(newId(), {
        shots: [...only(shotsTo('HT-4'), 'horizontal', 'slopeDistance', 'zenith'), ...whole],
      }),
    );
    expect(setup.verdict).toBe('hold');
    expect(setup.position.easting).toBeCloseTo(5100, 2);
    expect(setup.notes.map(({ code }) => code)).not.toContain('distance_unused');
    const flat = await accepted(
      resection(newId(), {
        shots: ['HT-1', 'HT-2', 'HT-3'].flatMap((m) =>
          only(shotsTo(m as Mark), 'horizontal', 'slopeDistance'),
        ),
      }),
    );
    expect(flat.notes.find(({ code }) => code === 'distance_unused')!.text).toContain('HT-1, HT-2, HT-3');
  });
});

describe('one target of four that carries another mark’s name', () => {
  it('is named by the first reason, the explanation and the radio; the good ones are not', async () => {
    const wrong = shotsTo('BM-1', { clientId: 'misnamed' }).map((shot) => ({ ...shot, target: 'HT-4' }));
    const shots = [...(['HT-1', 'HT-2', 'HT-3'] as const).flatMap((mark) => shotsTo(mark)), ...wrong];
    const setup = await accepted(resection(newId(), { shots }));
    expect(setup).toMatchObject({ verdict: 'fail', fit: { converged: true } });
    expect(setup.explanations[0]).toMatchObject({ fault: 'targetMoved', subject: 'HT-4' });
    expect(setup.explanations[0].size).toBeCloseTo(Math.hypot(100, 450, 0.75), 0);
    expect(setup.radio).toContain('HT-4');
    expect(setup.reasons.map(({ text }) => text).join(' ')).not.toMatch(/HT-[123]/);
    expect(setup.fit.dataSnooping).toEqual({ criticalW: 3.29, delta0: 4.13, alpha: 0.001, power: 0.8 });
  });
});

function circle([a, b, c]: Place[]) {
  // Perpendicular bisectors of two chords.
  const row = (p: Place, q: Place) => [
    2 * (q.easting - p.easting),
    2 * (q.northing - p.northing),
    q.easting ** 2 - p.easting ** 2 + q.northing ** 2 - p.northing ** 2,
  ];
  const [[a1, b1, c1], [a2, b2, c2]] = [row(a, b), row(b, c)];
  const determinant = a1 * b2 - a2 * b1;
  const centre = { easting: (c1 * b2 - c2 * b1) / determinant, northing: (a1 * c2 - a2 * c1) / determinant };
  return { centre, radius: Math.hypot(a.easting - centre.easting, a.northing - centre.northing) };
}
