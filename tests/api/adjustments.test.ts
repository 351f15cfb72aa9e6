import { beforeAll, describe, expect, it } from 'vitest';
import { runJobOf } from '@/tests/setup/jobs';
import { whileHeld, withClient } from './fixtures/database';
import type { Stand } from './fixtures/geometry';
import { book, levelRun } from './fixtures/levels';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  MARKS,
  type Mark,
  newSite,
  newSiteOrganization,
  resection,
  type SentShot,
  type SiteOrganization,
  STAND,
  shotsTo,
} from './fixtures/site';

const NORTH_EAST: Stand = {
  easting: 5230,
  northing: 8160,
  elevation: 410,
  instrumentHeight: 4.9,
  orientation: 211,
};
const STANDS = [STAND, NORTH_EAST];
/** HT-2 stands off its published place; everything was read without any error. */
const MOVED = { easting: 0.03, northing: -0.05, elevation: -0.02 };
const SEEN: readonly Mark[] = ['HT-1', 'HT-2', 'HT-3', 'HT-4', 'HT-5'];
const STEADY = ['HT-1', 'HT-3', 'HT-4', 'HT-5'];

type Point = Record<string, unknown> & { name: string; shift: Record<string, number> };

/** A setup that sees all marks, HT-2 where it really stands. */
function survey(clientId: string, stand: Stand, fields: Record<string, unknown> = {}) {
  const shots = SEEN.flatMap((mark) =>
    shotsTo(mark, { stand, moved: mark === 'HT-2' ? MOVED : {} }),
  ) as SentShot[];
  return resection(clientId, { stand, station: clientId, shots, ...fields });
}

describe('a network adjustment', () => {
  let site: SiteOrganization;
  let setupIds: string[];
  beforeAll(async () => {
    site = await newSiteOrganization();
    setupIds = await surveyed(site);
  });

  async function surveyed(of: SiteOrganization): Promise<string[]> {
    const setups = STANDS.map((stand, i) => survey(`st-${i + 1}`, stand));
    const { body } = await of.upload(document('network', { setups })).expect(201);
    return body.setups.map(({ id }: { id: string }) => id);
  }

  /** Asks for an adjustment, does its job, and answers it. */
  async function adjust(body: object, of = site) {
    const job = await of.admin.post(of.at('/adjustments'), body).expect(202);
    expect(await runJobOf(of, job.body.id)).toBe('succeeded');
    const { body: ended } = await of.admin.get(`/jobs/${job.body.id}`).expect(200);
    const path = (ended.result as string).replace('/api/v1', '');
    return { path, ...(await of.admin.get(path).expect(200)).body };
  }
  const pointOf = (adjustment: { result: { points: Point[] } }, name: string) =>
    adjustment.result.points.find((point) => point.name === name) as Point;
  const held = { setups: 'all', datum: { kind: 'held', points: STEADY } };
  /** HT-2 is named, for the hub suspects it by itself by now and would leave it out. */
  const weighted = { setups: 'all', datum: { kind: 'weighted', points: SEEN } };

  it('finds where a mark stands from the others, changes nothing, and says how sure it is', async () => {
    const adjustment = await adjust({ name: 'Spring', ...held });
    expect(adjustment).toMatchObject({
      name: 'Spring',
      verdict: 'pass',
      applied: null,
      units: { length: 'ft' },
    });
    const { result } = adjustment;
    expect(result.fit).toMatchObject({ converged: true, chiSquare: { passed: true } });
    expect(result.removed).toEqual([]);
    const moved = pointOf(adjustment, 'HT-2');
    for (const axis of ['easting', 'northing', 'elevation'] as const)
      expect(moved.shift[axis]).toBeCloseTo(MOVED[axis], 4);
    expect(moved).toMatchObject({
      version: 1,
      datum: { horizontal: 'new', vertical: 'new' },
      checked: { horizontal: true, vertical: true },
      errorEllipse: { confidence: 0.95 },
    });
    const steady = pointOf(adjustment, 'HT-3');
    expect(steady).toMatchObject({ ...MARKS['HT-3'], datum: { horizontal: 'held' }, errorEllipse: null });
    expect(result.setups).toMatchObject([
      { clientId: 'st-1', easting: expect.closeTo(STAND.easting, 4) },
      { clientId: 'st-2', northing: expect.closeTo(NORTH_EAST.northing, 4) },
    ]);
    expect(result.setups[0].elevation).toBeCloseTo(STAND.elevation + STAND.instrumentHeight, 4);
    expect(result.provenance).toMatchObject({ setups: setupIds.map((id) => ({ id, resultVersion: 1 })) });
    expect(result.provenance.control).toHaveLength(SEEN.length);
    expect(result.notes.map(({ code }: { code: string }) => code)).toContain('held_not_tested');
    const { body: control } = await site.admin.get(site.at('/control-points/HT-2')).expect(200);
    expect(control).toMatchObject({ version: 1, adjustmentId: null });
  });

  it('tells of every observation, page by page, by point and by what was taken out', async () => {
    const { path } = await adjust(held);
    const list = async (query: string) =>
      (await site.admin.get(`${path}/observations?${query}`).expect(200)).body;
    const first = await list('limit=200');
    expect(first.nextCursor).toBeNull();
    const numbers = first.data.map(({ number }: { number: number }) => number);
    expect(numbers).toEqual(numbers.map((_: number, i: number) => i + 1));
    // Two setups, five marks, both faces meaned.
    const directions = first.data.filter(({ kind }: { kind: string }) => kind === 'direction');
    expect(directions).toHaveLength(10);
    expect(directions[0]).toMatchObject({ setup: 'st-1', unit: 'arcsec', removed: false });
    expect(directions[0].shots).toHaveLength(2);
    for (const { redundancy, standardised } of directions) {
      expect(redundancy).toBeGreaterThan(0);
      expect(Math.abs(standardised)).toBeLessThan(0.5);
    }
    const distances = first.data.filter(({ kind }: { kind: string }) => kind === 'distance');
    expect(distances[0].unit).toBe('ft');
    const page = await list('limit=7');
    const next = await list(`limit=7&cursor=${page.nextCursor}`);
    expect(next.data[0].number).toBe(8);
    const of = await list('limit=200&point=HT-2');
    expect(of.data.length).toBeGreaterThanOrEqual(6);
    for (const { from, to } of of.data) expect([from, to]).toContain('HT-2');
    expect((await list('removed=true')).data).toEqual([]);
  });

  it('takes a published coordinate out that contradicts the observations, and holds', async () => {
    const adjustment = await adjust(weighted);
    expect(adjustment.verdict).toBe('hold');
    const { reasons, removed } = adjustment.result;
    const disagrees = reasons.find(({ code }: { code: string }) => code === 'control_disagrees');
    expect(disagrees.text).toContain('HT-2');
    expect(disagrees.action).toMatch(/suspect/);
    expect(removed.length).toBeGreaterThan(0);
    for (const { text, standardised } of removed) {
      expect(text).toContain('HT-2');
      expect(Math.abs(standardised)).toBeGreaterThan(3.29);
    }
  });

  it('becomes control once, with where it comes from, when it is applied', async () => {
    const of = await newSiteOrganization();
    await surveyed(of);
    const { path, id } = await adjust(held, of);
    const surveyor = of.as(of.people.surveyor.key);
    const { body: applied } = await surveyor.post(`${path}/apply`, {}).expect(200);
    expect(applied.points).toMatchObject([{ name: 'HT-2', version: 2 }]);
    expect(applied.unchanged.sort()).toEqual(STEADY);
    const { body: point } = await of.admin.get(of.at('/control-points/HT-2')).expect(200);
    expect(point).toMatchObject({ version: 2, adjustmentId: id, sigmaSource: 'stated', kind: 'target' });
    expect(point.easting).toBeCloseTo(MARKS['HT-2'].easting + MOVED.easting, 4);
    expect(point.elevation).toBeCloseTo(MARKS['HT-2'].elevation + MOVED.elevation, 4);
    expect(point.sigma.horizontal).toBeGreaterThan(0);
    expect(point.sigma.horizontal).toBeLessThan(0.01);
    const { body: history } = await of.admin.get(of.at('/control-points/HT-2/history')).expect(200);
    expect(history.versions).toMatchObject([
      { version: 2, adjustmentId: id },
      { version: 1, adjustmentId: null },
    ]);
    const { body: read } = await of.admin.get(path).expect(200);
    expect(read.applied).toMatchObject({ by: 'site script', note: null });
    expectProblem(await surveyor.post(`${path}/apply`, {}), 'adjustment_not_applicable');

    const { body: events } = await of.admin.get(`/events?limit=200&projectId=${of.projectId}`).expect(200);
    const types = events.data.map(
      ({ type, subject }: { type: string; subject: string }) => `${type} ${subject}`,
    );
    expect(types).toEqual(
      expect.arrayContaining([
        `adjustment.requested ${id}`,
        `adjustment.computed ${id}`,
        `job.succeeded ${read.job.id}`,
        `adjustment.applied ${id}`,
        'control.revised HT-2',
      ]),
    );
  });

  it('is not applied to control that has changed since, and says which', async () => {
    const of = await newSiteOrganization();
    await surveyed(of);
    const { path } = await adjust(held, of);
    const [first, second] = ['HT-2', 'HT-4'] as const;
    const revised = { name: second, ...MARKS[second], elevation: MARKS[second].elevation + 0.01 };
    const points = { units: { length: 'ft' }, points: [revised] };
    await of.admin.post(of.at('/control-points?revise=true'), points).expect(201);
    const refused = await of.admin.post(`${path}/apply`, {});
    const problem = expectProblem(refused, 'adjustment_outdated', [
      `/points/${second} control_point_changed`,
    ]);
    expect(problem.errors?.[0].detail).toContain('version 2');
    const patch = { status: 'quarantined', note: 'Hit by the water truck.' };
    await of.admin.patch(of.at(`/control-points/${first}`), patch).expect(200);
    const both = [`/points/${first} control_point_changed`, `/points/${second} control_point_changed`];
    expectProblem(await of.admin.post(`${path}/apply`, {}), 'adjustment_outdated', both);
    const { body: point } = await of.admin.get(of.at(`/control-points/${first}`)).expect(200);
    expect(point.version).toBe(1);
  });

  it('is not applied after a setup that it used was withdrawn, refitted or checked', async () => {
    const of = await newSiteOrganization();
    const [first, second] = await surveyed(of);
    const surveyor = of.as(of.people.surveyor.key);
    const refused = async (path: string, id: string, says: RegExp) => {
      const answer = await surveyor.post(`${path}/apply`, { note: 'Seen.' });
      const problem = expectProblem(answer, 'adjustment_outdated', [`/setups/${id} setup_changed`]);
      expect(problem.detail).toMatch(says);
    };
    const both = await adjust(held, of);
    const moved = { easting: 3 };
    const late = {
      clientId: 'late',
      setup: 'st-1',
      purpose: 'check',
      observedAt: minutesAgo(60),
      shots: shotsTo('BM-1', { purpose: 'check', clientId: 'late', moved }),
    };
    await of.upload(document('late', { setupChecks: [late] })).expect(201);
    await refused(both.path, first, /st-1 was checked since: its verdict was \w+ and is fail now\./);

    const alone = await adjust({ ...held, setups: [second] }, of);
    const exclude = ['orient-HT-2/left', 'orient-HT-2/right'];
    const refit = await of.admin
      .post(of.at(`/setups/${second}/refits`), { exclude, reason: 'Moved.' })
      .expect(201);
    await refused(alone.path, second, /st-2 was refitted since\./);

    const { id } = refit.body;
    const again = await adjust({ ...held, setups: [id] }, of);
    await of.admin.post(of.at(`/setups/${id}/release`), {}).expect(200);
    await of.admin.post(of.at(`/setups/${id}/withdraw`), {}).expect(200);
    await refused(again.path, id, /st-2\.r1 was withdrawn since\./);
    const { body: point } = await of.admin.get(of.at('/control-points/HT-2')).expect(200);
    expect(point.version).toBe(1);
  });

  it('is refused where a point is revised at the moment in which it is applied', async () => {
    const of = await newSiteOrganization();
    await surveyed(of);
    const { path } = await adjust(held, of);
    const which = `project_id = '${of.projectId}' and name = 'HT-4'`;
    const columns = `easting, northing, elevation, sigma_horizontal, sigma_vertical, kind, description, submitted,
      created_by, created_at`;
    const lock = `select from control_points where ${which} for update`;
    const change = `
      insert into control_point_versions (organization_id, project_id, name, version, ${columns})
        select organization_id, project_id, name, 2, ${columns} from control_point_versions where ${which};
      update control_points set current_version = 2 where ${which}`;
    const answer = await whileHeld(of.hub.superuserUrl, { lock, change }, 1, async () =>
      of.admin.post(`${path}/apply`, {}),
    );
    const problem = expectProblem(answer, 'adjustment_outdated', ['/points/HT-4 control_point_changed']);
    expect(problem.errors?.[0].detail).toContain('version 2');
  });

  it('takes no more shots than a worker has memory for', async () => {
    const of = await newSiteOrganization();
    const [setup] = await surveyed(of);
    await withClient(of.hub.superuserUrl, (client) =>
      client.query(
        `insert into observations
          select (jsonb_populate_record(o, jsonb_build_object('client_id', o.client_id || n))).*
            from observations o, generate_series(1, 1000) n where o.setup_id = $1`,
        [setup],
      ),
    );
    const { body: job } = await of.admin.post(of.at('/adjustments'), held).expect(202);
    expect(await runJobOf(of, job.id)).toBe('failed');
    const { body: ended } = await of.admin.get(`/jobs/${job.id}`).expect(200);
    expect(ended.problem.type).toContain('adjustment_too_large');
    expect(ended.problem.detail).toMatch(/^10020 shots/);
    const { body: other } = await of.admin
      .post(of.at('/adjustments'), { ...held, setups: [setup], until: minutesAgo(600) })
      .expect(202);
    expect(await runJobOf(of, other.id)).toBe('failed');
    const { body: none } = await of.admin.get(`/jobs/${other.id}`).expect(200);
    expect(none.problem.type).toContain('adjustment_not_computable');
  });

  it('calls the targets that the hub found as the refit does, not as the first result did', async () => {
    const of = await newSiteOrganization();
    const shots = SEEN.flatMap((mark) => shotsTo(mark)).map((shot) => ({ ...shot, target: null }));
    const setups = [resection('unnamed', { method: 'identify', shots })];
    const { body } = await of.upload(document('unnamed', { setups })).expect(201);
    // HT-2 is taken out of use; a mark by another name has its place.
    await of.admin
      .patch(of.at('/control-points/HT-2'), { status: 'quarantined', note: 'Renamed.' })
      .expect(200);
    const points = [{ name: 'HT-2A', ...MARKS['HT-2'], sigma: { horizontal: 0.002, vertical: 0.002 } }];
    await of.admin.post(of.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
    const exclude = ['orient-HT-3/left', 'orient-HT-3/right'];
    const refit = await of.admin
      .post(of.at(`/setups/${body.setups[0].id}/refits`), { exclude, reason: 'Shimmer.' })
      .expect(201);
    const targets = refit.body.targets.map(({ target }: { target: string }) => target);
    expect(targets).toContain('HT-2A');
    const { path } = await adjust({ setups: 'all', datum: { kind: 'weighted' } }, of);
    const { body: list } = await of.admin.get(`${path}/observations?limit=200`).expect(200);
    const seen = list.data.flatMap(({ kind, to }: { kind: string; to: string }) =>
      kind === 'direction' ? to : [],
    );
    expect(seen.sort()).toEqual(targets.sort());
  });

  it('on hold is applied with a note by another person alone', async () => {
    const of = await newSiteOrganization();
    await surveyed(of);
    const { path, verdict } = await adjust(weighted, of);
    expect(verdict).toBe('hold');
    const note = 'HT-2 was hit; seen on site.';
    const surveyor = of.as(of.people.surveyor.key);
    expectProblem(await surveyor.post(`${path}/apply`, {}), 'invalid', ['/note note_required']);
    expectProblem(await of.admin.post(`${path}/apply`, { note }), 'second_person_wanted');
    const { body } = await surveyor.post(`${path}/apply`, { note, points: ['HT-2'] }).expect(200);
    expect(body.points.map(({ name }: { name: string }) => name)).toEqual(['HT-2']);
  });

  it('moves no mark by more than a metre unless that is meant', async () => {
    const of = await newSiteOrganization();
    // HT-2 was published five feet off where both setups see it.
    const published = { name: 'HT-2', ...MARKS['HT-2'], easting: MARKS['HT-2'].easting + 5 };
    const points = { units: { length: 'ft' }, confirmUnits: true, points: [published] };
    await of.admin.post(of.at('/control-points?revise=true'), points).expect(201);
    await surveyed(of);
    const { path } = await adjust(held, of);
    const apply = (body: object) => of.admin.post(`${path}/apply`, body);
    expectProblem(await apply({}), 'invalid', ['/points/HT-2 control_point_moves']);
    expectProblem(await apply({ points: ['HT-3'] }), 'invalid', ['/points/0 point_unknown']);
    const { body } = await apply({ confirmMoves: true }).expect(200);
    expect(body.points).toMatchObject([{ name: 'HT-2', version: 3 }]);
  });

  it('finds a suspect and a quarantined mark anew, and lets neither place the network', async () => {
    const of = await newSiteOrganization();
    await surveyed(of);
    for (const [name, status] of [
      ['HT-2', 'quarantined'],
      ['HT-5', 'suspect'],
    ])
      await of.admin.patch(of.at(`/control-points/${name}`), { status, note: 'Leans.' }).expect(200);
    const adjustment = await adjust({ setups: 'all', datum: { kind: 'weighted' } }, of);
    expect(adjustment.verdict).toBe('pass');
    expect(pointOf(adjustment, 'HT-2')).toMatchObject({
      status: 'quarantined',
      datum: { horizontal: 'new' },
    });
    expect(pointOf(adjustment, 'HT-2').shift.northing).toBeCloseTo(MOVED.northing, 3);
    const notes = adjustment.result.notes.filter(
      ({ code }: { code: string }) => code === 'points_not_trusted',
    );
    expect(notes[0].text).toMatch(/HT-2.*HT-5/);
    const named = { setups: 'all', datum: { kind: 'held', points: ['HT-1', 'HT-2'] } };
    expectProblem(await of.admin.post(of.at('/adjustments'), named), 'invalid', [
      '/datum/points/1 point_quarantined',
    ]);
  });

  it('leaves out what a refit left out, what was taken back, and what lies outside the time asked for', async () => {
    const of = await newSiteOrganization();
    const setups = [
      survey('a', STAND, { observedAt: minutesAgo(300) }),
      survey('b', NORTH_EAST, { observedAt: minutesAgo(200) }),
      survey('c', STAND, { observedAt: minutesAgo(100) }),
    ];
    const { body } = await of.upload(document('times', { setups })).expect(201);
    const [a, b, c] = body.setups.map(({ id }: { id: string }) => id) as string[];
    const exclude = ['orient-HT-2/left', 'orient-HT-2/right'];
    const refit = await of.admin
      .post(of.at(`/setups/${b}/refits`), { exclude, reason: 'Bumped.' })
      .expect(201);
    const both = { ...held, setups: [b, refit.body.id] };
    const problem = expectProblem(await of.admin.post(of.at('/adjustments'), both), 'invalid', [
      '/setups/1 setup_repeated',
    ]);
    expect(problem.errors?.[0].detail).toContain('b.r1 has the same shots as b');
    const superseded = await adjust({ ...held, setups: [a, b] }, of);
    const notes = superseded.result.notes.filter(
      ({ code }: { code: string }) => code === 'setups_taken_back',
    );
    expect(notes[0].text).toMatch(/^b: /);
    const usedBy = async (request: object) => {
      const adjustment = await adjust({ ...held, ...request }, of);
      return adjustment.result.provenance.setups.map(({ id }: { id: string }) => id);
    };
    expect(await usedBy({})).toEqual([a, refit.body.id, c]);
    expect(await usedBy({ since: minutesAgo(250) })).toEqual([refit.body.id, c]);
    expect(await usedBy({ until: minutesAgo(250) })).toEqual([a]);
    expect(await usedBy({ setups: [c, a] })).toEqual([a, c]);
    const { path } = await adjust({ ...held, setups: [refit.body.id] }, of);
    const { body: list } = await of.admin.get(`${path}/observations?limit=200`).expect(200);
    expect(list.data.filter(({ to }: { to: string }) => to === 'HT-2')).toEqual([]);
    const taken = of.at(`/setups/${refit.body.id}`);
    await of.admin.post(`${taken}/release`, {}).expect(200);
    await of.admin.post(`${taken}/withdraw`, {}).expect(200);
    expect(await usedBy({})).toEqual([a, c]);
  });

  it('takes level runs, cut at the control that they turned on, with setups or alone', async () => {
    const of = await newSiteOrganization();
    await of.admin
      .post(of.at('/instruments'), { name: 'LV-1', kind: 'level', levelSigmaMmPerKm: 1 })
      .expect(201);
    const runs = [levelRun('out'), levelRun('again'), levelRun('wrong', { sights: book({ 'TP-2': 1 }) })];
    const { body } = await of.upload(document('levels', { levelRuns: runs })).expect(201);
    const [out, again, wrong] = body.levelRuns as { id: string; verdict: string }[];
    expect(wrong.verdict).toBe('fail');
    const alone = { setups: [], datum: { kind: 'held', points: ['BM-1'] } };
    const one = await adjust({ ...alone, levelRuns: [out.id] }, of);
    expect(one).toMatchObject({ verdict: 'hold', result: { provenance: { levelRuns: [out.id] } } });
    expect(one.result.reasons[0].code).toBe('nothing_redundant');
    const all = await adjust({ ...alone, levelRuns: 'all' }, of);
    expect(all.verdict).toBe('pass');
    expect(all.result.provenance.levelRuns).toEqual([out.id, again.id]);
    for (const name of ['HT-5', 'HT-2'] as const) {
      const point = pointOf(all, name);
      expect(point.elevation).toBeCloseTo(MARKS[name].elevation, 3);
      expect(point).toMatchObject({ easting: null, checked: { horizontal: null, vertical: true } });
    }
    const { body: list } = await of.admin.get(`${all.path}/observations?point=HT-5`).expect(200);
    expect(list.data).toMatchObject([
      { kind: 'levelDifference', levelRun: 'out', setup: null, from: 'BM-1', to: 'HT-5', unit: 'ft' },
      { levelRun: 'out', from: 'HT-5', to: 'HT-2' },
      { levelRun: 'again', from: 'BM-1' },
      { levelRun: 'again', to: 'HT-2' },
    ]);
    await surveyed(of);
    const both = await adjust(
      { ...held, datum: { kind: 'held', points: ['BM-1', ...STEADY] }, levelRuns: 'all' },
      of,
    );
    const kinds = new Set(
      (await of.admin.get(`${both.path}/observations?limit=200`).expect(200)).body.data.map(
        ({ kind }: { kind: string }) => kind,
      ),
    );
    for (const kind of ['direction', 'zenith', 'distance', 'levelDifference']) expect(kinds).toContain(kind);

    const refused = (levelRuns: string[]) => of.admin.post(of.at('/adjustments'), { ...alone, levelRuns });
    const nowhere = '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44';
    expectProblem(await refused([out.id, wrong.id, nowhere]), 'invalid', [
      '/levelRuns/1 level_run_fails',
      '/levelRuns/2 level_run_unknown',
    ]);
    expectProblem(await refused([]), 'invalid', ['/setups one_of_required']);
  });

  it('has no result until its job is done, and none after it failed', async () => {
    const begun = await site.admin.post(site.at('/adjustments'), held).expect(202);
    const { body: list } = await site.admin.get(site.at('/adjustments?limit=1')).expect(200);
    const [waiting] = list.data;
    expect(waiting).toMatchObject({
      verdict: null,
      applied: null,
      job: { id: begun.body.id, status: 'queued' },
    });
    const path = site.at(`/adjustments/${waiting.id}`);
    expect((await site.admin.get(path).expect(200)).body.result).toBeNull();
    expectProblem(await site.admin.get(`${path}/observations`), 'adjustment_not_finished');
    expectProblem(await site.admin.post(`${path}/apply`, {}), 'adjustment_not_finished');
    expectProblem(await site.admin.get(`${path}/comparison?with=${waiting.id}`), 'adjustment_not_finished');
    await site.admin.post(`/jobs/${begun.body.id}/cancel`).expect(200);
    expectProblem(await site.admin.post(`${path}/apply`, {}), 'adjustment_not_finished');
  });

  it('is refused at once for what does not exist or is not kept yet', async () => {
    const other = await newSite(site.admin, 'Other');
    const post = (body: object) => site.admin.post(site.at('/adjustments'), body);
    const nowhere = '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44';
    expectProblem(await post({ ...held, setups: [setupIds[0], nowhere] }), 'invalid', [
      '/setups/1 setup_unknown',
    ]);
    expectProblem(
      await post({ setups: 'all', datum: { kind: 'held', points: ['HT-1', 'X-9'] } }),
      'invalid',
      ['/datum/points/1 point_unknown'],
    );
    expectProblem(await post({ ...held, roverPoints: 'all' }), 'invalid', [
      '/roverPoints observations_not_available',
    ]);
    const times = { since: '2031-04-12T07:41:00Z', until: '2031-04-12T07:41:00Z' };
    expectProblem(await post({ ...held, ...times }), 'invalid', ['/until time_out_of_order']);
    const elsewhere = { setups: [setupIds[0]], datum: { kind: 'free' } };
    const foreign = await site.admin.post(other.at('/adjustments'), elsewhere);
    expectProblem(foreign, 'invalid', ['/setups/0 setup_unknown']);
  });

  it('is asked for with adjustments:write and applied with control:write', async () => {
    const { path } = await adjust(held);
    const reader = site.as(await site.newKey(['adjustments:read', 'control:read']));
    await reader.get(path).expect(200);
    expectProblem(await reader.post(site.at('/adjustments'), held), 'forbidden');
    expectProblem(await reader.post(`${path}/apply`, {}), 'forbidden');
    const adjuster = site.as(await site.newKey(['adjustments:read', 'adjustments:write']));
    await adjuster.post(site.at('/adjustments'), held).expect(202);
    expectProblem(await adjuster.post(`${path}/apply`, {}), 'forbidden');
  });

  it('is compared with another epoch: what moved between them, and what stayed', async () => {
    const of = await newSiteOrganization();
    const still = STANDS.map((stand, i) => {
      const shots = SEEN.flatMap((mark) => shotsTo(mark, { stand })) as SentShot[];
      const observedAt = minutesAgo(600);
      return resection(`before-${i}`, { stand, station: `B-${i}`, shots, observedAt });
    });
    await of.upload(document('before', { setups: still })).expect(201);
    await surveyed(of);
    const free = { setups: 'all', datum: { kind: 'free' }, snooping: false };
    const before = await adjust({ ...free, until: minutesAgo(300) }, of);
    const after = await adjust({ ...free, since: minutesAgo(300) }, of);
    const { body } = await of.admin.get(`${after.path}/comparison?with=${before.id}`).expect(200);
    expect(body).toMatchObject({ earlier: before.id, later: after.id, moved: ['HT-2'] });
    expect(body.congruence.passed).toBe(false);
    expect(body.remaining.passed).toBe(true);
    const moved = body.points.find(({ name }: Point) => name === 'HT-2');
    for (const axis of ['easting', 'northing', 'elevation'] as const)
      expect(moved.displacement[axis]).toBeCloseTo(MOVED[axis], 3);
    expect(moved.text).toMatch(/^HT-2 moved: 0\.058 ft in plan towards 149° and 0\.020 ft down\.$/);
    expect(body.text).toMatch(/HT-2/);
    const { body: same } = await of.admin.get(`${after.path}/comparison?with=${after.id}`).expect(200);
    expect(same).toMatchObject({ moved: [], action: null, congruence: { passed: true } });
  });
});
