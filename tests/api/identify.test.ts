import { beforeAll, describe, expect, it } from 'vitest';
import { runJobOf } from '@/tests/setup/jobs';
import { type Place, type Stand, sight } from './fixtures/geometry';
import {
  document,
  FITTED,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  shotsTo,
  UNITS,
} from './fixtures/site';

const STATE = { prismConstantMm: 0, prismConstantAppliedMm: 0, appliedPpm: 0 };

/** The same shots without names. */
const nameless = <T extends { target: string | null }>(shots: T[]): T[] =>
  shots.map((shot) => ({ ...shot, target: null }));

/** A setup whose shots tell no names. */
const unnamed = (clientId: string, fields: Record<string, unknown> = {}) =>
  resection(clientId, {
    method: 'identify',
    shots: nameless(FITTED.flatMap((mark) => shotsTo(mark))),
    ...fields,
  });

/** A level square of stakes far from the other marks. */
const SQUARE: Record<string, Place> = {
  'SQ-1': { easting: 9000, northing: 9000, elevation: 300 },
  'SQ-2': { easting: 9200, northing: 9000, elevation: 300 },
  'SQ-3': { easting: 9200, northing: 9200, elevation: 300 },
  'SQ-4': { easting: 9000, northing: 9200, elevation: 300 },
};
const IN_SQUARE: Stand = {
  easting: 9070,
  northing: 9120,
  elevation: 298,
  instrumentHeight: 5,
  orientation: 81,
};

function toStake(name: string, fields: Record<string, unknown> = {}) {
  return (['left', 'right'] as const).map((face) => ({
    clientId: `${fields.purpose ?? 'orient'}-${name}/${face}`,
    target: null as string | null,
    face,
    targetHeight: 0,
    ...sight(IN_SQUARE, SQUARE[name], 0, face),
    ...STATE,
    ...fields,
  }));
}

const inSquare = (clientId: string, further: object[] = []) =>
  resection(clientId, {
    method: 'identify',
    stand: IN_SQUARE,
    shots: [...Object.keys(SQUARE).flatMap((name) => toStake(name)), ...further],
  });

let site: SiteOrganization;
beforeAll(async () => {
  site = await newSiteOrganization();
  const points = Object.entries(SQUARE).map(([name, place]) => ({
    name,
    ...place,
    sigma: { horizontal: 0.002, vertical: 0.002 },
  }));
  await site.admin.post(site.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
});

const send = async (setup: object, status = 201) => {
  const { clientId } = setup as { clientId: string };
  const { body } = await site.upload(document(`u-${clientId}`, { setups: [setup] })).expect(status);
  return body;
};
const refusals = ({ errors }: { errors: { pointer: string; code: string }[] }) =>
  errors.map(({ pointer, code }) => `${pointer} ${code}`);

describe('a setup by identify', () => {
  it('finds which control point each shot hit, and is fitted like a resection', async () => {
    const [setup] = (await send(unnamed('id-1'))).setups;
    const [named] = (await send(resection('res-1'))).setups;
    expect(setup.method).toBe('identify');
    expect(setup.identification).toMatchObject({
      ambiguous: false,
      reflectors: 4,
      matched: 4,
      strays: [],
      more: false,
    });
    expect(setup.identification.margin).toBeGreaterThan(Math.log(1000));
    expect(setup.identification.candidates).toHaveLength(1);
    expect(setup.targets.map(({ target }: { target: string }) => target)).toEqual(FITTED);
    for (const field of ['position', 'standardDeviations', 'targets', 'fit', 'verdict', 'orientation']) {
      expect(setup[field]).toEqual(named[field]);
    }
    expect(setup.provenance.control).toEqual(named.provenance.control);
    expect(setup.provenance.method).toContain('geometry');
    expect(named.identification).toBeNull();
  });

  it('answers a stray nameless and unused, with the point that it misses', async () => {
    const shots = nameless([
      ...FITTED.flatMap((mark) => shotsTo(mark)),
      ...shotsTo('HT-5', { moved: { easting: 3.1, elevation: 0.4 } }),
    ]);
    const [setup] = (await send(unnamed('id-stray', { shots }))).setups;
    const stray = setup.targets.find(({ target }: { target: string | null }) => target === null);
    expect(stray).toMatchObject({
      used: false,
      shots: ['orient-HT-5/left', 'orient-HT-5/right'],
      status: null,
      published: null,
      observations: [],
    });
    const [{ nearest }] = setup.identification.strays;
    expect(nearest.target).toBe('HT-5');
    expect(nearest.horizontal).toBeCloseTo(3.1, 1);
    expect(nearest.vertical).toBeCloseTo(0.4, 1);
    const note = setup.notes.find(({ code }: { code: string }) => code === 'stray_shots');
    expect(note.text).toContain('HT-5, the nearest, is 3.1');
    expect(setup.verdict).toBe('pass');
    // It reads the same later, and in metres.
    const { body: again } = await site.admin.get(site.at(`/setups/${setup.id}?length=m`)).expect(200);
    expect(again.identification.strays[0].nearest.horizontal).toBeCloseTo(3.1 * 0.3048, 2);
  });

  it('never takes a quarantined point', async () => {
    const point = site.at('/control-points/HT-4');
    await site.admin.patch(point, { status: 'quarantined', note: 'Hit by a grader.' }).expect(200);
    const [setup] = (await send(unnamed('id-quarantined'))).setups;
    await site.admin.patch(point, { status: 'trusted', note: 'Measured again.' }).expect(200);
    expect(setup.identification).toMatchObject({
      matched: 3,
      strays: [{ shots: ['orient-HT-4/left', 'orient-HT-4/right'] }],
    });
  });

  it('stands in the history of the points that it found', async () => {
    const [setup] = (await send(unnamed('id-history'))).setups;
    const { body } = await site.admin.get(site.at('/control-points/HT-1/history')).expect(200);
    expect(body.residuals.map(({ setupId }: { setupId: string }) => setupId)).toContain(setup.id);
  });

  it('is identified anew by a refit', async () => {
    const shots = nameless([...FITTED, 'HT-5' as const].flatMap((mark) => shotsTo(mark)));
    const [setup] = (await send(unnamed('id-refit', { shots }))).setups;
    const { body } = await site.admin
      .post(site.at(`/setups/${setup.id}/refits`), {
        exclude: ['orient-HT-2/left', 'orient-HT-2/right'],
        reason: 'Shimmer.',
      })
      .expect(201);
    expect(body.targets.map(({ target }: { target: string }) => target)).toEqual([
      'HT-1',
      'HT-3',
      'HT-4',
      'HT-5',
    ]);
    expect(body.identification).toMatchObject({ ambiguous: false, reflectors: 4, matched: 4 });
    const few = {
      exclude: ['HT-1', 'HT-3'].flatMap((mark) => [`orient-${mark}/left`, `orient-${mark}/right`]),
      reason: 'x',
    };
    const refused = await site.admin.post(site.at(`/setups/${body.id}/refits`), few).expect(422);
    expect(refusals(refused.body)).toEqual(['/exclude not_identified']);
  });
});

describe('on a square of stakes', () => {
  it('is held, with every stand listed and the shot that would tell', async () => {
    const [setup] = (await send(inSquare('sq-1'))).setups;
    const { identification, reasons, radio, verdict, verdicts } = setup;
    expect(verdict).toBe('hold');
    expect(verdicts).toEqual({ horizontal: 'hold', vertical: 'hold' });
    expect(identification.ambiguous).toBe(true);
    expect(identification.margin).toBeLessThan(1);
    expect(identification.candidates).toHaveLength(4);
    const stands = identification.candidates.map(({ position: p }: { position: Place }) => [
      p.easting,
      p.northing,
    ]);
    const near = ([east, north]: number[]) =>
      Math.hypot(east - IN_SQUARE.easting, north - IN_SQUARE.northing) < 0.05;
    expect(stands.filter(near)).toHaveLength(1);
    const { target, readings } = identification.deciding;
    expect(Object.keys(SQUARE)).toContain(target);
    expect(readings).toHaveLength(4);
    // Under the true stand it reads what was read there.
    const truly = sight(IN_SQUARE, SQUARE[target]);
    const reading = readings[stands.findIndex(near)];
    expect(reading.horizontal).toBeCloseTo(truly.horizontal, 2);
    expect(reading.zenith).toBeCloseTo(truly.zenith, 2);
    expect(reading.slopeDistance).toBeCloseTo(truly.slopeDistance, 2);
    expect(reasons[0]).toMatchObject({ code: 'identification_ambiguous' });
    expect(reasons[0].action).toContain(`Shoot ${target} by name as a check`);
    expect(radio).toContain(`Shoot ${target}`);
  });

  it('takes no part in a network while its targets are not known', async () => {
    const [{ id }] = (await send(inSquare('sq-network'))).setups;
    const datum = { kind: 'weighted' };
    const named = await site.admin.post(site.at('/adjustments'), { setups: [id], datum }).expect(422);
    expect(refusals(named.body)).toEqual(['/setups/0 setup_ambiguous']);
    const { body: job } = await site.admin
      .post(site.at('/adjustments'), { setups: 'all', datum })
      .expect(202);
    expect(await runJobOf(site, job.id)).toBe('succeeded');
    const { body: ended } = await site.admin.get(`/jobs/${job.id}`).expect(200);
    const path = ended.result.replace('/api/v1', '');
    const { result } = (await site.admin.get(path).expect(200)).body;
    const used = result.provenance.setups.map((setup: { id: string }) => setup.id);
    expect(used).not.toContain(id);
    const notes = result.notes.filter(({ code }: { code: string }) => code === 'setups_ambiguous');
    expect(notes[0].text).toContain('sq-network');
  });

  it('is released by nobody', async () => {
    const [setup] = (await send(inSquare('sq-2'))).setups;
    const person = site.as(site.people.surveyor.key);
    const { body } = await person
      .post(site.at(`/setups/${setup.id}/release`), { note: 'I know where it stands.' })
      .expect(409);
    expect(body.code).toBe('setup_not_releasable');
  });

  it('chooses by a check shot of its own, by name', async () => {
    for (const name of Object.keys(SQUARE)) {
      const check = toStake(name, { target: name, purpose: 'check' });
      const [setup] = (await send(inSquare(`sq-own-${name}`, check))).setups;
      expect(setup.identification).toMatchObject({ ambiguous: false, deciding: null });
      expect(setup.position.easting).toBeCloseTo(IN_SQUARE.easting, 1);
      expect(setup.position.northing).toBeCloseTo(IN_SQUARE.northing, 1);
      expect(setup.targets.slice(0, 4).map(({ target }: { target: string }) => target)).toEqual(
        Object.keys(SQUARE),
      );
    }
  });

  it('is settled by a later check by name where it was right, and says so where another stand is', async () => {
    const [setup] = (await send(inSquare('sq-3'))).setups;
    const check = (clientId: string, of: string, shots: object[]) =>
      site
        .upload(
          document(`u-${clientId}`, {
            setupChecks: [
              {
                clientId,
                setup: of,
                purpose: 'check',
                shots: shots.map((shot, k) => ({ ...shot, clientId: `${clientId}/${k}` })),
              },
            ],
          }),
        )
        .expect(201);
    const [first] = setup.identification.candidates;
    const assumed = first.targets.map(({ target }: { target: string }) => target);
    const wrong = assumed[0] === 'SQ-1' ? 'SQ-2' : 'SQ-1';
    await check('against', setup.id, toStake('SQ-1', { target: wrong }));
    const against = (await site.admin.get(site.at(`/setups/${setup.id}`)).expect(200)).body;
    expect(against.verdict).toBe('fail');
    expect(against.reasons[0]).toMatchObject({ code: 'identification_ambiguous' });
    expect(against.reasons[0].text).toContain(`The shots to ${wrong} fit another of the stands`);

    const [other] = (await send(inSquare('sq-4'))).setups;
    // As the first stand has it: the shot to SQ-1 goes by the name that was found for it.
    await check('for', other.id, toStake('SQ-1', { target: assumed[0] }));
    const settled = (await site.admin.get(site.at(`/setups/${other.id}`)).expect(200)).body;
    expect(settled.identification).toMatchObject({ ambiguous: false, deciding: null });
    expect(settled.identification.candidates).toHaveLength(1);
    expect(settled.reasons.map(({ code }: { code: string }) => code)).not.toContain(
      'identification_ambiguous',
    );
    expect(settled.verdict).toBe('pass');
  });
});

describe('what cannot be identified', () => {
  const cases: [string, (setup: ReturnType<typeof unnamed>) => void, string[]][] = [
    [
      'a shot with a name',
      ({ shots }) => Object.assign(shots[2], { target: 'HT-2' }),
      ['/setups/0/shots/2/target target_named'],
    ],
    [
      'a check without one',
      ({ shots }) => Object.assign(shots[7], { purpose: 'check' }),
      ['/setups/0/shots/7/target target_required'],
    ],
    ['two reflectors', ({ shots }) => shots.splice(4), ['/setups/0/shots not_identified']],
    [
      'a reflector without distances',
      ({ shots }) => {
        for (const shot of shots.slice(0, 2)) Object.assign(shot, { slopeDistance: undefined });
      },
      ['/setups/0/shots/0 reading_incomplete', '/setups/0/shots/1 reading_incomplete'],
    ],
    [
      'a reflector without zenith angles',
      ({ shots }) => {
        for (const shot of shots.slice(6)) Object.assign(shot, { zenith: undefined });
      },
      ['/setups/0/shots/6 reading_incomplete', '/setups/0/shots/7 reading_incomplete'],
    ],
    [
      'distances in another unit',
      ({ shots }) => {
        for (const shot of shots) shot.slopeDistance *= 0.3048;
      },
      ['/setups/0/shots not_identified'],
    ],
    [
      'an occupied mark',
      (setup) => Object.assign(setup, { stationPoint: 'HT-5' }),
      ['/setups/0/stationPoint mutually_exclusive'],
    ],
  ];

  it.each(cases)('%s is refused with its place and what to do', async (name, change, expected) => {
    const setup = unnamed(`bad-${name}`.replaceAll(' ', '-'));
    change(setup);
    const body = await send(setup, 422);
    expect(refusals(body)).toEqual(expected);
    for (const { fix, detail } of body.errors) {
      expect(fix.length).toBeGreaterThan(10);
      expect(detail.length).toBeGreaterThan(5);
    }
  });

  it('a site without control is refused', async () => {
    const project = await site.admin
      .post('/projects', { name: 'Bare', lengthUnit: 'ft', frame: { kind: 'local' } })
      .expect(201);
    const at = `/projects/${project.body.id}`;
    await site.admin.post(`${at}/instruments`, { name: 'TS-1', kind: 'totalStation' }).expect(201);
    const { body } = await site.admin
      .post(`${at}/uploads`, document('bare', { setups: [unnamed('bare')] }))
      .expect(422);
    expect(refusals(body)).toEqual(['/setups/0/shots not_identified']);
    expect(body.errors[0].fix).toContain('Post the control first');
  });

  it('more than ten setups of one upload are left for another', async () => {
    const setups = Array.from({ length: 12 }, (_, i) => unnamed(`many-${i}`));
    const { body } = await site.upload({ clientId: 'many', units: UNITS, setups }).expect(201);
    expect(body.upload.counts).toEqual({ accepted: 10, refused: 2 });
    expect(body.refused.map(({ code }: { code: string }) => code)).toEqual([
      'identification_limit',
      'identification_limit',
    ]);
  });

  it('is not the elevation of a site that nobody shot: pressure is compared with all of its control', async () => {
    const setup = unnamed('id-air', { atmosphere: { temperature: 68, pressure: 25 } });
    expect(refusals(await send(setup, 422))).toEqual([
      '/setups/0/atmosphere/pressure pressure_contradicts_elevation',
    ]);
  });
});
