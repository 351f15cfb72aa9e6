import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from './fixtures/problems';
import {
  document,
  FITTED,
  MARKS,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  STAND,
} from './fixtures/site';

const HERE = { name: 'here', easting: STAND.easting, northing: STAND.northing, elevation: STAND.elevation };

describe('setup forecasts', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const asked = (changes: object = {}) => ({
    units: { length: 'ft' },
    instrument: 'TS-1',
    candidates: [HERE],
    instrumentHeight: STAND.instrumentHeight,
    ...changes,
  });
  const ask = (changes?: object) => site.admin.post(site.at('/setup-forecasts'), asked(changes));
  const gridOf = (grid: object, changes: object = {}) => ask({ candidates: undefined, grid, ...changes });

  it('are what a setup turns out to be that is shot from there', async () => {
    const { body: receipt } = await site.upload(document('u', { setups: [resection('st')] })).expect(201);
    const [setup] = receipt.setups;
    const { body } = await ask({ targets: FITTED, atmosphereMeasured: false }).expect(200);
    const [forecast] = body.forecasts;
    for (const field of ['standardDeviations', 'errorEllipse', 'accuracyAtWork'] as const) {
      for (const [name, value] of Object.entries(setup[field] as Record<string, number>))
        if (typeof value === 'number') expect(forecast[field][name]).toBeCloseTo(value, 6);
    }
    expect(forecast.geometry).toMatchObject({
      targets: setup.geometry.targets,
      insideControl: setup.geometry.insideControl,
    });
    expect(forecast.geometry.spreadDegrees).toBeCloseTo(setup.geometry.spreadDegrees, 4);
    expect(forecast.verdict).toBe(setup.verdict);
    const distances = setup.targets.flatMap(
      ({ observations }: { observations: { kind: string; minimalDetectable: number }[] }) =>
        observations.flatMap(({ kind, minimalDetectable }) => (kind === 'distance' ? minimalDetectable : [])),
    );
    expect(forecast.smallestBlunder.distance.size).toBeCloseTo(Math.max(...distances), 6);
    expect(body.provenance.of).toEqual({
      method: setup.provenance.method,
      version: setup.provenance.version,
    });
    expect(body.notes.map(({ code }: { code: string }) => code)).toContain('atmosphere_unknown');
  });

  it('rank candidates, and say in words where to stand', async () => {
    const candidates = [
      { name: 'far corner', easting: 5900, northing: 8500 },
      HERE,
      { name: 'nowhere', easting: 90_000, northing: 90_000 },
      { easting: 5200, northing: 8050 },
    ];
    const { body } = await ask({ candidates }).expect(200);
    const names = body.forecasts.map(({ name }: { name: string | null }) => name);
    expect(names).toHaveLength(4);
    expect(names.slice(2)).toEqual(['far corner', 'nowhere']);
    expect(body.forecasts.map(({ rank }: { rank: number }) => rank)).toEqual([1, 2, 3, 4]);
    const [best, , far, nowhere] = body.forecasts;
    expect(best.verdict).toBe('pass');
    expect(best.reasons[0].code).toBe('within_limits');
    expect(far.errorEllipse.semiMajor).toBeGreaterThan(best.errorEllipse.semiMajor);
    expect(nowhere).toMatchObject({ verdict: 'hold', errorEllipse: null, geometry: null, targets: [] });
    expect(nowhere.reasons.map(({ code }: { code: string }) => code)).toEqual(['no_station']);
    const shown = (figure: number) => `${figure.toFixed(3)} ft`;
    expect(body.summary).toContain(shown(best.errorEllipse.semiMajor));
    expect(body.summary).toContain(`At far corner: ${shown(far.errorEllipse.semiMajor)}.`);
    expect(body.summary).toContain('One place has too few marks in range.');
    expect(body.limits[0]).toContain('walk the sight lines');
  });

  it('name the mark that a place hangs on', async () => {
    const { body } = await ask({ targets: ['HT-1', 'HT-2'] }).expect(200);
    const [{ verdict, reasons, geometry, targets }] = body.forecasts;
    expect(verdict).toBe('hold');
    expect(reasons.map(({ code }: { code: string }) => code)).toContain('too_few_marks');
    expect(geometry.weakestWithout.shift).toBeNull();
    expect(targets.every(({ without }: { without: object | null }) => without === null)).toBe(true);
  });

  it('map a grid row by row, with its best cells in full', async () => {
    const extent = { minEasting: 4900, maxEasting: 5300, minNorthing: 7900, maxNorthing: 8300 };
    const { body } = await gridOf({ extent, spacing: 100 }).expect(200);
    const { grid } = body;
    expect(grid).toMatchObject({
      origin: { easting: 4900, northing: 7900 },
      spacing: 100,
      rows: 5,
      columns: 5,
    });
    for (const layer of ['verdict', 'targets', 'ellipseSemiMajor', 'workVertical', 'weakestShift'])
      expect(grid[layer]).toHaveLength(25);
    // A cell of the map is the forecast of a candidate at its place.
    const cell = 2 * grid.columns + 3;
    const place = { easting: 5200, northing: 8100, elevation: grid.elevation };
    const { body: alone } = await ask({ candidates: [place] }).expect(200);
    expect(grid.ellipseSemiMajor[cell]).toBe(alone.forecasts[0].errorEllipse.semiMajor);
    expect(grid.workVertical[cell]).toBe(alone.forecasts[0].accuracyAtWork.vertical);
    const [best, second] = body.forecasts;
    expect(best.accuracyAtWork.horizontal / best.accuracyAtWork.limits.horizontal).toBeLessThan(1);
    const apart = Math.max(
      Math.abs(best.position.easting - second.position.easting),
      Math.abs(best.position.northing - second.position.northing),
    );
    expect(apart).toBeGreaterThanOrEqual(200);
  });

  it('cover the box around the control where no extent is sent, and leave cells without marks empty', async () => {
    const { body } = await gridOf({}, { maximumRange: 250 }).expect(200);
    const { origin, spacing, rows, columns, ellipseSemiMajor, targets } = body.grid;
    expect(origin).toEqual({ easting: 4800, northing: 7800 });
    expect([1, 2, 5]).toContain(spacing / 10 ** Math.floor(Math.log10(spacing)));
    expect(rows * columns).toBeLessThanOrEqual(625);
    expect(origin.easting + columns * spacing).toBeGreaterThan(5380);
    const empty = ellipseSemiMajor.flatMap((value: number | null, i: number) => (value === null ? i : []));
    expect(empty.length).toBeGreaterThan(0);
    for (const i of empty) expect(targets[i]).toBeLessThan(2);
  });

  it('answer in the unit that was asked in', async () => {
    const metre = 0.3048;
    const { body: feet } = await ask().expect(200);
    const { body } = await ask({
      units: { length: 'm' },
      candidates: [
        {
          easting: HERE.easting * metre,
          northing: HERE.northing * metre,
          elevation: HERE.elevation * metre,
        },
      ],
      instrumentHeight: STAND.instrumentHeight! * metre,
    }).expect(200);
    expect(body.units.length).toBe('m');
    expect(body.forecasts[0].errorEllipse.semiMajor).toBeCloseTo(
      feet.forecasts[0].errorEllipse.semiMajor * metre,
      9,
    );
    expectProblem(await ask({ units: { length: 'ftUS' } }), 'invalid', ['/units/length units_conflict']);
  });

  it('leave quarantined control out, and take a suspect mark without letting it prove anything', async () => {
    const elsewhere = await newSiteOrganization();
    const post = (changes: object) => elsewhere.admin.post(elsewhere.at('/setup-forecasts'), asked(changes));
    const mark = (name: string, status: string) =>
      elsewhere.admin.patch(elsewhere.at(`/control-points/${name}`), { status, note: 'Leans.' }).expect(200);
    await mark('HT-2', 'quarantined');
    await mark('HT-3', 'suspect');
    const { body } = await post({}).expect(200);
    const names = body.targets.map(({ target }: { target: string }) => target);
    expect(names).toEqual(
      Object.keys(MARKS)
        .filter((name) => !['HT-2', 'HT-3'].includes(name))
        .sort(),
    );
    expectProblem(await post({ targets: ['HT-1', 'HT-2'] }), 'invalid', ['/targets/1 invalid_value']);
    const { body: suspect } = await post({ targets: ['HT-1', 'HT-3', 'HT-4'] }).expect(200);
    expect(suspect.forecasts[0].reasons[0]).toMatchObject({ code: 'too_few_marks' });
  });

  it('say that a class also asks for a check, which no forecast can take', async () => {
    const { body } = await ask({ toleranceClass: 'structures' }).expect(200);
    expect(body.toleranceClass).toBe('structures');
    expect(body.notes.map(({ code }: { code: string }) => code)).toContain('check_wanted');
    const codes = body.forecasts[0].reasons.map(({ code }: { code: string }) => code);
    expect(codes).not.toContain('check_wanted');
  });

  it.each([
    ['a unit is missing', { units: undefined }, ['/units units_required']],
    ['an instrument is not registered', { instrument: 'TS-9' }, ['/instrument instrument_unknown']],
    ['a class is none', { toleranceClass: 'bridge' }, ['/toleranceClass tolerance_class_unknown']],
    [
      'targets are unknown or named twice',
      { targets: ['HT-1', 'HT-99', 'HT-1'] },
      ['/targets/1 target_unknown', '/targets/2 name_repeated'],
    ],
    ['neither candidates nor a grid is sent', { candidates: undefined }, [' one_of_required']],
    ['both are sent', { grid: {} }, [' mutually_exclusive']],
    [
      'a candidate stands on a mark',
      { candidates: [HERE, { ...MARKS['HT-4'], easting: 5051 }] },
      ['/candidates/1 candidate_on_mark'],
    ],
    [
      'a grid has too many cells',
      { candidates: undefined, grid: { spacing: 1 } },
      ['/grid/spacing forecast_too_large'],
    ],
    [
      'an extent ends before it begins',
      {
        candidates: undefined,
        grid: { extent: { minEasting: 1, maxEasting: 0, minNorthing: 0, maxNorthing: 1 } },
      },
      ['/grid/extent/maxEasting invalid_value'],
    ],
    ['there are no candidates', { candidates: [] }, ['/candidates invalid_value']],
    ['a place has no northing', { candidates: [{ easting: 1 }] }, ['/candidates/0/northing required']],
  ])('refuse in plain words where %s', async (_, changes, places) => {
    expectProblem(await ask(changes), 'invalid', places);
  });

  it('refuse more marks than anybody shoots, rather than keep everybody waiting', async () => {
    const crowded = await newSiteOrganization();
    const points = Array.from({ length: 60 }, (_, i) => ({
      name: `P-${i}`,
      easting: 5100 + 50 * Math.sin(i),
      northing: 8100 + 50 * Math.cos(i),
      elevation: 400,
    }));
    await crowded.admin.post(crowded.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
    const answer = await crowded.admin.post(crowded.at('/setup-forecasts'), asked());
    expectProblem(answer, 'invalid', ['/targets forecast_too_large']);
  });

  it('let other requests have their turn while a large map is computed', async () => {
    let finished = false;
    const map = gridOf({
      extent: { minEasting: 4800, maxEasting: 5388, minNorthing: 7800, maxNorthing: 8388 },
      spacing: 12,
    })
      .expect(200)
      .then(({ body }) => {
        finished = true;
        return body.grid;
      });
    let answered = 0;
    while (!finished && answered < 1000) {
      const { status } = await fetch(`${site.hub.url}/api/health/live`);
      expect(status).toBe(200);
      if (!finished) answered++;
    }
    expect((await map).verdict).toHaveLength(2500);
    // Unless the map held all others up, several were answered before it.
    expect(answered).toBeGreaterThan(3);
  });

  it('write nothing', async () => {
    const before = await site.admin.get('/events?limit=200').expect(200);
    await ask().expect(200);
    const after = await site.admin.get('/events?limit=200').expect(200);
    expect(after.body.data).toHaveLength(before.body.data.length);
  });
});
