import { createHash } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem, places } from './fixtures/problems';
import {
  document,
  newLayer,
  newSite,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  STAND,
  shotsTo,
} from './fixtures/site';

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

const position = { easting: 5010, northing: 8010, elevation: 399.5 };
const grade = (clientId: string, changes: object = {}) => ({
  clientId,
  layer: 'subgrade',
  position,
  observedAt: minutesAgo(30),
  ...changes,
});
const bench = (clientId: string) => ({
  clientId,
  machine: 'DZ-3',
  benchmark: 'BM-1',
  edge: 'left',
  elevations: [411.2, 411.22],
  tolerance: 0.05,
  observedAt: minutesAgo(20),
});

describe('uploads', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await newLayer(site.admin, site.at);
  });

  it('answer a receipt with the setup that was computed', async () => {
    const sent = document('first', { setups: [resection('first-1')] });
    const { body } = await site.upload(sent).expect(201);
    expect(body.upload).toMatchObject({
      clientId: 'first',
      status: 'processed',
      sha256: sha256(JSON.stringify(sent)),
      size: Buffer.byteLength(JSON.stringify(sent)),
      mediaType: 'application/json',
      contentEncoding: null,
      counts: { accepted: 1, refused: 0 },
    });
    expect(body.refused).toEqual([]);
    const [setup] = body.setups;
    expect(setup).toMatchObject({ clientId: 'first-1', status: 'computed', verdict: 'pass' });
    // The shots were made without error from this stand.
    expect(setup.position.easting).toBeCloseTo(STAND.easting, 5);
    expect(setup.position.northing).toBeCloseTo(STAND.northing, 5);
    expect(setup.position.elevation).toBeCloseTo(STAND.elevation, 5);
    expect(setup.orientation).toBeCloseTo(STAND.orientation, 6);
    expect(setup.provenance.uploadId).toBe(body.upload.id);
    expect(setup.provenance.control).toContainEqual({ name: 'HT-3', version: 1 });
  });

  it('are listed and read again as they were answered', async () => {
    const { body } = await site.upload(document('again-1', { setups: [resection('again-1')] })).expect(201);
    const list = await site.admin.get(site.at('/uploads')).expect(200);
    expect(list.body.data[0]).toEqual(body.upload);
    const read = await site.admin.get(site.at(`/uploads/${body.upload.id}`)).expect(200);
    expect(read.body).toEqual(body);
  });

  it('answer the first receipt to the same document, word for word', async () => {
    const shots = [...resection('').shots, ...shotsTo('HT-5', { purpose: 'check' })];
    const check = (clientId: string, mark: 'HT-5' | 'BM-1', minutes: number) => ({
      clientId,
      setup: 'same-1',
      purpose: 'check',
      observedAt: minutesAgo(minutes),
      shots: shotsTo(mark, { clientId }),
    });
    const sent = document('same', {
      setups: [resection('same-1', { shots }), resection('same-2', { instrument: 'TS-9' })],
      // Sent in another order than observed.
      setupChecks: [check('same-c1', 'BM-1', 40), check('same-c2', 'HT-5', 50)],
      gradeShots: [grade('same-g1'), grade('same-g2', { layer: 'nowhere' })],
      benchChecks: [bench('same-b1')],
    });
    const first = await site.upload(sent).expect(201);
    expect(first.body.upload.counts).toEqual({ accepted: 5, refused: 2 });
    const again = await site.upload(sent).expect(200);
    expect(again.body).toEqual(first.body);
    const setups = await site.admin.get(site.at('/setups?limit=200'));
    expect(setups.body.data.filter((s: { clientId: string }) => s.clientId === 'same-1')).toHaveLength(1);
  });

  it('keep their first receipt whatever becomes of the setups later', async () => {
    const sent = document('kept', { setups: [resection('kept-1')] });
    const first = await site.upload(sent).expect(201);
    const [{ id }] = first.body.setups;
    await site.admin.post(site.at(`/setups/${id}/release`), {}).expect(200);
    const later = { clientId: 'kept-c', setup: 'kept-1', purpose: 'check', shots: shotsTo('HT-5') };
    await site.upload(document('kept-later', { setupChecks: [later] })).expect(201);
    await site.admin.post(site.at(`/setups/${id}/refits`), { exclude: ['orient-HT-1/left'], reason: 'sun' });
    expect((await site.admin.get(site.at(`/setups/${id}`))).body.status).toBe('superseded');
    expect((await site.upload(sent).expect(200)).body).toEqual(first.body);
  });

  it('are refused with 409 where the client id was used with other content, and the bytes are kept', async () => {
    await site.upload(document('conflict', { setups: [resection('conflict-1')] })).expect(201);
    const other = await site.upload(document('conflict', { setups: [resection('conflict-2')] }));
    expectProblem(other, 'upload_conflict');
    const [kept] = (await site.admin.get(site.at('/uploads'))).body.data;
    expect(kept).toMatchObject({ clientId: 'conflict', status: 'refused', counts: { accepted: 0 } });
  });

  it('accept the good setup beside the bad one, which is refused whole with every pointer', async () => {
    const bad = resection('partial-bad');
    bad.shots[1].zenith = 89;
    bad.shots[3].target = 'HT-99';
    const { zenith: _z, horizontal: _h, slopeDistance: _s, ...blind } = bad.shots[5];
    bad.shots[5] = blind as (typeof bad.shots)[number];
    Object.assign(bad, { colour: 'red' });
    const { body } = await site.upload(document('partial', { setups: [resection('partial-good'), bad] }));
    expect(body.upload.counts).toEqual({ accepted: 1, refused: 1 });
    expect(body.setups.map((s: { clientId: string }) => s.clientId)).toEqual(['partial-good']);
    expect(places(body.refused).sort()).toEqual([
      '/setups/1/colour unknown_field',
      '/setups/1/shots/5/horizontal reading_required',
    ]);
    // What only the control and the circle can tell is told once the shape is right.
    const { colour: _c, ...shaped } = bad as typeof bad & { colour: string };
    shaped.shots = shaped.shots.filter((_, i) => i !== 5);
    const second = await site.upload(document('partial-2', { setups: [resection('partial-3'), shaped] }));
    expect(places(second.body.refused).sort()).toEqual([
      '/setups/1/shots/1/zenith face_mismatch',
      '/setups/1/shots/3/target target_unknown',
    ]);
    const stored = await site.admin.get(site.at('/setups?limit=200'));
    const names = stored.body.data.map((s: { clientId: string }) => s.clientId);
    expect(names).not.toContain('partial-bad');
  });

  it('let a refused item be sent again under its own client id', async () => {
    const wrong = resection('mended', { instrument: 'TS-9' });
    const first = await site
      .upload(document('mend-1', { setups: [resection('mend-good'), wrong] }))
      .expect(201);
    expect(places(first.body.refused)).toEqual(['/setups/1/instrument instrument_unknown']);
    const second = await site.upload(document('mend-2', { setups: [resection('mended')] })).expect(201);
    expect(second.body.setups[0].clientId).toBe('mended');
    const read = await site.admin.get(site.at(`/uploads/${first.body.upload.id}`));
    expect(read.body.refused).toEqual(first.body.refused);
  });

  it('take a client id once per project and kind', async () => {
    const items = () => ({
      setups: [resection('one')],
      gradeShots: [grade('one')],
      benchChecks: [bench('one')],
    });
    const first = await site.upload(document('kinds-1', items())).expect(201);
    expect(first.body.upload.counts).toEqual({ accepted: 3, refused: 0 });
    const second = await site.upload(document('kinds-2', items()));
    expectProblem(second, 'nothing_accepted', [
      '/setups/0/clientId client_id_taken',
      '/gradeShots/0/clientId client_id_taken',
      '/benchChecks/0/clientId client_id_taken',
    ]);
    const other = await newSite(site.admin, 'Second pad');
    await site.admin
      .post(other.at('/uploads'), document('kinds-1', { setups: [resection('one')] }))
      .expect(201);
  });

  it('refuse the second of two items with one client id', async () => {
    const sent = document('twins', { setups: [resection('twin'), resection('twin')] });
    const { body } = await site.upload(sent).expect(201);
    expect(places(body.refused)).toEqual(['/setups/1/clientId client_id_taken']);
    expect(body.setups).toHaveLength(1);
  });

  it('are kept as refused where nothing in them is valid, and claim no client id', async () => {
    const sent = document('nothing', { setups: [resection('n-1', { instrument: 'TS-9' })] });
    expectProblem(await site.upload(sent), 'nothing_accepted', ['/setups/0/instrument instrument_unknown']);
    const { body } = await site.admin.get(site.at('/uploads?status=refused'));
    expect(body.data[0]).toMatchObject({
      clientId: 'nothing',
      status: 'refused',
      sha256: sha256(JSON.stringify(sent)),
      counts: { accepted: 0, refused: 1 },
    });
    const receipt = await site.admin.get(site.at(`/uploads/${body.data[0].id}`)).expect(200);
    expect(places(receipt.body.refused)).toEqual(['/setups/0/instrument instrument_unknown']);
    await site.upload(document('nothing', { setups: [resection('n-1')] })).expect(201);
  });

  it('say so where they hold no item at all', async () => {
    expectProblem(await site.upload(document('empty', {})), 'nothing_accepted', [' required']);
  });

  it('keep what is not computed yet, and accept its neighbours', async () => {
    const sent = document('later', {
      setups: [resection('later-1')],
      roverPoints: [{ clientId: 'r-1', latitude: 40, longitude: -105 }],
    });
    const { body } = await site.upload(sent).expect(201);
    expect(places(body.refused)).toEqual(['/roverPoints/0 kind_not_supported']);
    expect(body.upload.counts).toEqual({ accepted: 1, refused: 1 });
  });

  it('make one of two that arrive at the same moment, and answer both', async () => {
    const sent = document('race', { setups: [resection('race-1')] });
    const answers = await Promise.all(Array.from({ length: 6 }, () => site.upload(sent)));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 200, 200, 200, 200, 201]);
    for (const { body } of answers) expect(body).toEqual(answers[0].body);
    const { body } = await site.admin.get(site.at('/uploads?limit=200'));
    expect(body.data.filter((u: { clientId: string }) => u.clientId === 'race')).toHaveLength(1);
  });
});
