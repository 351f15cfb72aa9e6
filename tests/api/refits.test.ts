import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';
import {
  document,
  type Mark,
  newSiteOrganization,
  resection,
  type ShotOptions,
  type SiteOrganization,
  STAND,
  shotsTo,
} from './fixtures/site';

describe('refits', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  /** A setup in which HT-3 stood 0.4 ft off. */
  async function bumped(clientId: string) {
    const shots = [
      ...shotsTo('HT-1'),
      ...shotsTo('HT-2'),
      ...shotsTo('HT-4'),
      ...shotsTo('HT-5'),
      ...shotsTo('HT-3', { moved: { easting: 0.4 } }),
    ];
    const { body } = await site.upload(document(clientId, { setups: [resection(clientId, { shots })] }));
    return body.setups[0];
  }
  const refit = (id: string, body: object) => site.admin.post(site.at(`/setups/${id}/refits`), body);
  const HT3 = ['orient-HT-3/left', 'orient-HT-3/right'];
  const reason = 'HT-3 was hit by the water truck.';

  it('make a new setup without the shots that are left out, and supersede the old one', async () => {
    const before = await bumped('st-7');
    expect(before.verdict).toBe('fail');
    const { body: after } = await refit(before.id, { exclude: HT3, reason }).expect(201);
    expect(after).toMatchObject({
      clientId: 'st-7.r1',
      status: 'computed',
      verdict: 'pass',
      supersedes: before.id,
      supersededBy: null,
      excluded: HT3.map((shot) => ({ shot, reason })),
    });
    expect(after.position.easting).toBeCloseTo(STAND.easting, 5);
    expect(after.position.northing).toBeCloseTo(STAND.northing, 5);
    expect(after.provenance).toMatchObject({ uploadId: before.provenance.uploadId, resultVersion: 1 });
    const old = (await site.admin.get(site.at(`/setups/${before.id}`))).body;
    expect(old).toMatchObject({ status: 'superseded', supersededBy: after.id, verdict: 'fail' });
    expect(old.radio).toMatch(/^Stop\. /);
    expect((await site.admin.get(site.at(`/setups/${after.id}`))).body).toEqual(after);
  });

  it('keep what an earlier refit left out, and count on', async () => {
    const before = await bumped('st-8');
    const first = await refit(before.id, { exclude: [HT3[0]], reason }).expect(201);
    const second = await refit(first.body.id, { exclude: [HT3[1]], reason: 'Both faces.' }).expect(201);
    expect(second.body).toMatchObject({ clientId: 'st-8.r2', supersedes: first.body.id });
    expect(second.body.excluded).toEqual([
      { shot: HT3[0], reason },
      { shot: HT3[1], reason: 'Both faces.' },
    ]);
  });

  it('leave names that a client took already', async () => {
    const before = await bumped('st-9');
    await bumped('st-9.r1');
    await bumped('st-9.r7');
    const { body } = await refit(before.id, { exclude: HT3, reason }).expect(201);
    expect(body.clientId).toBe('st-9.r8');
  });

  it('refuse a setup that is superseded: it is neither refitted nor released again', async () => {
    const before = await bumped('st-10');
    await refit(before.id, { exclude: HT3, reason }).expect(201);
    expectProblem(await refit(before.id, { exclude: HT3, reason }), 'conflict');
    const release = await site.admin.post(site.at(`/setups/${before.id}/release`), {});
    expectProblem(release, 'setup_not_releasable');
  });

  it('name the shots that the setup does not have', async () => {
    const { id } = await bumped('st-11');
    const answer = await refit(id, { exclude: [HT3[0], 'orient-HT-3', 'x'], reason });
    expectProblem(answer, 'invalid', ['/exclude/1 shot_unknown', '/exclude/2 shot_unknown']);
  });

  it('refuse to leave too little, and change nothing', async () => {
    const { id, targets } = await bumped('st-12');
    const all = targets.flatMap((t: { target: string }) => [
      `orient-${t.target}/left`,
      `orient-${t.target}/right`,
    ]);
    expectProblem(await refit(id, { exclude: all, reason }), 'invalid', ['/exclude setup_not_computable']);
    expect((await site.admin.get(site.at(`/setups/${id}`))).body.status).toBe('computed');
  });

  it('need a reason', async () => {
    const { id } = await bumped('st-13');
    expectProblem(await refit(id, { exclude: HT3 }), 'invalid', ['/reason required']);
    expectProblem(await refit(id, { exclude: HT3, reason: '' }), 'invalid', ['/reason invalid_value']);
    expectProblem(await refit(id, { exclude: [], reason }), 'invalid', ['/exclude invalid_value']);
  });

  it('use control as it is now', async () => {
    const { id } = await bumped('st-14');
    const quarantine = { status: 'quarantined', note: 'Stake leans.' };
    await site.admin.patch(site.at('/control-points/HT-4'), quarantine).expect(200);
    const { body } = await refit(id, { exclude: HT3, reason }).expect(201);
    const target = body.targets.find((t: { target: string }) => t.target === 'HT-4');
    expect(target).toMatchObject({ used: false, status: 'quarantined', observations: [] });
    await site.admin.patch(site.at('/control-points/HT-4'), { status: 'trusted', note: 'Reset.' });
  });

  const closing = (clientId: string, setup: string, mark: Mark, options: ShotOptions = {}, minutes = 60) => ({
    clientId,
    setup,
    purpose: 'closing',
    observedAt: minutesAgo(minutes),
    shots: shotsTo(mark, { clientId, ...options }),
  });
  const check = (clientId: string, ...setupChecks: object[]) =>
    site.upload(document(clientId, { setupChecks })).expect(201);
  const LEFT = { exclude: ['orient-HT-1/left'], reason: 'Sun in the glass.' };

  it('do not talk away a later check that failed the setup', async () => {
    const { body: made } = await site.upload(document('st-20', { setups: [resection('st-20')] })).expect(201);
    const [{ id }] = made.setups;
    const sent = closing('c-20', 'st-20', 'HT-5', { moved: { northing: 0.5 } });
    const { body: receipt } = await check('st-20-c', sent);
    const { body: first } = await refit(id, LEFT).expect(201);
    expect(first).toMatchObject({ verdict: 'fail', verdicts: { horizontal: 'fail', vertical: 'pass' } });
    expect(first.checks).toHaveLength(1);
    expect(first.checks[0]).toMatchObject({
      clientId: 'c-20',
      setupId: first.id,
      carriedFrom: receipt.setupChecks[0].id,
      observedAt: receipt.setupChecks[0].observedAt,
      purpose: 'closing',
      agreed: false,
      setupVerdict: 'fail',
    });
    expect(first.checks[0].targets[0]).toMatchObject({ target: 'HT-5', horizontal: 'over' });
    expect((await site.admin.get(site.at(`/setups/${first.id}`))).body).toEqual(first);
    expectProblem(await site.admin.post(site.at(`/setups/${first.id}/release`), {}), 'setup_not_releasable');
    // What the check's own upload was answered stays as it was.
    const again = await site.upload(document('st-20-c', { setupChecks: [sent] })).expect(200);
    expect(again.body).toEqual(receipt);

    // A newer check of the mark answers it, and the next refit carries both from where they came in.
    const { body: newer } = await check('st-20-d', closing('d-20', first.clientId, 'HT-5', {}, 50));
    expect(newer.setupChecks[0].setupVerdict).toBe('pass');
    const { body: second } = await refit(first.id, { ...LEFT, exclude: ['orient-HT-2/left'] }).expect(201);
    expect(second.verdict).toBe('pass');
    expect(
      second.checks.map((c: { clientId: string; carriedFrom: string }) => [c.clientId, c.carriedFrom]),
    ).toEqual([
      ['c-20', receipt.setupChecks[0].id],
      ['d-20', newer.setupChecks[0].id],
    ]);
    const taken = await site.upload(document('st-20-e', { setupChecks: [closing('c-20', 'st-20', 'BM-1')] }));
    expectProblem(taken, 'nothing_accepted', ['/setupChecks/0/clientId client_id_taken']);
  });

  it('judge later checks against the new fit', async () => {
    const before = await bumped('st-21');
    const { body } = await check('st-21-c', closing('c-21', 'st-21', 'BM-1'));
    expect(body.setupChecks[0].agreed).toBe(false);
    const { body: after } = await refit(before.id, { exclude: HT3, reason }).expect(201);
    expect(after.verdict).toBe('pass');
    expect(after.checks[0]).toMatchObject({ clientId: 'c-21', agreed: true, setupVerdict: 'pass' });
  });

  it('leave out no shot of a later check, and name the check', async () => {
    const before = await bumped('st-22');
    await check('st-22-c', closing('c-22', 'st-22', 'BM-1'));
    const answer = await refit(before.id, { exclude: ['c-22/left'], reason });
    const { errors } = expectProblem(answer, 'invalid', ['/exclude/0 shot_unknown']);
    expect(errors?.[0].detail).toContain('the check c-22');
  });

  it('carry no check whose marks are quarantined by now, and say so', async () => {
    const before = await bumped('st-23');
    await check('st-23-c', closing('c-23', 'st-23', 'BM-1', { moved: { elevation: 1 } }));
    await site.admin
      .patch(site.at('/control-points/BM-1'), { status: 'quarantined', note: 'Hit.' })
      .expect(200);
    const { body } = await refit(before.id, { exclude: HT3, reason }).expect(201);
    await site.admin
      .patch(site.at('/control-points/BM-1'), { status: 'trusted', note: 'Set anew.' })
      .expect(200);
    expect(body).toMatchObject({ verdict: 'pass', checks: [] });
    expect(body.notes).toContainEqual(
      expect.objectContaining({ code: 'mark_quarantined', text: expect.stringContaining('BM-1') }),
    );
  });

  it('make one setup of two refits at the same moment', async () => {
    const { id } = await bumped('st-15');
    const answers = await Promise.all([1, 2, 3].map(() => refit(id, { exclude: HT3, reason })));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
  });

  it('stand in the history of the mark that was left out', async () => {
    const before = await bumped('st-16');
    const { body: after } = await refit(before.id, { exclude: HT3, reason });
    const { body } = await site.admin.get(site.at('/control-points/HT-3/history')).expect(200);
    const setups = body.residuals.map((r: { setupId: string }) => r.setupId);
    expect(setups).toContain(before.id);
    expect(setups).not.toContain(after.id);
  });
});
