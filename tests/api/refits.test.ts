import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from './fixtures/problems';
import {
  document,
  newSiteOrganization,
  resection,
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
