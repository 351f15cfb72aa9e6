import { beforeAll, describe, expect, it } from 'vitest';
import { withClient } from './fixtures/database';
import { book, levelRun, pegTest, tooHigh } from './fixtures/levels';
import { minutesAgo } from './fixtures/moments';
import { places } from './fixtures/problems';
import { document, MARKS, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

const MM = 1 / 304.8;

describe('level runs', () => {
  let site: SiteOrganization;
  let runs = 0;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await site.admin
      .post(site.at('/instruments'), { name: 'LV-1', kind: 'level', levelSigmaMmPerKm: 1 })
      .expect(201);
    await site.upload(document('first-test', { pegTests: [pegTest('first')] })).expect(201);
  });

  const post = (...changes: object[]) => {
    const levelRuns = changes.map((change, i) => levelRun(`lv-${++runs}-${i}`, { ...change }));
    return site.upload(document(`levels-${runs}`, { levelRuns }));
  };
  const one = async (change: object = {}) => {
    const { body } = await post(change).expect(201);
    return body.levelRuns[0];
  };
  const codes = (notes: { code: string }[]) => notes.map(({ code }) => code);

  it('are reduced in the manner of the field book, close and say so in one line', async () => {
    const run = await one();
    expect(run).toMatchObject({ from: 'BM-1', to: 'HT-2', verdict: 'pass', instrument: 'LV-1' });
    expect(codes(run.reasons)).toEqual(['closes']);
    expect(run.closure).toMatchObject({ kind: 'marks', published: 3.75 });
    expect(run.closure.misclosure).toBeCloseTo(0, 6);
    // Third order over 800 ft: 12 mm × √0.24384.
    expect(run.closure.allowed).toBeCloseTo(12 * Math.sqrt(0.24384) * MM, 9);
    expect(run.closure.limit).toMatchObject({ mmPerRootKm: 12, source: 'default' });
    expect(run.sights).toMatchObject({
      setups: 4,
      length: 800,
      backsights: 400,
      foresights: 400,
      largestImbalance: 0,
      lengthSource: 'measured',
    });
    expect(run.arithmetic.agrees).toBe(true);
    expect(run.arithmetic.backsights).toBe(20);
    expect(run.arithmetic.backsights - run.arithmetic.foresights).toBeCloseTo(3.75, 9);
    const kinds = run.points.map((p: { point: string; kind: string }) => `${p.point} ${p.kind}`);
    expect(kinds).toEqual([
      'BM-1 start',
      'TP-1 turning',
      'HT-5 turning',
      'HT-3 intermediate',
      'TP-2 turning',
      'HT-2 end',
    ]);
    // Cut at the control point that it turned on, not at the one that it only read.
    const cut = run.differences.map((d: { from: string; to: string; setups: number; length: number }) => [
      d.from,
      d.to,
      d.setups,
      d.length,
    ]);
    expect(cut).toEqual([
      ['BM-1', 'HT-5', 2, 400],
      ['HT-5', 'HT-2', 2, 400],
    ]);
    expect(run.differences[1].difference).toBeCloseTo(7, 6);
    // 1 mm per km there and back: √2 of it one way, over 400 ft.
    expect(run.differences[1].standardDeviation).toBeCloseTo(Math.SQRT2 * Math.sqrt(0.12192) * MM, 9);
    expect(run.points[1].elevation).toBeCloseTo(409.6, 6);
    expect(run.points[0].heightOfCollimation).toBeCloseTo(416.25, 9);
    expect(run.radio).toMatch(
      /^Level run BM-1 to HT-2 is good, it closes to 0\.000 ft of 0\.019 ft allowed\.$/,
    );
    expect(codes(run.notes)).toEqual(['limit_default']);
    const stake = book().map((line) => (line.point === 'HT-3' ? { ...line, point: 'STAKE-9' } : line));
    const [unchecked] = (await one({ sights: stake })).notes;
    expect(unchecked.code).toBe('intermediate_unchecked');
    expect(unchecked.text).toMatch(/STAKE-9\.$/);
    const read = await site.admin.get(site.at(`/level-runs/${run.id}`)).expect(200);
    expect(read.body).toEqual(run);
  });

  it('distribute a misclosure within the limit along the sights', async () => {
    const run = await one({ sights: book({ 'HT-2': 0.008 }) });
    expect(run.verdict).toBe('pass');
    expect(run.closure.misclosure).toBeCloseTo(-0.008, 6);
    const adjustments = run.points.map((p: { adjustment: number }) => p.adjustment);
    // A quarter a standing; the point read between takes what its standing has at the backsight.
    [0, 0.002, 0.004, 0.005, 0.006, 0.008].forEach((by, i) => {
      expect(adjustments[i]).toBeCloseTo(by, 6);
    });
    expect(run.points[5].elevation).toBeCloseTo(MARKS['HT-2'].elevation, 9);
  });

  it('say of the control points on their way whether they agree, where health can read it', async () => {
    const run = await one({ sights: book({ 'HT-5': 0.03, 'TP-2': -0.03 }) });
    expect(run.verdict).toBe('hold');
    expect(codes(run.reasons)).toEqual(['point_differs', 'point_differs']);
    const outcomes = run.control.map((c: { point: string; role: string; outcome: string }) => [
      c.point,
      c.role,
      c.outcome,
    ]);
    expect(outcomes).toEqual([
      ['HT-5', 'passed', 'differs'],
      ['HT-3', 'passed', 'differs'],
      ['HT-2', 'end', 'agrees'],
    ]);
    expect(run.control[0].difference).toBeCloseTo(-0.03, 3);
    expect(run.reasons[0].action).toContain('mark it suspect');
    const rows = await withClient(site.hub.superuserUrl, async (client) => {
      const sql = `select point, point_version, role, agrees, round((difference / 0.3048)::numeric, 3)::float as ft
        from level_differences where level_run_id = $1 order by line`;
      return (await client.query(sql, [run.id])).rows;
    });
    expect(rows).toEqual([
      { point: 'HT-5', point_version: 1, role: 'passed', agrees: false, ft: -0.03 },
      { point: 'HT-3', point_version: 1, role: 'passed', agrees: false, ft: -0.03 },
      { point: 'HT-2', point_version: 1, role: 'end', agrees: true, ft: 0 },
    ]);
  });

  it('fail where they do not close, bound the error and name a misread figure', async () => {
    const run = await one({ sights: book({ 'HT-2': -0.1 }) });
    expect(run.verdict).toBe('fail');
    expect(codes(run.reasons)).toEqual(['misclosure_over', 'error_placed', 'misread_suspected']);
    expect(run.closure.misclosure).toBeCloseTo(0.1, 6);
    expect(run.points.every((p: { adjustment: number }) => p.adjustment === 0)).toBe(true);
    expect(run.reasons[1].action).toBe('Re-run from HT-3 to HT-2.');
    expect(run.reasons[2].text).toContain('0.10 ft');
    expect(run.radio).toContain('Do not use its heights.');
  });

  it('close as a loop on their start, which proves no mark', async () => {
    const out = book();
    const back = [
      { point: 'BM-1', backsight: 5, backsightDistance: 90 },
      { point: 'TP-1', foresight: 6, foresightDistance: 90, backsight: 7, backsightDistance: 90 },
      { point: 'BM-1', foresight: 6.001, foresightDistance: 90 },
    ];
    expect(out).toHaveLength(6);
    const run = await one({ to: 'BM-1', sights: back });
    expect(run).toMatchObject({ verdict: 'pass', closure: { kind: 'loop', published: 0 } });
    expect(codes(run.notes)).toContain('loop_proves_no_mark');
    expect(run.control).toEqual([]);
    expect(run.radio).toMatch(/^Level loop on BM-1 is good/);
  });

  it('are held where they close on nothing, or on a mark that nobody trusts', async () => {
    const open = await one({
      to: undefined,
      sights: book()
        .slice(0, 1)
        .concat([{ point: 'NEW', foresight: 4, foresightDistance: 100 }]),
    });
    expect([open.verdict, codes(open.reasons)]).toEqual(['hold', ['not_closed']]);
    expect(open.closure).toMatchObject({ kind: 'open', misclosure: null, published: null });
    expect(open.points[1].elevation).toBeCloseTo(412.25, 5);
    const elsewhere = await newSiteOrganization();
    await elsewhere.admin
      .patch(elsewhere.at('/control-points/HT-2'), { status: 'suspect', note: 'Leans.' })
      .expect(200);
    const { body } = await elsewhere.upload(
      document('suspect', { levelRuns: [levelRun('s', { instrument: undefined })] }),
    );
    expect(codes(body.levelRuns[0].reasons)).toEqual(['mark_not_trusted']);
    expect(codes(body.levelRuns[0].notes)).toContain('instrument_unstated');
  });

  it('take as little as the upload’s own shape', async () => {
    const sights = book().map(({ backsightDistance: _b, foresightDistance: _f, ...line }) => line);
    const bare = { instrument: undefined, observedAt: undefined, to: undefined, sights };
    const run = await one(bare);
    expect([run.verdict, codes(run.reasons)]).toEqual(['hold', ['lengths_unknown']]);
    expect(run.sights).toMatchObject({ lengthSource: 'assumed', backsights: null, largestImbalance: null });
    expect(run.sights.length).toBeCloseTo(240 / 0.3048, 6);
    // A limit by the number of setups needs no length.
    const counted = await one({ ...bare, limit: { mmPerRootSetup: 2, citation: 'clause 7' } });
    expect(counted.verdict).toBe('pass');
    expect(counted.closure.allowed).toBeCloseTo(4 * MM, 9);
    expect(counted.closure.limit).toMatchObject({ mmPerRootSetup: 2, source: 'run', citation: 'clause 7' });
  });

  it('compare what the book has with what its readings say, read staffs upside down, and mark long sights', async () => {
    const wrong = book();
    wrong[1] = { ...wrong[1], bookedElevation: 409.7 };
    const run = await one({ sights: wrong });
    expect([run.verdict, codes(run.reasons)]).toEqual(['hold', ['booking_differs']]);
    expect(run.reasons[0].text).toContain('TP-1 0.100 ft higher');
    const right = book();
    right[1] = { ...right[1], bookedElevation: 409.6 };
    expect((await one({ sights: right })).verdict).toBe('pass');
    const odd = book();
    odd[1] = { ...odd[1], foresight: -1, backsight: (odd[1].backsight ?? 0) - (odd[1].foresight ?? 0) - 1 };
    const inverted = await one({ sights: odd });
    expect(inverted.verdict).toBe('pass');
    expect(codes(inverted.notes)).toContain('staff_inverted');
    const far = book().map((line) => ({
      ...line,
      ...(line.backsightDistance ? { backsightDistance: 400 } : {}),
      ...(line.foresightDistance ? { foresightDistance: 400 } : {}),
    }));
    expect(codes((await one({ sights: far })).notes)).toContain('sight_long');
  });

  it('take the collimation of the last test off, and ask for one where the balance needs it', async () => {
    const slope = 6e-5;
    const read = (name: string, reading: number | undefined, distance: number) =>
      reading === undefined
        ? {}
        : { [name]: reading + tooHigh(slope, distance), [`${name}Distance`]: distance };
    const tilted = book().map((line) => ({
      ...line,
      ...read('backsight', line.backsight, 180),
      ...read('intermediate', line.intermediate, 120),
      ...read('foresight', line.foresight, 60),
    }));
    await site.admin.post(site.at('/instruments'), { name: 'LV-2', kind: 'level', levelSigmaMmPerKm: 0.7 });
    const untested = await one({ instrument: 'LV-2', sights: tilted });
    expect(codes(untested.reasons)).toContain('sights_unbalanced');
    expect(untested.collimation).toMatchObject({ source: 'untested', mmPerM: 0, sigmaMmPerM: 0.05 });
    expect(codes(untested.notes)).toContain('peg_test_missing');

    const both = document('test and run', {
      pegTests: [pegTest('lv2', { instrument: 'LV-2' }, slope)],
      levelRuns: [levelRun('after-test', { instrument: 'LV-2', sights: tilted })],
    });
    const { body } = await site.upload(both).expect(201);
    const [run] = body.levelRuns;
    expect(run.verdict).toBe('pass');
    expect(run.collimation).toMatchObject({ source: 'pegTest', pegTestId: body.pegTests[0].id });
    expect(run.collimation.mmPerM).toBeCloseTo(0.06, 3);
    expect(run.collimation.effect).toBeCloseTo(480 * slope, 4);
    expect(run.closure.misclosure).toBeCloseTo(0, 3);
    // A run from before the test knows nothing of it, nor does one whose level corrects by itself need it off.
    const earlier = await one({ instrument: 'LV-2', sights: tilted, observedAt: minutesAgo(600) });
    expect(earlier.collimation.source).toBe('untested');
    const own = await one({ instrument: 'LV-2', collimationApplied: true });
    expect(own.collimation).toMatchObject({ source: 'instrument', mmPerM: 0 });
    expect((await site.admin.get(site.at(`/uploads/${body.upload.id}`))).body).toEqual(body);
  });

  it('are held after a failed test, whose collimation is not taken off', async () => {
    await site.admin.post(site.at('/instruments'), { name: 'LV-3', kind: 'level' });
    const pegTests = [pegTest('bad', { instrument: 'LV-3' }, 3e-4)];
    const { body } = await site.upload(document('bad test', { pegTests })).expect(201);
    const [test] = body.pegTests;
    expect([test.verdict, codes(test.reasons)]).toEqual(['fail', ['collimation_over']]);
    expect(test.collimation.mmPerM).toBeCloseTo(0.3, 2);
    expect(test.adjustTo.staff).toBe('B');
    expect(test.adjustTo.wanted).toBeCloseTo(4.2, 2);
    expect(test.reasons[0].action).toContain('staff B should read 4.2');
    const run = await one({ instrument: 'LV-3' });
    expect(codes(run.reasons)).toContain('peg_test_failed');
    expect(run.collimation).toMatchObject({ source: 'untested', mmPerM: 0 });
  });

  it('use the project’s limit where the run states none', async () => {
    const levelLimit = { ftPerRootMile: 0.02, citation: 'special provision 12' };
    const changed = await site.admin.patch(`/projects/${site.projectId}`, { levelLimit }).expect(200);
    expect(changed.body.levelLimit).toMatchObject({
      ftPerRootMile: 0.02,
      mmPerRootSetup: null,
      source: 'project',
      citation: 'special provision 12',
    });
    const run = await one({ sights: book({ 'HT-2': 0.03 }) });
    expect(run.verdict).toBe('fail');
    expect(run.closure.allowed).toBeCloseTo(0.02 * Math.sqrt(800 / 5280), 9);
    const back = await site.admin.patch(`/projects/${site.projectId}`, { levelLimit: null }).expect(200);
    expect(back.body.levelLimit).toMatchObject({ mmPerRootKm: 12, source: 'default' });
    const two = await site.admin.patch(`/projects/${site.projectId}`, {
      levelLimit: { mmPerRootKm: 12, mmPerRootSetup: 1 },
    });
    expect([two.status, places(two.body.errors)]).toEqual([422, ['/levelLimit mutually_exclusive']]);
  });

  it('are refused one by one with what is wrong, and where', async () => {
    const points = [{ name: 'FLAT', easting: 1, northing: 1 }];
    await site.admin.post(site.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
    const line = (at: number, change: object) =>
      book().map((sight, i) => (i === at ? { ...sight, ...change } : sight));
    const { body } = await post(
      { sights: [] },
      { sights: line(0, { backsight: undefined, backsightDistance: undefined }) },
      { sights: line(3, { foresight: 4, foresightDistance: 50 }) },
      { sights: line(1, { foresightDistance: undefined }) },
      { from: 'NOWHERE', sights: line(0, { point: 'NOWHERE' }) },
      { from: 'FLAT', sights: line(0, { point: 'FLAT' }) },
      { from: 'HT-5' },
      { to: 'HT-1' },
      { instrument: 'TS-1' },
      { instrument: 'LV-9' },
      { sights: line(2, { backsight: undefined, backsightDistance: undefined }) },
      { sights: line(5, { backsight: 4, backsightDistance: 100 }) },
      { sights: line(3, { intermediate: undefined }) },
      { sights: line(3, { foresightDistance: 20 }) },
      { sights: line(1, { foresight: 1234 }) },
      { sights: line(1, { foresightDistance: -3 }) },
      { limit: {} },
      { sights: line(1, { colour: 'red' }) },
      {},
    ).expect(201);
    expect(places(body.refused).sort()).toEqual(
      [
        '/levelRuns/0/sights invalid_value',
        '/levelRuns/1/sights/0/backsight level_book_incomplete',
        '/levelRuns/2/sights/3/intermediate level_book_conflict',
        '/levelRuns/3/sights/1/foresightDistance sight_distance_missing',
        '/levelRuns/4/from benchmark_unknown',
        '/levelRuns/5/from benchmark_without_elevation',
        '/levelRuns/6/sights/0/point level_run_ends',
        '/levelRuns/7/to level_run_ends',
        '/levelRuns/8/instrument instrument_not_level',
        '/levelRuns/9/instrument instrument_unknown',
        '/levelRuns/10/sights/2/backsight level_book_incomplete',
        '/levelRuns/11/sights/5/backsight level_book_conflict',
        '/levelRuns/12/sights/3/point level_book_incomplete',
        '/levelRuns/13/sights/3/foresightDistance sight_distance_alone',
        '/levelRuns/14/sights/1/foresight invalid_value',
        '/levelRuns/15/sights/1/foresightDistance invalid_value',
        '/levelRuns/16/limit one_of_required',
        '/levelRuns/17/sights/1/colour unknown_field',
      ].sort(),
    );
    expect(body.levelRuns).toHaveLength(1);
    const { levelRuns, upload } = body;
    const again = await site.upload(
      document('again', { levelRuns: [levelRun(levelRuns[0].clientId)], setups: [resection('with-level')] }),
    );
    expect(places(again.body.refused)).toEqual(['/levelRuns/0/clientId client_id_taken']);
    const twice = await site.upload(document('twice', { levelRuns: [levelRun('tw'), levelRun('tw')] }));
    expect(places(twice.body.refused)).toEqual(['/levelRuns/1/clientId client_id_taken']);
    expect((await site.admin.get(site.at(`/uploads/${upload.id}`))).body).toEqual(body);
  });

  it('are listed newest first, by verdict, level and the points that they touch', async () => {
    const own = await newSiteOrganization();
    const levelRuns = [
      levelRun('good', { instrument: undefined }),
      levelRun('bad', { instrument: undefined, sights: book({ 'HT-2': 0.2 }) }),
      levelRun('short', {
        instrument: undefined,
        from: 'HT-1',
        to: 'HT-4',
        sights: [
          { point: 'HT-1', backsight: 5, backsightDistance: 60 },
          { point: 'HT-4', foresight: 3, foresightDistance: 60 },
        ],
      }),
    ];
    await own.upload(document('three', { levelRuns })).expect(201);
    const ids = async (query: string) => {
      const { body } = await own.admin.get(own.at(`/level-runs${query}`)).expect(200);
      return body.data.map((run: { clientId: string }) => run.clientId);
    };
    expect(await ids('')).toEqual(['short', 'bad', 'good']);
    expect(await ids('?verdict=fail')).toEqual(['bad']);
    expect(await ids('?point=HT-5')).toEqual(['bad', 'good']);
    expect(await ids('?point=HT-4')).toEqual(['short']);
    expect(await ids('?instrument=LV-1')).toEqual([]);
    const first = await own.admin.get(own.at('/level-runs?limit=2')).expect(200);
    expect(first.body.data).toHaveLength(2);
    expect(await ids(`?limit=2&cursor=${first.body.nextCursor}`)).toEqual(['good']);
    const metres = await own.admin.get(own.at('/level-runs?length=m&limit=1'));
    expect(metres.body.data[0].points[0].elevation).toBeCloseTo(410 * 0.3048, 9);
    const stale = await own.admin.get(own.at(`/level-runs?verdict=pass&cursor=${first.body.nextCursor}`));
    expect([stale.status, stale.body.code]).toEqual([400, 'cursor_invalid']);
  });
});

describe('two-peg tests', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await site.admin.post(site.at('/instruments'), { name: 'LV-1', kind: 'level' }).expect(201);
  });

  it('pass a level within its limit, and keep the history', async () => {
    const pegTests = [
      pegTest('march', { observedAt: minutesAgo(50_000) }, 2e-5),
      pegTest('april', {}, -3e-5),
    ];
    const { body } = await site.upload(document('tests', { pegTests })).expect(201);
    const [march, april] = body.pegTests;
    expect(march).toMatchObject({ instrument: 'LV-1', verdict: 'pass', limitMmPerM: 0.1 });
    expect(march.collimation.mmPerM).toBeCloseTo(0.02, 3);
    expect(march.collimation.arcsec).toBeCloseTo((march.collimation.mmPerM / 1000) * 206264.806, 6);
    expect(march.heightDifference).toBeCloseTo(0.8, 4);
    expect(march.fit.degreesOfFreedom).toBe(2);
    expect(april.collimation.mmPerM).toBeCloseTo(-0.03, 3);
    const list = await site.admin.get(site.at('/peg-tests?instrument=LV-1')).expect(200);
    expect(list.body.data).toEqual([april, march]);
    expect((await site.admin.get(site.at(`/peg-tests/${april.id}`)).expect(200)).body).toEqual(april);
    const { body: run } = await site.upload(
      document('old', {
        levelRuns: [levelRun('old', { observedAt: minutesAgo(120) })],
      }),
    );
    expect(run.levelRuns[0].collimation.pegTestId).toBe(march.id);
    expect(run.levelRuns[0].notes.map(({ code }: { code: string }) => code)).toContain('peg_test_old');
  });

  it('hold a test that cannot tell, and one whose standings contradict each other', async () => {
    const near = { readingA: 5, distanceA: 20, readingB: 4.2, distanceB: 26 };
    const even = { readingA: 5, distanceA: 20, readingB: 4.2, distanceB: 20 };
    const moved = pegTest('moved');
    moved.setups[3] = { ...moved.setups[3], readingB: moved.setups[3].readingB + 0.03 };
    const { body } = await site.upload(
      document('unclear', { pegTests: [pegTest('short', { setups: [even, near] }), moved] }),
    );
    const [short, contradicting] = body.pegTests;
    expect([short.verdict, short.reasons[0].code]).toEqual(['hold', 'method_not_capable']);
    expect(contradicting.fit.passed).toBe(false);
    expect(contradicting.reasons[0].code).toBe('standings_disagree');
    expect(contradicting.verdict).not.toBe('pass');
  });

  it('are refused with what is wrong', async () => {
    const same = { readingA: 5, distanceA: 50, readingB: 4, distanceB: 50 };
    const pegTests = [
      pegTest('r-1', { instrument: 'TS-1' }),
      pegTest('r-2', { instrument: 'LV-7' }),
      pegTest('r-3', { setups: [same, same] }),
      pegTest('r-4', { setups: [same] }),
      pegTest('r-5', { setups: [same, { ...same, distanceA: 0 }] }),
      pegTest('r-6'),
      pegTest('r-6'),
    ];
    const { body } = await site.upload(document('refused', { pegTests })).expect(201);
    expect(places(body.refused).sort()).toEqual([
      '/pegTests/0/instrument instrument_not_level',
      '/pegTests/1/instrument instrument_unknown',
      '/pegTests/2/setups peg_test_geometry',
      '/pegTests/3/setups invalid_value',
      '/pegTests/4/setups/1/distanceA invalid_value',
      '/pegTests/6/clientId client_id_taken',
    ]);
  });
});
