import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem, places } from './fixtures/problems';
import { type Sent, send } from './fixtures/send';
import { document, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

type Setup = Record<string, unknown> & { shots: Record<string, unknown>[] };

describe('bad input', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const post = (text: string): Promise<Sent> =>
    send(`${site.hub.url}/api/v1${site.at('/uploads')}`, {
      headers: { Authorization: `Bearer ${site.key}`, 'Content-Type': 'application/json' },
      body: text,
    });
  const raw = (id: string) =>
    send(`${site.hub.url}/api/v1${site.at(`/uploads/${id}/raw`)}`, {
      method: 'GET',
      headers: { Authorization: `Bearer ${site.key}` },
    });

  let count = 0;
  /** Posts a good setup and one that was spoilt, as an object or in its text. */
  async function spoilt(spoil: (setup: Setup) => void, rewrite: (text: string) => string = (text) => text) {
    const [good, bad] = [`good-${++count}`, `bad-${count}`];
    const setup = resection(bad) as unknown as Setup;
    spoil(setup);
    const sent = JSON.stringify(document(`u-${count}`, { setups: [resection(good), 'HERE'] }));
    const text = sent.replace('"HERE"', rewrite(JSON.stringify(setup)));
    const answer = await post(text);
    expect(answer.status).toBe(201);
    const body = answer.body as {
      upload: { id: string; counts: object };
      setups: { clientId: string }[];
      refused: { pointer: string; code: string; detail: string; fix: string }[];
    };
    expect(body.upload.counts).toEqual({ accepted: 1, refused: 1 });
    expect(body.setups.map(({ clientId }) => clientId)).toEqual([good]);
    expect((await raw(body.upload.id)).bytes.toString()).toBe(text);
    return body.refused;
  }
  const keep = () => undefined;
  /** Replaces the value of the first field of that name, in the text. */
  const literal = (field: string, value: string) => (text: string) =>
    text.replace(new RegExp(`("${field}":)("[^"]*"|[^,}]*)`), (_, name: string) => `${name}${value}`);

  type Case = [string, (setup: Setup) => void, ((text: string) => string) | undefined, string[]];
  const cases: Case[] = [
    [
      'an unknown field',
      (s) => Object.assign(s.shots[0], { colour: 'red' }),
      undefined,
      ['/shots/0/colour unknown_field'],
    ],
    ['a missing field', (s) => Object.assign(s, { station: undefined }), undefined, ['/station required']],
    [
      'a number in text',
      (s) => Object.assign(s.shots[0], { slopeDistance: '312.4' }),
      undefined,
      ['/shots/0/slopeDistance wrong_type'],
    ],
    [
      'NaN in text',
      (s) => Object.assign(s.shots[0], { slopeDistance: 'NaN' }),
      undefined,
      ['/shots/0/slopeDistance wrong_type'],
    ],
    [
      'Infinity in text',
      (s) => Object.assign(s, { instrumentHeight: '-Infinity' }),
      undefined,
      ['/instrumentHeight wrong_type'],
    ],
    [
      'null where a number belongs',
      (s) => Object.assign(s.shots[0], { targetHeight: null }),
      undefined,
      ['/shots/0/targetHeight wrong_type'],
    ],
    [
      'a number that a double cannot hold',
      keep,
      literal('slopeDistance', '1e400'),
      ['/shots/0/slopeDistance number_out_of_range'],
    ],
    [
      'a number that would become zero',
      keep,
      literal('slopeDistance', '1e-400'),
      ['/shots/0/slopeDistance number_out_of_range'],
    ],
    ['a negative zero', keep, literal('targetHeight', '-0'), ['/shots/0/targetHeight negative_zero']],
    [
      'a negative zero with a fraction',
      keep,
      literal('targetHeight', '-0.000'),
      ['/shots/0/targetHeight negative_zero'],
    ],
    [
      'an integer beyond 2^53',
      keep,
      literal('targetHeight', '9007199254740993'),
      ['/shots/0/targetHeight integer_too_large'],
    ],
    [
      'a key that stands twice',
      keep,
      (t) => t.replace('"station":', '"station":"ST-2","station":'),
      ['/station duplicate_key'],
    ],
    [
      'a key twice in a shot, once escaped',
      keep,
      (t) => t.replace('"face":', '"\\u0066ace":"right","face":'),
      ['/shots/0/face duplicate_key'],
    ],
    [
      'a key that reaches prototypes',
      keep,
      (t) => t.replace('"station":', '"__proto__":{"a":1},"station":'),
      ['/__proto__ key_forbidden'],
    ],
    [
      'a constructor',
      keep,
      (t) => t.replace('"station":', '"constructor":{"prototype":1},"station":'),
      ['/constructor key_forbidden'],
    ],
    ['a NUL', (s) => Object.assign(s, { station: 'ST\u0000' }), undefined, ['/station text_forbidden']],
    ['half a surrogate pair', keep, literal('station', '"ST\\ud800"'), ['/station text_forbidden']],
    [
      'halves in the wrong order',
      keep,
      literal('toleranceClass', '"\\udc00\\ud800"'),
      ['/toleranceClass text_forbidden'],
    ],
    [
      'the year 0',
      (s) => Object.assign(s, { observedAt: '0000-01-01T00:00:00Z' }),
      undefined,
      ['/observedAt time_invalid'],
    ],
    [
      'the year 10000',
      (s) => Object.assign(s, { observedAt: '10000-01-01T00:00:00Z' }),
      undefined,
      ['/observedAt time_invalid'],
    ],
    [
      'a year before clocks counted',
      (s) => Object.assign(s, { observedAt: '1969-12-31T23:59:59Z' }),
      undefined,
      ['/observedAt time_invalid'],
    ],
    [
      'a time without its offset',
      (s) => Object.assign(s, { observedAt: '2031-04-12T07:41:00' }),
      undefined,
      ['/observedAt time_invalid'],
    ],
    [
      'a day that is none',
      (s) => Object.assign(s, { observedAt: '2031-02-29T07:41:00Z' }),
      undefined,
      ['/observedAt time_invalid'],
    ],
    [
      'an hour that is none',
      (s) => Object.assign(s.shots[0], { observedAt: '2031-04-12T24:00:00Z' }),
      undefined,
      ['/shots/0/observedAt time_invalid'],
    ],
    [
      'a zenith angle of 0',
      (s) => Object.assign(s.shots[0], { zenith: 0 }),
      undefined,
      ['/shots/0/zenith angle_out_of_range'],
    ],
    [
      'a zenith angle of 180°',
      (s) => Object.assign(s.shots[0], { zenith: 180 }),
      undefined,
      ['/shots/0/zenith angle_out_of_range'],
    ],
    [
      'a zenith angle of 360°',
      (s) => Object.assign(s.shots[1], { zenith: 360 }),
      undefined,
      ['/shots/1/zenith angle_out_of_range'],
    ],
    [
      'a negative horizontal reading',
      (s) => Object.assign(s.shots[0], { horizontal: -0.001 }),
      undefined,
      ['/shots/0/horizontal angle_out_of_range'],
    ],
    [
      'a horizontal reading beyond the turn',
      (s) => Object.assign(s.shots[0], { horizontal: 360.001 }),
      undefined,
      ['/shots/0/horizontal angle_out_of_range'],
    ],
    [
      'face left with a zenith angle of face right',
      (s) => Object.assign(s.shots[0], { zenith: 271 }),
      undefined,
      ['/shots/0/zenith face_mismatch'],
    ],
    [
      'face right with a zenith angle of face left',
      (s) => Object.assign(s.shots[1], { zenith: 89 }),
      undefined,
      ['/shots/1/zenith face_mismatch'],
    ],
    [
      'a face that is none',
      (s) => Object.assign(s.shots[0], { face: 'both' }),
      undefined,
      ['/shots/0/face invalid_value'],
    ],
    [
      'a distance without its prism and ppm state',
      (s) =>
        Object.assign(s.shots[0], {
          prismConstantMm: undefined,
          prismConstantAppliedMm: undefined,
          appliedPpm: undefined,
        }),
      undefined,
      [
        '/shots/0/prismConstantMm prism_state_required',
        '/shots/0/prismConstantAppliedMm prism_state_required',
        '/shots/0/appliedPpm ppm_state_required',
      ],
    ],
    [
      'a reflectorless distance with a prism constant',
      (s) => Object.assign(s.shots[0], { distanceMode: 'reflectorless', prismConstantMm: -30 }),
      undefined,
      ['/shots/0/prismConstantMm prism_state_conflict'],
    ],
    [
      'a height of target that is missing',
      (s) => Object.assign(s.shots[0], { targetHeight: undefined }),
      undefined,
      ['/shots/0/targetHeight target_height_required'],
    ],
    [
      'a target that is no control point',
      (s) => Object.assign(s.shots[0], { target: 'HT-99' }),
      undefined,
      ['/shots/0/target target_unknown'],
    ],
    [
      'a target without a name',
      (s) => Object.assign(s.shots[0], { target: null }),
      undefined,
      ['/shots/0/target target_required'],
    ],
    [
      'two shots with one client id',
      (s) => Object.assign(s.shots[1], { clientId: s.shots[0].clientId }),
      undefined,
      ['/shots/1/clientId target_repeated'],
    ],
    [
      'a client id without a character',
      (s) => Object.assign(s.shots[0], { clientId: '' }),
      undefined,
      ['/shots/0/clientId invalid_value'],
    ],
    [
      'a client id with a line end',
      (s) => Object.assign(s.shots[0], { clientId: 'a\nb' }),
      undefined,
      ['/shots/0/clientId invalid_value'],
    ],
    [
      'a client id of 129 characters',
      (s) => Object.assign(s, { clientId: 'x'.repeat(129) }),
      undefined,
      ['/clientId invalid_value'],
    ],
    [
      'a name with a slash',
      (s) => Object.assign(s, { station: 'ST/7' }),
      undefined,
      ['/station name_invalid'],
    ],
    [
      'a name of 65 characters',
      (s) => Object.assign(s, { station: 'x'.repeat(65) }),
      undefined,
      ['/station name_invalid'],
    ],
    [
      'an instrument that is not registered',
      (s) => Object.assign(s, { instrument: 'TS-9' }),
      undefined,
      ['/instrument instrument_unknown'],
    ],
    [
      'a tolerance class that is none',
      (s) => Object.assign(s, { toleranceClass: 'gold' }),
      undefined,
      ['/toleranceClass tolerance_class_unknown'],
    ],
    [
      'an occupied mark in a resection',
      (s) => Object.assign(s, { stationPoint: 'HT-5' }),
      undefined,
      ['/stationPoint mutually_exclusive'],
    ],
    [
      'another σ in the second face of an erection',
      (s) => Object.assign(s.shots[1], { targetCentringSigmaMm: 3, targetHeightSigmaMm: 5 }),
      undefined,
      ['/shots/1/targetCentringSigmaMm sigma_conflict', '/shots/1/targetHeightSigmaMm sigma_conflict'],
    ],
    [
      'a method that is none',
      (s) => Object.assign(s, { method: 'guess' }),
      undefined,
      ['/method invalid_value'],
    ],
    ['no shots', (s) => Object.assign(s, { shots: [] }), undefined, ['/shots invalid_value']],
    ['shots that are no list', (s) => Object.assign(s, { shots: {} }), undefined, ['/shots wrong_type']],
    ['a shot that is none', (s) => s.shots.splice(2, 1, null as never), undefined, ['/shots/2 wrong_type']],
    ['shots to one mark only', (s) => s.shots.splice(2), undefined, ['/shots setup_not_computable']],
    [
      'a temperature of no site',
      (s) => Object.assign(s, { atmosphere: { temperature: -79, pressure: 29.5 } }),
      undefined,
      ['/atmosphere/temperature invalid_value'],
    ],
    [
      'half an atmosphere',
      (s) => Object.assign(s, { atmosphere: { pressure: 29.5 } }),
      undefined,
      ['/atmosphere/temperature required'],
    ],
    // 410 ft up the standard atmosphere stands at 998 hPa (ISO 2533); 31 inHg are 1050 hPa.
    [
      'a pressure that contradicts the elevation',
      (s) => Object.assign(s, { atmosphere: { temperature: 59, pressure: 31 } }),
      undefined,
      ['/atmosphere/pressure pressure_contradicts_elevation'],
    ],
  ];
  it.each(cases)(
    'is refused with pointer and fix, its neighbour accepted and the bytes kept: %s',
    async (_, spoil, rewrite, expected) => {
      const refused = await spoilt(spoil, rewrite);
      const found = places(refused);
      for (const place of expected) expect(found).toContain(`/setups/1${place}`);
      // Whatever else is said of it is said of the same places.
      const pointers = expected.map((place) => `/setups/1${place.split(' ')[0]}`);
      for (const { pointer } of refused) expect(pointers.some((p) => pointer.startsWith(p))).toBe(true);
      for (const { detail, fix } of refused)
        expect([detail, fix].every((text) => /[.…]$/.test(text))).toBe(true);
    },
  );

  it('knows the pressure of a high site by its stated elevation', async () => {
    await site.admin.patch(site.at(''), { siteElevation: 5280 }).expect(200);
    const air = (pressure: number) => (s: Setup) =>
      Object.assign(s, { atmosphere: { temperature: 59, pressure } });
    // 1609 m up the standard atmosphere stands at 834 hPa, 24.6 inHg; 29.92 inHg were reduced to sea level.
    const [refused] = await spoilt(air(29.92));
    expect(refused.code).toBe('pressure_contradicts_elevation');
    const sent = document('high', {
      setups: [resection('high', { atmosphere: { temperature: 59, pressure: 24.6 } })],
    });
    await site.upload(sent).expect(201);
    await site.admin.patch(site.at(''), { siteElevation: null }).expect(200);
  });

  it('of each of three hundred items is found, not of the first two hundred alone', async () => {
    const bench = (i: number) =>
      `{"clientId":"many-${i}","machine":"DZ-3","benchmark":"BM-1","edge":"left","elevations":[411],"tolerance":1,` +
      `"observedAt":"2026-01-01T00:00:00Z","correctionAppliedFor":"\\u0000"}`;
    const items = Array.from({ length: 300 }, (_, i) => bench(i)).join(',');
    const good = bench(999).replace('\\u0000', 'x');
    const answer = await post(`{"clientId":"many","units":{"length":"ft"},"benchChecks":[${items},${good}]}`);
    expect(answer.status).toBe(201);
    const { upload, refused } = answer.body as never as {
      upload: { counts: object };
      refused: { code: string }[];
    };
    expect(upload.counts).toEqual({ accepted: 1, refused: 300 });
    expect(new Set(refused.map(({ code }) => code))).toEqual(new Set(['text_forbidden']));
  });

  const documents: [string, (text: string) => string, string, string[]][] = [
    [
      'an unknown field beside the items',
      (t) => t.replace('{', '{"colour":"red",'),
      'invalid',
      ['/colour unknown_field'],
    ],
    [
      'units that are missing',
      (t) => t.replace(/"units":\{[^}]*\},/, ''),
      'invalid',
      ['/units units_required'],
    ],
    [
      'an unknown unit',
      (t) => t.replace('"length":"ft"', '"length":"yd"'),
      'invalid',
      ['/units/length invalid_value'],
    ],
    [
      'units that stand twice',
      (t) => t.replace('{', '{"units":{"length":"m"},'),
      'invalid',
      ['/units duplicate_key'],
    ],
    [
      'a client id that is missing',
      (t) => t.replace(/"clientId":"[^"]*",/, ''),
      'invalid',
      ['/clientId required'],
    ],
    [
      'items that are no list',
      (t) => t.replace('"setups":[', '"gradeShots":{},"setups":['),
      'invalid',
      ['/gradeShots wrong_type'],
    ],
    ['a literal NaN', (t) => t.replace(/"targetHeight":0/, '"targetHeight":NaN'), 'body_unreadable', []],
    [
      'a hexadecimal number',
      (t) => t.replace(/"targetHeight":0/, '"targetHeight":0x1F'),
      'body_unreadable',
      [],
    ],
    ['a leading zero', (t) => t.replace(/"targetHeight":0/, '"targetHeight":00'), 'body_unreadable', []],
    ['a comma too many', (t) => `${t.slice(0, -1)},}`, 'body_unreadable', []],
    ['a comment', (t) => `/* day 1 */${t}`, 'body_unreadable', []],
    ['two documents', (t) => t + t, 'body_unreadable', []],
    ['single quotes', (t) => t.replaceAll('"', "'"), 'body_unreadable', []],
  ];
  it.each(documents)(
    'in the document itself refuses it as a whole, and it is kept: %s',
    async (_, rewrite, code, expected) => {
      const text = rewrite(JSON.stringify(document(`d-${++count}`, { setups: [resection(`d-${count}`)] })));
      const problem = expectProblem((await post(text)) as never, code as 'invalid');
      if (expected.length > 0) expect(places(problem.errors)).toEqual(expected);
      const { body } = await site.admin.get(site.at('/uploads?status=refused&limit=1'));
      expect((await raw(body.data[0].id)).bytes.toString()).toBe(text);
    },
  );

  it('lists a hundred unknown fields of one object at the most', async () => {
    const keys = Array.from({ length: 5000 }, (_, i) => `"k${i}":0`).join(',');
    const { errors } = expectProblem((await post(`{"clientId":"x",${keys}}`)) as never, 'invalid');
    expect(errors?.filter(({ code }) => code === 'unknown_field')).toHaveLength(100);
  });

  it('takes what only looks odd', async () => {
    const setup = resection('odd', { observedAt: '2016-12-31t23:59:60.123456789z', station: 'Ü 1.2_3-4' });
    setup.shots[0].horizontal = 360;
    setup.shots.push({ ...setup.shots[1], clientId: '🙂', purpose: 'check', target: 'HT-5' });
    const { body } = await site.upload(document('odd ü', { setups: [setup] })).expect(201);
    // A leap second is the first of the next minute; PostgreSQL keeps microseconds.
    expect(body.setups[0].observedAt).toBe('2017-01-01T00:00:00.123457Z');
    expect(body.setups[0].station).toBe('Ü 1.2_3-4');
  });
});
