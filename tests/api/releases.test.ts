import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  newLayer,
  newSiteOrganization,
  resection,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

const minutesBetween = (from: string, to: string) => (Date.parse(to) - Date.parse(from)) / 60_000;

describe('releases', () => {
  let site: SiteOrganization;
  let design: Awaited<ReturnType<typeof newLayer>>;
  beforeAll(async () => {
    site = await newSiteOrganization();
    design = await newLayer(site.admin, site.at);
  });

  async function newSetup(clientId: string, fields: object = {}) {
    const { body } = await site.upload(document(clientId, { setups: [resection(clientId, { ...fields })] }));
    return body.setups[0];
  }
  const holding = (clientId: string) => newSetup(clientId, { toleranceClass: 'fine grade' });
  const failing = (clientId: string) =>
    newSetup(clientId, { shots: [...resection('').shots, ...shotsTo('HT-5', { moved: { northing: 1 } })] });
  const release = (id: string, body: object = {}, caller = site.admin) =>
    caller.post(site.at(`/setups/${id}/release`), body);

  it('put a pass in force, by its submitter, for the project’s shift', async () => {
    const setup = await newSetup('pass');
    const { body } = await release(setup.id).expect(200);
    expect(body.status).toBe('released');
    expect(body.release).toMatchObject({ machine: null, layer: null, offset: null, note: null });
    expect(minutesBetween(body.release.releasedAt, body.release.validUntil)).toBe(720);
    expect((await site.admin.get(site.at(`/setups/${setup.id}`))).body).toEqual(body);
  });

  it('bind a machine to layer, surface and offset', async () => {
    const setup = await newSetup('bound');
    const order = { machine: 'DZ-3', layer: 'subgrade', offset: -0.5, validMinutes: 60, note: 'North half.' };
    const { body } = await release(setup.id, order).expect(200);
    expect(body.release).toMatchObject({
      machine: 'DZ-3',
      layer: 'subgrade',
      layerVersion: 1,
      surfaceSha256: design.surface.sha256,
      offset: -0.5,
      note: 'North half.',
    });
    expect(minutesBetween(body.release.releasedAt, body.release.validUntil)).toBe(60);
    expect(body.cautions.length).toBeGreaterThan(0);
  });

  it('refuse what does not fit the layer', async () => {
    const { id } = await newSetup('unbound');
    const bound = { machine: 'DZ-3', layer: 'subgrade', offset: -0.5 };
    const refusals: [object, string][] = [
      [{ machine: 'DZ-3' }, '/layer release_incomplete'],
      [{ offset: -0.5 }, '/offset release_incomplete'],
      [{ surfaceSha256: design.surface.sha256 }, '/surfaceSha256 release_incomplete'],
      [{ ...bound, layer: 'base' }, '/layer layer_unknown'],
      [{ ...bound, offset: 0.5 }, '/offset offset_mismatch'],
      [{ ...bound, offset: -0.51 }, '/offset offset_mismatch'],
      [{ ...bound, surfaceSha256: 'ab'.repeat(32) }, '/surfaceSha256 surface_mismatch'],
      [{ ...bound, validMinutes: 4 }, '/validMinutes invalid_value'],
    ];
    for (const [body, place] of refusals) expectProblem(await release(id, body), 'invalid', [place]);
    expect((await site.admin.get(site.at(`/setups/${id}`))).body.status).toBe('computed');
    await release(id, { ...bound, surfaceSha256: design.surface.sha256 }).expect(200);
    // Without an offset the layer's own stands.
    const { body } = await release(id, { machine: 'DZ-4', layer: 'subgrade' }).expect(200);
    expect(body.release.offset).toBe(-0.5);
  });

  it('need a note and another person for a hold', async () => {
    const setup = await holding('hold');
    expect(setup.verdict).toBe('hold');
    const surveyor = site.as(site.people.surveyor.key);
    expectProblem(await release(setup.id, {}, surveyor), 'invalid', ['/note note_required']);
    expectProblem(await release(setup.id, { note: 'Seen.' }), 'second_person_wanted');
    // Another key of the same person is not another person.
    const own = site.as(await site.newKey());
    expectProblem(await release(setup.id, { note: 'Seen.' }, own), 'second_person_wanted');
    const { body } = await release(setup.id, { note: 'Seen.' }, surveyor).expect(200);
    expect(body).toMatchObject({ status: 'released', verdict: 'hold', release: { note: 'Seen.' } });
  });

  it('never take a fail', async () => {
    const setup = await failing('fail');
    expect(setup.verdict).toBe('fail');
    const surveyor = site.as(site.people.surveyor.key);
    for (const caller of [site.admin, surveyor])
      expectProblem(await release(setup.id, { note: 'Anyway.' }, caller), 'setup_not_releasable');
  });

  it('may have been given on site before the hub was told, between the observation and now', async () => {
    const setup = await newSetup('earlier');
    const at = minutesAgo(100);
    const { body } = await release(setup.id, { releasedAt: at, validMinutes: 600 }).expect(200);
    expect(Date.parse(body.release.releasedAt)).toBe(Date.parse(at));
    expect(minutesBetween(at, body.release.validUntil)).toBe(600);
    for (const wrong of [minutesAgo(121), minutesAgo(-5)])
      expectProblem(await release(setup.id, { releasedAt: wrong }), 'invalid', [
        '/releasedAt time_out_of_order',
      ]);
    for (const wrong of ['yesterday', '2031-04-12T07:41:00', '2031-02-30T07:41:00Z', ''])
      expectProblem(await release(setup.id, { releasedAt: wrong }), 'invalid', ['/releasedAt time_invalid']);
  });

  it('run out by the clock alone, and are told apart by ?status=', async () => {
    const expired = await newSetup('expired');
    const { body } = await release(expired.id, { releasedAt: minutesAgo(100), validMinutes: 60 }).expect(200);
    expect(body.status).toBe('expired');
    expect(body.radio).toMatch(/^Stop\. /);
    const standing = await newSetup('standing');
    await release(standing.id).expect(200);
    const computed = await newSetup('only-computed');
    const listed = async (status: string) => {
      const { body } = await site.admin.get(site.at(`/setups?limit=200&status=${status}`)).expect(200);
      for (const setup of body.data) expect(setup.status).toBe(status);
      return body.data.map((s: { id: string }) => s.id);
    };
    expect(await listed('expired')).toEqual([expired.id]);
    expect(await listed('released')).toContain(standing.id);
    expect(await listed('released')).not.toContain(expired.id);
    expect(await listed('computed')).toContain(computed.id);
    expect(await listed('superseded')).toEqual([]);
    // An expired setup may be released again.
    expect((await release(expired.id).expect(200)).body.status).toBe('released');
  });

  it('are listed by verdict and station too', async () => {
    const far = await newSetup('far', { station: 'ST-88' });
    const { body } = await site.admin.get(site.at('/setups?station=ST-88')).expect(200);
    expect(body.data.map((s: { id: string }) => s.id)).toEqual([far.id]);
    const fails = await site.admin.get(site.at('/setups?verdict=fail&limit=200')).expect(200);
    expect(fails.body.data.length).toBeGreaterThan(0);
    for (const setup of fails.body.data) expect(setup.verdict).toBe('fail');
  });

  it('show the latest of several', async () => {
    const { id } = await newSetup('twice');
    await release(id, { machine: 'DZ-3', layer: 'subgrade', offset: -0.5 }).expect(200);
    const { body } = await release(id, { machine: 'EX-1', layer: 'subgrade', offset: -0.5 }).expect(200);
    expect(body.release.machine).toBe('EX-1');
  });
});

describe('withdrawals', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await newLayer(site.admin, site.at);
  });

  async function released(clientId: string, ...machines: string[]) {
    const { body } = await site.upload(document(clientId, { setups: [resection(clientId)] }));
    const { id } = body.setups[0];
    for (const machine of machines) {
      const order = { machine, layer: 'subgrade', offset: -0.5 };
      await site.admin.post(site.at(`/setups/${id}/release`), order).expect(200);
    }
    return id as string;
  }
  const withdraw = (id: string, body: object = { note: 'The tripod was bumped.' }) =>
    site.admin.post(site.at(`/setups/${id}/withdraw`), body);

  it('open an acknowledgement for each machine, and say that they stop none', async () => {
    const id = await released('two', 'EX-1', 'DZ-3', 'DZ-3');
    const { body } = await withdraw(id).expect(200);
    expect(body.setup).toMatchObject({ id, status: 'withdrawn' });
    expect(body.setup.radio).toMatch(/^Stop\. /);
    expect(body.caution).toMatch(/stops no machine.*[Rr]adio/);
    expect(body.acknowledgements.map((a: { machine: string }) => a.machine)).toEqual(['DZ-3', 'EX-1']);
    for (const a of body.acknowledgements)
      expect(a).toMatchObject({ setupId: id, station: 'ST-1', acknowledgedAt: null, acknowledgedBy: null });
    expect(body.acknowledgements[0].text).toContain('The tripod was bumped.');
    const { body: open } = await site.admin.get(site.at('/acknowledgements?open=true')).expect(200);
    expect(open.data).toEqual(expect.arrayContaining(body.acknowledgements));
  });

  it('are answered once, by a foreman', async () => {
    const id = await released('answered', 'DZ-9');
    const [{ id: acknowledgementId }] = (await withdraw(id)).body.acknowledgements;
    const foreman = site.as(site.people.foreman.key);
    const path = site.at(`/acknowledgements/${acknowledgementId}/acknowledge`);
    const { body } = await foreman.post(path, { note: 'Parked at 10:42.' }).expect(200);
    expect(body).toMatchObject({ machine: 'DZ-9', note: 'Parked at 10:42.' });
    expect(body.acknowledgedAt).not.toBeNull();
    expectProblem(await foreman.post(path, {}), 'already_answered');
    const listed = async (open: boolean) =>
      (await foreman.get(site.at(`/acknowledgements?open=${open}`))).body.data.map(
        (a: { id: string }) => a.id,
      );
    expect(await listed(true)).not.toContain(acknowledgementId);
    expect(await listed(false)).toContain(acknowledgementId);
    const inspector = site.as(site.people.inspector.key);
    expectProblem(await inspector.post(path, {}), 'forbidden');
  });

  it('are refused where nothing was released, or twice', async () => {
    const id = await released('idle');
    expectProblem(await withdraw(id), 'setup_not_in_force');
    const once = await released('once', 'DZ-1');
    await withdraw(once).expect(200);
    expectProblem(await withdraw(once), 'setup_not_in_force');
  });

  it('need no words', async () => {
    const id = await released('silent', 'DZ-1');
    const { body } = await site.admin.post(site.at(`/setups/${id}/withdraw`)).expect(200);
    expect(body.acknowledgements[0].text).toBe('DZ-1: stop. ST-1 is withdrawn.');
  });

  it('end a setup for good: it is not released again', async () => {
    const id = await released('gone', 'DZ-1');
    await withdraw(id).expect(200);
    expectProblem(await site.admin.post(site.at(`/setups/${id}/release`), {}), 'setup_not_releasable');
    expect((await site.admin.get(site.at('/setups?status=withdrawn'))).body.data[0].id).toBe(id);
  });

  it('reach a setup that was refitted while a machine works from it', async () => {
    const id = await released('refitted', 'DZ-2');
    const refit = { exclude: ['orient-HT-1/left'], reason: 'Sun in the glass.' };
    await site.admin.post(site.at(`/setups/${id}/refits`), refit).expect(201);
    const { body } = await withdraw(id).expect(200);
    expect(body.setup.status).toBe('superseded');
    expect(body.acknowledgements.map((a: { machine: string }) => a.machine)).toEqual(['DZ-2']);
  });
});
