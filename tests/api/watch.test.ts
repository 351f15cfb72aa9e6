import { beforeAll, describe, expect, it } from 'vitest';
import { whileHeld, withClient } from './fixtures/database';
import { minutesAgo } from './fixtures/moments';
import {
  document,
  groundShot,
  MARKS,
  type Mark,
  newLayer,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  STAND,
  shotsTo,
} from './fixtures/site';

const codes = (items: readonly { code: string }[]) => items.map(({ code }) => code);
const ALL: readonly Mark[] = ['HT-1', 'HT-2', 'HT-3', 'HT-4', 'HT-5'];

describe('a setup over time', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await newLayer(site.admin, site.at);
  });

  const newSetup = async (clientId: string, options: Record<string, unknown> = {}) =>
    (await site.upload(document(clientId, { setups: [resection(clientId, options)] })).expect(201)).body
      .setups[0];
  /** A closing check on marks of the fit, shot from where the instrument stands by then. */
  const closing = (
    clientId: string,
    setup: string,
    marks: readonly Mark[],
    minutes: number,
    stand = STAND,
  ) => ({
    clientId,
    setup,
    purpose: 'closing',
    observedAt: minutesAgo(minutes),
    shots: marks.flatMap((mark) => shotsTo(mark, { clientId: `${clientId}-${mark}`, stand })),
  });
  const post = (clientId: string, items: Record<string, unknown>) => site.upload(document(clientId, items));
  const read = async (path: string) => (await site.admin.get(site.at(path)).expect(200)).body;

  it('shows no drift where it stands, and the drift with its size where it was kicked', async () => {
    const { id } = await newSetup('kicked');
    const kicked = { ...STAND, easting: STAND.easting + 0.08, orientation: STAND.orientation + 0.02 };
    await post('kicked-a', { setupChecks: [closing('k-1', 'kicked', ['HT-1', 'HT-2'], 60)] }).expect(201);
    const steady = await read(`/setups/${id}/checks`);
    expect(steady.checks).toHaveLength(1);
    expect(steady.checks[0].drift).toMatchObject({ marks: ['HT-1', 'HT-2'], significant: false });
    expect(steady.lastAgreed).toEqual({
      checkId: steady.checks[0].id,
      observedAt: steady.checks[0].observedAt,
    });
    expect(codes(steady.reasons)).toEqual(['check_agreed', 'no_drift']);

    const marks: Mark[] = ['HT-1', 'HT-2', 'HT-4'];
    await post('kicked-b', { setupChecks: [closing('k-2', 'kicked', marks, 30, kicked)] }).expect(201);
    const watch = await read(`/setups/${id}/checks`);
    const { drift } = watch.checks[1];
    expect(drift.significant).toBe(true);
    expect(drift.orientationArcsec.value).toBeCloseTo(72, 0);
    expect(Math.abs(drift.orientationArcsec.value)).toBeGreaterThan(
      3 * drift.orientationArcsec.standardDeviation,
    );
    expect(drift.easting.value).toBeCloseTo(0.08, 2);
    expect(drift.northing.value).toBeCloseTo(0, 2);
    expect(drift.action).toMatch(/^Withdraw it/);
    expect(watch.lastAgreed.checkId).toBe(steady.checks[0].id);
    expect(codes(watch.reasons)).toEqual(['check_not_agreed', 'drifted']);

    const setup = await read(`/setups/${id}`);
    expect(setup.verdict).toBe('fail');
    const [first] = setup.explanations;
    expect(first).toMatchObject({ fault: 'instrumentMoved', subject: null, unit: 'ft' });
    expect(first.size).toBeCloseTo(0.08, 2);
    expect(first.weight).toBeGreaterThan(0.9);
    expect(first.confirm).toMatch(/one more mark of the fit/);
    expect(setup.radio).toMatch(/^Stop\. .*the instrument has moved/);
    const sum = setup.explanations.reduce((all: number, { weight }: { weight: number }) => all + weight, 0);
    expect(sum).toBeCloseTo(1, 9);
  });

  it('blames the mark, not the instrument, where one of three alone is off', async () => {
    const { id } = await newSetup('one-mark');
    const check = closing('o-1', 'one-mark', ['HT-1', 'HT-2', 'HT-4'], 30);
    const moved = shotsTo('HT-2', { clientId: 'o-1-HT-2', moved: { easting: 0.3, northing: -0.2 } });
    const shots = [...check.shots.filter(({ target }) => target !== 'HT-2'), ...moved];
    await post('one-mark-a', { setupChecks: [{ ...check, shots }] }).expect(201);
    expect((await read(`/setups/${id}`)).explanations[0]).toMatchObject({
      fault: 'targetMoved',
      subject: 'HT-2',
    });
  });

  it('tells a turn by one mark, and nothing by a mark outside the fit', async () => {
    const { id } = await newSetup('single');
    const turned = { ...STAND, orientation: STAND.orientation - 0.01 };
    await post('single-a', {
      setupChecks: [closing('s-1', 'single', ['HT-1'], 50, turned), closing('s-2', 'single', ['HT-5'], 40)],
    }).expect(201);
    const [one, outside] = (await read(`/setups/${id}/checks`)).checks;
    expect(one.drift).toMatchObject({ easting: null, northing: null, significant: true });
    expect(one.drift.orientationArcsec.value).toBeCloseTo(-36, 0);
    expect(outside.drift).toBeNull();
  });

  it('judges the refit as well where a check comes late to the setup that it superseded', async () => {
    const before = await newSetup('late', { shots: ALL.flatMap((mark) => shotsTo(mark)) });
    const exclude = ['orient-HT-5/left', 'orient-HT-5/right'];
    const refitted = await site.admin
      .post(site.at(`/setups/${before.id}/refits`), { exclude, reason: 'Sun in the glass.' })
      .expect(201);
    const kicked = { ...STAND, northing: STAND.northing + 0.2 };
    const { body } = await post('late-a', {
      setupChecks: [closing('l-1', 'late', ['HT-1', 'HT-2'], 20, kicked)],
    }).expect(201);
    expect(body.setupChecks).toHaveLength(1);
    expect(body.setupChecks[0]).toMatchObject({ setupId: before.id, carriedFrom: null });
    const after = await read(`/setups/${refitted.body.id}`);
    expect(after.verdict).toBe('fail');
    expect(after.checks).toHaveLength(1);
    expect(after.checks[0]).toMatchObject({
      clientId: 'l-1',
      carriedFrom: body.setupChecks[0].id,
      agreed: false,
    });
    // A further refit carries it once.
    const again = await site.admin
      .post(site.at(`/setups/${after.id}/refits`), { exclude: ['orient-HT-4/left'], reason: 'Heat.' })
      .expect(201);
    expect(again.body.checks.map((c: { clientId: string }) => c.clientId)).toEqual(['l-1']);
    // The same document again answers as it did first.
    const replay = await post('late-a', {
      setupChecks: [closing('l-1', 'late', ['HT-1', 'HT-2'], 20, kicked)],
    });
    expect([200, 409]).toContain(replay.status);
  });

  it('never loses a check that comes at the very moment of a refit', async () => {
    for (let round = 0; round < 8; round++) {
      const name = `moment-${round}`;
      const before = await newSetup(name, { shots: ALL.flatMap((mark) => shotsTo(mark)) });
      const kicked = { ...STAND, northing: STAND.northing + 0.2 };
      const [refitted, checked] = await Promise.all([
        site.admin.post(site.at(`/setups/${before.id}/refits`), {
          exclude: ['orient-HT-5/left', 'orient-HT-5/right'],
          reason: 'Sun in the glass.',
        }),
        post(`${name}-a`, { setupChecks: [closing(`${name}-c`, name, ['HT-1', 'HT-2'], 20, kicked)] }),
      ]);
      expect([refitted.status, checked.status]).toEqual([201, 201]);
      const after = await read(`/setups/${refitted.body.id}`);
      expect(after.checks.map((c: { clientId: string }) => c.clientId)).toEqual([`${name}-c`]);
      expect(after.verdict).toBe('fail');
      expect((await read(`/setups/${before.id}`)).checks).toHaveLength(1);
    }
  });

  it('lists what hangs on it since the last check that agreed, page by page, with what to do', async () => {
    const { id } = await newSetup('hang', { station: 'ST-9' });
    const release = { machine: 'DZ-3', layer: 'subgrade', offset: -0.5, releasedAt: minutesAgo(110) };
    await site.admin.post(site.at(`/setups/${id}/release`), release).expect(200);
    const shot = groundShot({ easting: 5120, northing: 8150, elevation: 399.5 });
    const grade = (name: string, minutes: number) => ({
      clientId: name,
      layer: 'subgrade',
      setup: 'hang',
      shot,
      observedAt: minutesAgo(minutes),
    });
    const bench = {
      clientId: 'hang-b',
      machine: 'DZ-3',
      setup: 'hang',
      benchmark: 'BM-1',
      edge: 'left',
      elevations: [411.25],
      tolerance: 0.05,
      observedAt: minutesAgo(40),
    };
    await post('hang-a', {
      setupChecks: [closing('h-1', 'hang', ['HT-1', 'HT-2'], 60)],
      gradeShots: [grade('hang-1', 80), grade('hang-2', 50), grade('hang-3', 30)],
      benchChecks: [bench],
    }).expect(201);
    const before = await read(`/setups/${id}/affected`);
    expect(codes(before.actions)[0]).toBe('setup_stands');
    expect(before.counts).toEqual({ setup: 0, release: 1, benchCheck: 1, gradeCheck: 2 });

    await site.admin.post(site.at(`/setups/${id}/withdraw`), { note: 'The tripod was bumped.' }).expect(200);
    const affected = await read(`/setups/${id}/affected`);
    expect(affected.subject).toEqual({ kind: 'setup', name: 'ST-9', status: 'withdrawn' });
    expect(affected.since.text).toMatch(/^Since the closing check at .*Z, which still agreed\.$/);
    expect(affected.since.setupId).toBe(id);
    expect(affected.data.map(({ kind }: { kind: string }) => kind)).toEqual([
      'release',
      'gradeCheck',
      'benchCheck',
      'gradeCheck',
    ]);
    expect(codes(affected.actions)).toEqual([
      'machines_affected',
      'bench_checks_affected',
      'grade_checks_affected',
    ]);
    expect(affected.actions[0].action).toContain('Radio DZ-3');
    for (const { href } of affected.data) {
      await site.admin.get(href.replace('/api/v1', '')).expect(200);
    }
    const paged: unknown[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const page = await read(`/setups/${id}/affected?limit=1${cursor ? `&cursor=${cursor}` : ''}`);
      paged.push(...page.data);
      cursor = page.nextCursor;
    }
    expect(paged).toEqual(affected.data);
    await site.admin.get(site.at(`/setups/${id}/affected?cursor=WyJ4Il0`)).expect(400);

    // What was shot from it is kept, and says itself that it does not count.
    const checks = (await read('/grade-checks?limit=200')).data.filter(
      (check: { setupId: string }) => check.setupId === id,
    );
    expect(checks.map((check: { void: { code: string } }) => check.void?.code)).toEqual(
      Array(3).fill('setup_withdrawn'),
    );
    expect((await read(`/grade-checks/${checks[0].id}`)).void.code).toBe('setup_withdrawn');
    expect((await read('/bench-checks?machine=DZ-3')).data[0].void.code).toBe('setup_withdrawn');

    // A foreman reads who withdrew it, when and why.
    const { body } = await site.as(site.people.foreman.key).get(site.at('/acknowledgements')).expect(200);
    expect(body.data[0]).toMatchObject({ machine: 'DZ-3', reason: 'The tripod was bumped.' });
    expect(body.data[0].withdrawnBy).toMatch(/\S/);
    expect(Date.parse(body.data[0].withdrawnAt)).toBeLessThanOrEqual(Date.now());
  });

  it('is affected as a whole where no check has ever agreed', async () => {
    const { id } = await newSetup('unchecked', { station: 'ST-8' });
    const affected = await read(`/setups/${id}/affected`);
    expect(affected.since).toMatchObject({ at: null, checkId: null, setupId: id });
    expect(codes(affected.actions)).toEqual(['nothing_affected']);
  });
});

describe('a control point over many setups', () => {
  const STANDS = [
    STAND,
    { ...STAND, easting: 5180, northing: 8150, orientation: 120 },
    { ...STAND, easting: 5050, northing: 8020, orientation: 301 },
    { ...STAND, easting: 5150, northing: 8040, orientation: 10 },
    { ...STAND, easting: 5090, northing: 8210, orientation: 77 },
    { ...STAND, easting: 5210, northing: 8090, orientation: 222 },
  ];
  /** 20 mm in feet, to the north-east. */
  const MOVED = { easting: 0.0464, northing: 0.0464 };

  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });
  let minutes = 600;
  const seen = async (index: number, moved: object | null, of = site) => {
    minutes -= 20;
    const clientId = `seen-${minutes}`;
    const stand = STANDS[index];
    const shots = ALL.flatMap((mark) =>
      shotsTo(mark, { stand, ...(mark === 'HT-3' && moved ? { moved } : {}) }),
    );
    const fields = { stand, shots, station: `ST-${index + 1}`, observedAt: minutesAgo(minutes) };
    const { body } = await of
      .upload(document(clientId, { setups: [resection(clientId, fields)] }))
      .expect(201);
    return body.setups[0];
  };
  const point = async (name = 'HT-3') =>
    (await site.admin.get(site.at(`/control-points/${name}`)).expect(200)).body;
  const set = (status: string, note: string) =>
    site.admin.patch(site.at('/control-points/HT-3'), { status, note }).expect(200);
  const suspicions = async () => {
    const { body } = await site.admin.get('/audit-entries?limit=200').expect(200);
    return body.data.filter(({ action }: { action: string }) => action === 'control.suspect');
  };

  it('is steady where all see it in its place', async () => {
    expect((await point()).health).toMatchObject({ finding: 'unknown', displacement: null, sightings: [] });
    await seen(0, null);
    await seen(1, null);
    const { health, status, statusAct } = await point();
    expect([status, statusAct]).toEqual(['trusted', null]);
    expect(health).toMatchObject({ finding: 'steady', movedBetween: null });
    expect(health.sightings).toHaveLength(2);
    expect(health.sightings[0]).toMatchObject({ station: 'ST-2', moved: false });
    expect(Math.abs(health.displacement.easting)).toBeLessThan(0.001);
    expect(health.displacement.standardDeviations.easting).toBeGreaterThan(0.0005);
  });

  it('is not named by one setup, and suspected by the hub itself at the second one', async () => {
    await seen(2, MOVED);
    expect((await point()).status).toBe('trusted');
    const { health: doubt } = await point();
    expect(doubt.finding).toBe('doubtful');
    expect(doubt.movedBetween).toBeNull();
    expect(doubt.text).toMatch(/^One setup, ST-3 at .*Z, finds HT-3 0\.0\d ft ± 0\.0\d ft to the north-east/);
    expect(doubt.action).toContain('from a second setup');
    expect(doubt.sightings.map(({ off }: { off: boolean }) => off)).toEqual([true, false, false]);
    for (const name of ['HT-1', 'HT-2', 'HT-4', 'HT-5'])
      expect((await point(name)).health.finding).toBe('steady');
    await seen(3, MOVED);
    const { status, statusAct, health } = await point();
    expect(status).toBe('suspect');
    expect(statusAct.by).toEqual({ kind: 'job', name: 'Hubtack' });
    expect(statusAct.text).toMatch(/^HT-3 stands 0\.0\d ft ± 0\.0\d ft to the north-east, .*ST-3, ST-4/);
    expect(statusAct.text).toContain('ST-2 at');
    expect(health.finding).toBe('moved');
    expect(health.displacement.easting).toBeCloseTo(MOVED.easting, 2);
    expect(health.displacement.northing).toBeCloseTo(MOVED.northing, 2);
    expect(health.displacement.azimuth).toBeGreaterThan(35);
    expect(health.displacement.azimuth).toBeLessThan(55);
    expect(health.test.value).toBeGreaterThan(health.test.critical);
    expect(health.sightings.map(({ moved }: { moved: boolean }) => moved)).toEqual([
      true,
      true,
      false,
      false,
    ]);
    expect(Date.parse(health.movedBetween.after)).toBeLessThan(Date.parse(health.movedBetween.before));
    expect(statusAct.lastGoodAt).toBe(health.movedBetween.after);
    for (const name of ['HT-1', 'HT-2', 'HT-4', 'HT-5']) {
      const other = await point(name);
      expect([other.status, other.health.finding]).toEqual(['trusted', 'steady']);
    }
    const listed = (await site.admin.get(site.at('/control-points?status=suspect')).expect(200)).body.data;
    expect(listed.map(({ name }: { name: string }) => name)).toEqual(['HT-3']);
    expect(listed[0].statusAct.text).toBe(statusAct.text);
    const [entry, ...more] = await suspicions();
    expect(more).toEqual([]);
    expect(entry).toMatchObject({ subject: 'HT-3', actor: { kind: 'job', id: null, name: 'Hubtack' } });
    const { body } = await site.admin.get('/events?limit=200').expect(200);
    expect(body.data.some(({ type }: { type: string }) => type === 'control.suspect')).toBe(true);
  });

  it('names what hangs on it since it was last seen in its place', async () => {
    const read = async () =>
      (await site.admin.get(site.at('/control-points/HT-3/affected')).expect(200)).body;
    const affected = await read();
    expect(affected.subject).toEqual({ kind: 'controlPoint', name: 'HT-3', status: 'suspect' });
    expect(affected.since.text).toMatch(/^Since ST-2 at .*, which still found it in its place\.$/);
    expect(affected.counts).toMatchObject({ setup: 2, gradeCheck: 0 });
    expect(affected.data.map(({ station }: { station: string }) => station)).toEqual(['ST-3', 'ST-4']);
    expect(codes(affected.actions)).toEqual(['setups_affected']);
    // A setup that was refitted without it does not hang on it any more.
    const exclude = ['orient-HT-3/left', 'orient-HT-3/right'];
    const refit = { exclude, reason: 'HT-3 has moved.' };
    await site.admin.post(site.at(`/setups/${affected.data[0].setupId}/refits`), refit).expect(201);
    expect((await read()).data.map(({ station }: { station: string }) => station)).toEqual(['ST-4']);
    // Yet its shots still tell of the mark.
    expect((await point()).health.finding).toBe('moved');
  });

  it('stays what a person has said, whatever the setups go on to show', async () => {
    await set('trusted', 'Surveyed from BM-1 this morning: it is right.');
    await seen(4, MOVED);
    const trusted = await point();
    expect(trusted.status).toBe('trusted');
    expect(trusted.statusAct).toMatchObject({ by: { kind: 'key' }, lastGoodAt: null });
    expect(trusted.health.finding).toBe('moved');
    await set('quarantined', 'Leans.');
    await seen(5, MOVED);
    expect((await point()).status).toBe('quarantined');
    expect(await suspicions()).toHaveLength(1);
  });

  it('is seen in its new coordinates alone once it was published anew', async () => {
    const { easting, northing, elevation } = await point();
    const moved = { name: 'HT-3', easting: easting + 0.0464, northing: northing + 0.0464, elevation };
    const points = [{ ...moved, kind: 'target', sigma: { horizontal: 0.002, vertical: 0.002 } }];
    await site.admin
      .post(site.at('/control-points?revise=true'), { units: { length: 'ft' }, points })
      .expect(201);
    await set('trusted', 'Surveyed and published anew.');
    expect((await point()).health.finding).toBe('unknown');
    await seen(1, MOVED);
    await seen(2, MOVED);
    expect((await point()).health).toMatchObject({ finding: 'steady' });
    expect((await point()).status).toBe('trusted');
  });

  it('is suspected once where uploads that show it come at the same moment', async () => {
    const other = await newSiteOrganization();
    await seen(0, MOVED, other);
    await Promise.all([1, 2, 3].map((index) => seen(index, MOVED, other)));
    await seen(4, MOVED, other);
    const { body } = await other.admin.get('/audit-entries?limit=200').expect(200);
    const acts = body.data.filter(({ action }: { action: string }) => action === 'control.suspect');
    expect(acts.map(({ subject }: { subject: string }) => subject)).toEqual(['HT-3']);
  });

  it('does not overrule whoever says that it is trusted while an upload comes in that shows it moved', async () => {
    const other = await newSiteOrganization();
    const { superuserUrl } = other.hub;
    await seen(0, null, other);
    await seen(1, MOVED, other);
    const mark = `where organization_id = '${other.organizationId}' and name = 'HT-3'`;
    const act = { by: { kind: 'person', name: 'Surveyor' }, at: minutesAgo(-1), note: 'Right.', seen: null };
    await whileHeld(
      superuserUrl,
      {
        lock: `select 1 from control_points ${mark} for update`,
        change: `update control_points set status = 'trusted', status_act = '${JSON.stringify(act)}' ${mark}`,
      },
      1,
      () => seen(2, MOVED, other),
    );
    const { body } = await other.admin.get(other.at('/control-points/HT-3')).expect(200);
    expect(body).toMatchObject({ status: 'trusted', statusAct: { text: 'Right.' } });
    expect(body.health.finding).toBe('moved');
  });

  it('costs no upload where it cannot be looked at', async () => {
    const other = await newSiteOrganization();
    const { id } = await seen(0, MOVED, other);
    // A kept result that no witness can be made of.
    await withClient(other.hub.superuserUrl, (client) =>
      client.query(
        `update setup_results set result = (result::jsonb - 'accuracy')::json where organization_id = $1 and setup_id = $2`,
        [other.organizationId, id],
      ),
    );
    const { id: next } = await seen(1, MOVED, other);
    await other.admin.get(other.at(`/setups/${next}`)).expect(200);
  });

  it('has hanging on it the setups that stand over it, with what was released and shot from them', async () => {
    const other = await newSiteOrganization();
    await newLayer(other.admin, other.at);
    const stand = { ...MARKS['BM-1'], instrumentHeight: 5.12, orientation: 12 };
    const shots = (['HT-1', 'HT-3'] as const).flatMap((mark) => shotsTo(mark, { stand }));
    const over = { stand, method: 'backsight', stationPoint: 'BM-1', station: 'ST-4', shots };
    const { body } = await other.upload(document('over', { setups: [resection('over', over)] })).expect(201);
    const [setup] = body.setups;
    const release = { machine: 'DZ-6', layer: 'subgrade', offset: -0.5, releasedAt: minutesAgo(110) };
    await other.admin.post(other.at(`/setups/${setup.id}/release`), release).expect(200);
    const shot = groundShot({ easting: 5120, northing: 8150, elevation: 399.5 }, stand);
    const grade = { clientId: 'over-1', layer: 'subgrade', setup: 'over', shot, observedAt: minutesAgo(60) };
    await other.upload(document('over-a', { gradeShots: [grade] })).expect(201);
    const bumped = { status: 'quarantined', note: 'Bumped by a scraper.' };
    await other.admin.patch(other.at('/control-points/BM-1'), bumped).expect(200);
    const affected = (await other.admin.get(other.at('/control-points/BM-1/affected')).expect(200)).body;
    expect(affected.counts).toEqual({ setup: 1, release: 1, benchCheck: 0, gradeCheck: 1 });
    expect(affected.data[0]).toMatchObject({ kind: 'setup', id: setup.id, station: 'ST-4' });
    expect(affected.actions[0].action).toContain('Radio DZ-6');
    const backsight = (await other.admin.get(other.at('/control-points/HT-1/affected')).expect(200)).body;
    expect(backsight.counts.setup).toBe(1);
  });
});
