import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem, places } from './fixtures/problems';
import {
  document,
  MARKS,
  newSite,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

describe('control points', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const post = (points: object[], query = '', units = 'ft') =>
    site.admin.post(site.at(`/control-points${query}`), { units: { length: units }, points });
  const read = async (name: string, query = '') =>
    (await site.admin.get(site.at(`/control-points/${encodeURIComponent(name)}${query}`)).expect(200)).body;

  it('answer for each point what became of it', async () => {
    const [a, b] = [
      { name: 'A-1', easting: 1, northing: 2, elevation: 3 },
      { name: 'A-2', easting: 4, northing: 5 },
    ];
    const first = await post([a, b]).expect(201);
    expect(first.body).toEqual({
      counts: { created: 2, revised: 0, unchanged: 0, refused: 0 },
      points: [
        { pointer: '/points/0', name: 'A-1', outcome: 'created', version: 1 },
        { pointer: '/points/1', name: 'A-2', outcome: 'created', version: 1 },
      ],
      refused: [],
    });
    const second = await post([a, { ...b, easting: 4.5 }, { name: 'A-3', easting: 0, northing: 0 }]).expect(
      201,
    );
    expect(second.body.counts).toEqual({ created: 1, revised: 0, unchanged: 1, refused: 1 });
    expect(places(second.body.refused)).toEqual(['/points/1 control_point_exists']);
    expect((await read('A-2')).easting).toBe(4);
    const third = await post([{ ...b, easting: 4.5 }], '?revise=true').expect(201);
    expect(third.body.points).toEqual([
      { pointer: '/points/0', name: 'A-2', outcome: 'revised', version: 2 },
    ]);
    expect(await read('A-2')).toMatchObject({ easting: 4.5, version: 2 });
    expectProblem(await post([{ ...b, easting: 9 }]), 'nothing_accepted', ['/points/0 control_point_exists']);
  });

  it('echo the very numbers that were sent, in the unit they came in', async () => {
    const sent = { name: 'E-1', easting: 1234567.1, northing: 0.1, elevation: 0.30000000000000004 };
    const sigma = { horizontal: 0.0123456789, vertical: 0.1 };
    await post([{ ...sent, sigma }]).expect(201);
    expect(await read('E-1')).toMatchObject({
      ...sent,
      sigma,
      sigmaSource: 'stated',
      units: { length: 'ft' },
    });
    // 1 ft = 0.3048 m and 1 U.S. survey foot = 1200/3937 m exactly (24 FR 5348, 1 July 1959).
    const metres = await read('E-1', '?length=m');
    expect(metres.easting).toBeCloseTo(sent.easting * 0.3048, 6);
    expect(metres.units.length).toBe('m');
    expect((await read('E-1', '?length=ftUS')).easting).toBeCloseTo((sent.easting * 0.3048 * 3937) / 1200, 5);
    await post([{ name: 'E-2', easting: 376296.05208, northing: 1, elevation: 2 }], '', 'm').expect(201);
    expect((await read('E-2', '?length=m')).easting).toBe(376296.05208);
    expect((await read('E-2')).easting).toBeCloseTo(376296.05208 / 0.3048, 6);
  });

  it('take the project’s accuracy where none is stated, and say so', async () => {
    await post([{ name: 'S-1', easting: 1, northing: 1 }]).expect(201);
    const project = (await site.admin.get(site.at(''))).body;
    expect(await read('S-1')).toMatchObject({ sigma: project.controlSigma, sigmaSource: 'projectDefault' });
  });

  it('are accepted beside their bad neighbours, every place listed', async () => {
    const { body } = await post([
      { name: 'N-1', easting: 1, northing: 1 },
      { name: '-N', easting: 1, northing: 1 },
      { name: 'N-2', easting: '1', northing: null },
      { name: 'N-3', easting: 1, northing: 1, sigma: { horizontal: 0, vertical: 1 }, colour: 'red' },
      { name: 'N-1', easting: 1, northing: 1 },
      { easting: 1e9, northing: 1 },
    ]).expect(201);
    expect(places(body.refused).sort()).toEqual([
      '/points/1/name name_invalid',
      '/points/2/easting wrong_type',
      '/points/2/northing wrong_type',
      '/points/3/colour unknown_field',
      '/points/3/sigma/horizontal invalid_value',
      '/points/4/name name_repeated',
      '/points/5/easting invalid_value',
      '/points/5/name required',
    ]);
    expect(body.counts).toEqual({ created: 1, revised: 0, unchanged: 0, refused: 5 });
  });

  it('keep their names in one form of Unicode, and are found under either', async () => {
    await post([{ name: 'Gru\u0308n 1', easting: 1, northing: 1 }]).expect(201);
    expect((await read('Gr\u00fcn 1')).name).toBe('Gr\u00fcn 1');
    expect((await read('Gru\u0308n 1')).name).toBe('Gr\u00fcn 1');
  });

  it('are computed with in the version of their time, and keep their history', async () => {
    const before = await site.upload(document('v1', { setups: [resection('v1')] })).expect(201);
    const revised = {
      name: 'HT-1',
      ...MARKS['HT-1'],
      elevation: MARKS['HT-1'].elevation + 0.001,
      kind: 'target',
    };
    await post([revised], '?revise=true').expect(201);
    const after = await site.upload(document('v2', { setups: [resection('v2')] })).expect(201);
    const version = (setup: { provenance: { control: object[] } }) => setup.provenance.control;
    expect(version(before.body.setups[0])).toContainEqual({ name: 'HT-1', version: 1 });
    expect(version(after.body.setups[0])).toContainEqual({ name: 'HT-1', version: 2 });

    const { body } = await site.admin.get(site.at('/control-points/HT-1/history')).expect(200);
    expect(body.versions.map((v: { version: number }) => v.version)).toEqual([2, 1]);
    expect(body.versions[1]).toMatchObject({ ...MARKS['HT-1'], createdBy: 'site script' });
    const shown = body.residuals.map((r: { setupId: string; version: number }) => [r.setupId, r.version]);
    expect(shown).toContainEqual([before.body.setups[0].id, 1]);
    expect(shown).toContainEqual([after.body.setups[0].id, 2]);
  });

  it('take no part once quarantined, though their shots are kept', async () => {
    const quarantine = { status: 'quarantined', note: 'Hit by the water truck.' };
    const { body } = await site.admin.patch(site.at('/control-points/HT-2'), quarantine).expect(200);
    expect(body).toMatchObject({ name: 'HT-2', status: 'quarantined' });
    const shots = [...resection('').shots, ...shotsTo('HT-5')];
    const shifted = shots.map((s) => (s.target === 'HT-2' ? { ...s, horizontal: s.horizontal + 1 } : s));
    const answer = await site
      .upload(document('q', { setups: [resection('q', { shots: shifted })] }))
      .expect(201);
    const [setup] = answer.body.setups;
    expect(setup.verdict).toBe('pass');
    const target = setup.targets.find((t: { target: string }) => t.target === 'HT-2');
    expect(target).toMatchObject({ used: false, status: 'quarantined', observations: [] });
    expect(setup.notes.map((n: { code: string }) => n.code)).toContain('mark_quarantined');
    const { body: list } = await site.admin.get(site.at('/control-points?status=quarantined')).expect(200);
    expect(list.data.map((p: { name: string }) => p.name)).toEqual(['HT-2']);
    await site.admin
      .patch(site.at('/control-points/HT-2'), { status: 'trusted', note: 'Reset.' })
      .expect(200);
  });

  it('stay as trusted as they were when they are revised', async () => {
    const point = { name: 'Q-1', easting: 1, northing: 1 };
    await post([point]).expect(201);
    for (const status of ['quarantined', 'suspect', 'trusted']) {
      await site.admin.patch(site.at('/control-points/Q-1'), { status, note: 'Leans.' }).expect(200);
      point.easting += 1;
      await post([point], '?revise=true').expect(201);
      expect(await read('Q-1')).toMatchObject({ easting: point.easting, status });
    }
  });

  it('are the same whatever became of the default that they were left to', async () => {
    const other = await newSite(site.admin, 'Other default');
    const bring = (point: object, query = '') =>
      site.admin.post(other.at(`/control-points${query}`), { units: { length: 'ft' }, points: [point] });
    const [left, stated] = [
      { name: 'D-1', easting: 1, northing: 2, elevation: 3 },
      { name: 'D-2', easting: 1, northing: 2, sigma: { horizontal: 0.01, vertical: 0.02 } },
    ];
    await bring(left).expect(201);
    await bring(stated).expect(201);
    await site.admin.patch(other.at(''), { controlSigma: { horizontal: 0.01, vertical: 0.02 } }).expect(200);
    for (const point of [left, stated])
      expect((await bring(point, '?revise=true').expect(201)).body.counts.unchanged).toBe(1);

    const detail = async (point: object) =>
      expectProblem(await bring(point), 'nothing_accepted', ['/points/0 control_point_exists']).errors?.[0]
        .detail;
    expect(await detail({ ...left, sigma: stated.sigma })).toBe('D-1 exists with another sigma.');
    expect(await detail({ ...stated, sigma: undefined })).toBe('D-2 exists with another sigma.');
    expect(
      await detail({ ...left, northing: 5, elevation: undefined, kind: 'target', description: 'Nail' }),
    ).toBe('D-1 exists with another northing, elevation, kind, description.');
  });

  it('count for no verdict while suspect', async () => {
    for (const name of ['HT-3', 'HT-4'])
      await site.admin
        .patch(site.at(`/control-points/${name}`), { status: 'suspect', note: 'Odd.' })
        .expect(200);
    const { body } = await site.upload(document('s', { setups: [resection('s')] })).expect(201);
    const [setup] = body.setups;
    expect(setup.verdicts.horizontal).toBe('hold');
    expect(setup.reasons.map((r: { code: string }) => r.code)).toContain('too_few_marks');
    const suspect = setup.targets.find((t: { target: string }) => t.target === 'HT-3');
    expect(suspect).toMatchObject({ used: true, status: 'suspect' });
    for (const name of ['HT-3', 'HT-4'])
      await site.admin.patch(site.at(`/control-points/${name}`), { status: 'trusted', note: 'Checked.' });
  });

  it('change their state with a note only', async () => {
    const patch = (body: object) => site.admin.patch(site.at('/control-points/HT-1'), body);
    expectProblem(await patch({ status: 'quarantined' }), 'invalid', ['/note required']);
    expectProblem(await patch({ status: 'deleted', note: 'x' }), 'invalid', ['/status invalid_value']);
    expectProblem(await site.admin.delete(site.at('/control-points/HT-1')), 'method_not_allowed');
  });

  it('refuse the other foot unless that is confirmed', async () => {
    const points = [{ name: 'F-1', easting: 2_000_000, northing: 2_000_000 }];
    expectProblem(await post(points, '', 'ftUS'), 'invalid', ['/units/length units_conflict']);
    const confirmed = { units: { length: 'ftUS' }, confirmUnits: true, points };
    await site.admin.post(site.at('/control-points'), confirmed).expect(201);
    // 2 ppm of two million feet are four feet.
    expect((await read('F-1')).easting).toBeCloseTo(2_000_004.000008, 6);
  });
});

describe('control points as CSV', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const post = (csv: string, query = '?length=ft') =>
    site.admin
      .post(site.at(`/control-points${query}`))
      .set('Content-Type', 'text/csv')
      .send(csv);

  it('come in with a header row, quoted cells, a byte-order mark and either line end', async () => {
    const csv =
      '\uFEFFname,easting,northing,elevation,kind,description\r\n' +
      'C-1,100.25,-200.5,3,benchmark,"Nail, ""north"" kerb"\r\n' +
      'C-2,101,201,,,\n\nC-3 , 1 , 2 , 4 ,control,\n';
    const { body } = await post(csv).expect(201);
    expect(body.counts).toEqual({ created: 3, revised: 0, unchanged: 0, refused: 0 });
    expect(body.points.map((p: { pointer: string }) => p.pointer)).toEqual(['/rows/2', '/rows/3', '/rows/5']);
    const { body: point } = await site.admin.get(site.at('/control-points/C-1'));
    expect(point).toMatchObject({
      easting: 100.25,
      northing: -200.5,
      elevation: 3,
      kind: 'benchmark',
      description: 'Nail, "north" kerb',
    });
    expect((await site.admin.get(site.at('/control-points/C-2'))).body.elevation).toBeNull();
  });

  it('keep their good rows beside the bad ones', async () => {
    const csv = [
      'name,northing,easting,sigmaHorizontal,sigmaVertical',
      'R-1,1,2,0.01,0.01',
      'R-2,one,2,,',
      'R-3,1,2,0.01',
      ',1,2,,',
      'R-4,,2,,',
      'R-5,1e3,2,,',
      'R-6,1,2,0.01,',
      'R-1,1,2,0.01,0.01',
      'R-7,NaN,Infinity,,',
    ].join('\n');
    const { body } = await post(csv).expect(201);
    expect(body.points.map((p: { name: string }) => p.name)).toEqual(['R-1']);
    expect(places(body.refused).sort()).toEqual([
      '/rows/10/easting wrong_type',
      '/rows/10/northing wrong_type',
      '/rows/3/northing wrong_type',
      '/rows/4 row_malformed',
      '/rows/5/name name_invalid',
      '/rows/6/northing required',
      '/rows/7/northing wrong_type',
      '/rows/8/sigma/vertical required',
      '/rows/9/name name_repeated',
    ]);
    expect(body.counts.refused).toBe(8);
  });

  const refusals: [string, string, string, string[]][] = [
    ['without a unit', 'name,easting,northing\nA,1,2', '', ['?length units_required']],
    ['without a column', 'name,easting\nA,1', '?length=ft', ['/rows/1 column_missing']],
    [
      'with a column of its own',
      'name,easting,northing,x\nA,1,2,3',
      '?length=ft',
      ['/rows/1/4 column_unknown'],
    ],
    ['with a column twice', 'name,easting,northing,name\nA,1,2,B', '?length=ft', ['/rows/1/4 name_repeated']],
    ['without rows', 'name,easting,northing\n', '?length=ft', ['/rows required']],
    ['with an open quote', 'name,easting,northing\n"A,1,2', '?length=ft', ['/rows row_malformed']],
    ['in the other foot', 'name,easting,northing\nA,1,2', '?length=ftUS', ['?length units_conflict']],
  ];
  it.each(refusals)('are refused %s', async (_, csv, query, expected) => {
    const code = expected[0].startsWith('?') ? 'invalid' : 'nothing_accepted';
    expectProblem(await post(csv, query), code, expected);
  });

  it('are told the types that are taken where they come as another', async () => {
    const answer = await post('name,easting,northing').set('Content-Type', 'text/plain');
    expectProblem(answer, 'media_type_unsupported');
    expect(answer.headers.accept).toBe('application/json, text/csv');
  });

  it('come in as many as JSON takes, and no more', async () => {
    const table = (rows: number) =>
      `name,easting,northing\n${Array.from({ length: rows }, (_, i) => `M-${i},${i},0`).join('\n')}`;
    expectProblem(await post(table(5_001)), 'invalid', ['/rows invalid_value']);
    expect((await post(table(5_000)).expect(201)).body.counts.created).toBe(5_000);
  });

  it('are refused with a NUL in their text, beside the good ones', async () => {
    const { body } = await post('name,easting,northing,description\nZ-1,1,2,a\u0000b\nZ-2,1,2,ab').expect(
      201,
    );
    expect(places(body.refused)).toEqual(['/rows/2/description text_forbidden']);
    expect(body.counts).toEqual({ created: 1, revised: 0, unchanged: 0, refused: 1 });
  });

  it('say how far points would move, and do not move them so far unless that is confirmed', async () => {
    const csv = 'name,easting,northing,elevation\nGM-1,3000,4000,400\nGM-2,3100,4000,\n';
    await post(csv).expect(201);
    const fix = expect.stringMatching(/unit and the frame.*new name.*confirmUnits/);
    const moved = async (query: string, text = csv) =>
      expectProblem(await post(text, query), 'nothing_accepted').errors;
    expect(await moved('?length=m')).toEqual([
      {
        pointer: '/rows/2',
        code: 'control_point_exists',
        detail:
          'GM-1 exists with another easting, northing, elevation, and would move 11,441 ft: it looks like feet sent as metres.',
        fix,
      },
      {
        pointer: '/rows/3',
        code: 'control_point_exists',
        detail:
          'GM-2 exists with another easting, northing, and would move 11,542 ft: it looks like feet sent as metres.',
        fix,
      },
    ]);
    const refused = await moved('?length=m&revise=true');
    expect(places(refused)).toEqual(['/rows/2 control_point_moves', '/rows/3 control_point_moves']);
    expect(refused?.[0]).toMatchObject({
      detail: 'GM-1 would move 11,441 ft: it looks like feet sent as metres.',
      fix,
    });
    const [shift] = (await moved('?length=ft&revise=true', 'name,easting,northing\nGM-2,3104,4003\n')) ?? [];
    expect(shift.detail).toBe('GM-2 would move 5 ft.');
    await post('name,easting,northing\nGM-2,3103,4000\n', '?length=ft&revise=true').expect(201);
    const { body } = await post(csv, '?length=m&revise=true&confirmUnits=true').expect(201);
    expect(body.counts.revised).toBe(2);
  });

  it('take the other foot once confirmed', async () => {
    const csv = 'name,easting,northing\nU-1,3937,0';
    await post(csv, '?length=ftUS&confirmUnits=true').expect(201);
    const { body } = await site.admin.get(site.at('/control-points/U-1?length=m'));
    expect(body.easting).toBeCloseTo(1200, 9);
  });
});
