import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { expectProblem, places } from './fixtures/problems';
import {
  document,
  type Mark,
  newSite,
  newSiteOrganization,
  resection,
  type ShotOptions,
  type SiteOrganization,
  shotsTo,
} from './fixtures/site';

const codes = (items: readonly { code: string }[]) => items.map(({ code }) => code);

describe('check shots', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  /** A setup of fine grade, which asks for an independent check. */
  async function newSetup(name: string, further: ReturnType<typeof shotsTo> = []) {
    const shots = [...resection(name).shots, ...further];
    const sent = document(name, { setups: [resection(name, { toleranceClass: 'fine grade', shots })] });
    const { body } = await site.upload(sent).expect(201);
    return body.setups[0];
  }

  const check = (
    clientId: string,
    setup: string,
    mark: Mark,
    options: ShotOptions = {},
    fields: object = {},
  ) => ({
    clientId,
    setup,
    purpose: 'check',
    observedAt: minutesAgo(60),
    shots: shotsTo(mark, { clientId, ...options }),
    ...fields,
  });
  const post = (clientId: string, ...setupChecks: object[]) =>
    site.upload(document(clientId, { setupChecks }));
  const read = async (id: string) => (await site.admin.get(site.at(`/setups/${id}`)).expect(200)).body;

  it('hold a setup that lacks them with the single reason that a check is wanted, and pass it once one agrees', async () => {
    const setup = await newSetup('wanted');
    expect(setup.verdict).toBe('hold');
    expect(codes(setup.reasons)).toEqual(['check_wanted']);
    expect(setup.radio).toMatch(/^Wait\. /);

    const { body } = await post('wanted-u', check('wanted-c', 'wanted', 'HT-5')).expect(201);
    const [answered] = body.setupChecks;
    expect(answered).toMatchObject({
      clientId: 'wanted-c',
      setupId: setup.id,
      purpose: 'check',
      agreed: true,
      setupVerdict: 'pass',
    });
    expect(answered.targets).toHaveLength(1);
    expect(answered.targets[0]).toMatchObject({
      target: 'HT-5',
      role: 'independent',
      horizontal: 'agreed',
      vertical: 'agreed',
    });
    const now = await read(setup.id);
    expect(now.verdict).toBe('pass');
    expect(now.provenance.resultVersion).toBe(2);
    expect(now.checks).toEqual([answered]);
    expect(now.radio).toMatch(/^Wait\. .*Have it released/);
    const released = await site.admin.post(site.at(`/setups/${setup.id}/release`), {}).expect(200);
    expect(released.body.radio).toMatch(/^Go\. /);
  });

  it('fail a setup where they are over the tolerance', async () => {
    const setup = await newSetup('over');
    const moved = { moved: { easting: 0.03 } };
    const { body } = await post('over-u', check('over-c', 'over', 'HT-5', moved)).expect(201);
    expect(body.setupChecks[0]).toMatchObject({ agreed: false, setupVerdict: 'fail' });
    expect(body.setupChecks[0].targets[0]).toMatchObject({ horizontal: 'over', vertical: 'agreed' });
    // Polar position minus published control.
    expect(body.setupChecks[0].targets[0].difference.easting).toBeCloseTo(0.03, 6);
    expect(body.setupChecks[0].targets[0].difference.northing).toBeCloseTo(0, 6);
    const now = await read(setup.id);
    expect(now.verdicts).toEqual({ horizontal: 'fail', vertical: 'pass' });
    expect(codes(now.reasons)).toContain('check_over');
    expect(now.radio).toMatch(/^Stop\. /);
  });

  it('tell drift, not independence, on a mark of the fit', async () => {
    const setup = await newSetup('drift');
    const { body } = await post('drift-u', check('drift-c', 'drift', 'HT-1')).expect(201);
    expect(body.setupChecks[0].targets[0]).toMatchObject({ target: 'HT-1', role: 'drift' });
    expect(body.setupChecks[0].setupVerdict).toBe('hold');
    expect(codes((await read(setup.id)).reasons)).toEqual(['check_wanted']);
  });

  it('count from the upload of the setup itself, without entering its fit', async () => {
    const plain = await newSetup('plain');
    const wild = { purpose: 'closing', clientId: 'wild', moved: { northing: 3 } } as const;
    const checked = await newSetup('checked', shotsTo('HT-5', wild));
    expect(checked.position).toEqual(plain.position);
    expect(checked.standardDeviations).toEqual(plain.standardDeviations);
    expect(checked.fit).toEqual(plain.fit);
    const target = checked.targets.find((t: { target: string }) => t.target === 'HT-5');
    expect(target).toMatchObject({ used: false, purpose: 'closing' });
    expect(target.residual.northing).toBeCloseTo(3, 5);
    expect(checked.checks[0]).toMatchObject({ clientId: null, purpose: 'closing', agreed: false });
    expect(checked.verdict).toBe('fail');
    const good = await newSetup('good', shotsTo('HT-5', { purpose: 'check', clientId: 'good' }));
    expect(good.verdict).toBe('pass');
  });

  it('judge a mark by the check that was observed last, in whatever order they come in', async () => {
    const bad = (id: string, setup: string, minutes: number) =>
      check(id, setup, 'HT-5', { moved: { elevation: 0.2 } }, { observedAt: minutesAgo(minutes) });
    const good = (id: string, setup: string, minutes: number) =>
      check(id, setup, 'HT-5', {}, { observedAt: minutesAgo(minutes) });
    const inOrder = await newSetup('order-1');
    await post('order-1a', bad('order-1-bad', 'order-1', 50)).expect(201);
    expect((await read(inOrder.id)).verdict).toBe('fail');
    await post('order-1b', good('order-1-good', 'order-1', 40)).expect(201);
    expect((await read(inOrder.id)).verdict).toBe('pass');

    const late = await newSetup('order-2');
    await post('order-2a', good('order-2-good', 'order-2', 40)).expect(201);
    await post('order-2b', bad('order-2-bad', 'order-2', 50)).expect(201);
    const now = await read(late.id);
    expect(now.verdict).toBe('pass');
    expect(now.checks.map((c: { clientId: string }) => c.clientId)).toEqual(['order-2-bad', 'order-2-good']);
    // A check on another mark changes nothing about it.
    await post('order-2c', check('order-2-bm', 'order-2', 'BM-1')).expect(201);
    expect((await read(late.id)).verdict).toBe('pass');
  });

  it('count with every erection of a mark: one over is not made good by another in the same check', async () => {
    const setup = await newSetup('twice');
    const high = shotsTo('HT-5', { clientId: 'twice-a', moved: { elevation: 0.4 } });
    // On a rod of one foot, and right.
    const onRod = shotsTo('HT-5', { clientId: 'twice-b', moved: { elevation: 1 } });
    const right = onRod.map((shot) => ({ ...shot, targetHeight: 1 }));
    const both = check('twice-c', 'twice', 'HT-5', {}, { shots: [...high, ...right] });
    const { body } = await post('twice-u', both).expect(201);
    const [{ targets, agreed, setupVerdict }] = body.setupChecks;
    expect({ agreed, setupVerdict }).toEqual({ agreed: false, setupVerdict: 'fail' });
    expect(targets.map((t: { shots: string[]; vertical: string }) => [t.shots, t.vertical])).toEqual([
      [high.map(({ clientId }) => clientId), 'over'],
      [right.map(({ clientId }) => clientId), 'agreed'],
    ]);
    const later = { observedAt: minutesAgo(50) };
    await post('twice-v', check('twice-d', 'twice', 'HT-5', {}, later)).expect(201);
    expect((await read(setup.id)).verdict).toBe('pass');
  });

  it('are refused where a direction and a distance stand under different target heights', async () => {
    await newSetup('heights');
    const [shot] = shotsTo('HT-5', { faces: ['left'] });
    const { zenith: _z, slopeDistance: _s, ...direction } = shot;
    const { horizontal: _h, ...distance } = shot;
    const shots = [direction, { ...distance, clientId: 'other', targetHeight: 1 }];
    const answer = await post('heights-u', check('heights-c', 'heights', 'HT-5', {}, { shots }));
    expectProblem(answer, 'nothing_accepted', [
      '/setupChecks/0/shots/0 reading_incomplete',
      '/setupChecks/0/shots/1 reading_incomplete',
    ]);
  });

  it('are refused on quarantined marks alone; beside others such a mark is noted', async () => {
    const setup = await newSetup('barred');
    const status = (value: string) =>
      site.admin.patch(site.at('/control-points/HT-5'), { status: value, note: 'Leans.' }).expect(200);
    await status('quarantined');
    const alone = await post('barred-u', check('barred-c', 'barred', 'HT-5'));
    const { errors } = expectProblem(alone, 'nothing_accepted', ['/setupChecks/0/shots target_quarantined']);
    expect(errors?.[0].detail).toContain('HT-5');
    const shots = [...shotsTo('HT-5'), ...shotsTo('BM-1')];
    const { body } = await post('barred-v', check('barred-d', 'barred', 'HT-5', {}, { shots })).expect(201);
    await status('trusted');
    expect(body.setupChecks[0].targets.map((t: { target: string }) => t.target)).toEqual(['BM-1']);
    const { verdict, notes } = await read(setup.id);
    expect(verdict).toBe('pass');
    expect(notes).toContainEqual({
      code: 'mark_quarantined',
      text: 'HT-5 is quarantined: its shots are kept and took no part.',
    });
  });

  it('that disagree say so themselves: no check is said to be wanted beside them', async () => {
    const setup = await newSetup('apart');
    // Within the tolerance of 0.015 ft, beyond what the uncertainty explains.
    const moved = { moved: { easting: 0.0145 } };
    await post('apart-u', check('apart-c', 'apart', 'HT-5', moved)).expect(201);
    const { verdict, reasons } = await read(setup.id);
    expect(verdict).toBe('hold');
    expect(codes(reasons)).toEqual(['check_disagrees']);
  });

  it('find their setup by client id or id, also one of the same upload', async () => {
    const setup = await newSetup('named');
    await post('named-u', check('named-c', setup.id, 'HT-5')).expect(201);
    const sent = document('inline', {
      setups: [resection('inline', { toleranceClass: 'fine grade' })],
      setupChecks: [check('inline-c', 'inline', 'HT-5')],
    });
    const { body } = await site.upload(sent).expect(201);
    expect(body.setups[0]).toMatchObject({ verdict: 'pass' });
    expect(body.setups[0].checks).toEqual(body.setupChecks);
  });

  it('are refused one by one with what is wrong', async () => {
    await newSetup('faults');
    const { slopeDistance: _s, prismConstantMm: _p, ...blind } = shotsTo('HT-5', { faces: ['left'] })[0];
    const own = resection('').shots[0].clientId;
    const { body } = await post(
      'faults-u',
      check('f-1', 'nowhere', 'HT-5'),
      check('f-2', 'faults', 'HT-5', {}, { shots: [blind] }),
      check('f-3', 'faults', 'HT-5', {}, { shots: [{ ...shotsTo('HT-5')[0], clientId: own }] }),
      check('f-4', 'faults', 'HT-5', {}, { shots: [{ ...shotsTo('HT-5')[0], target: 'HT-98' }] }),
      check('f-5', 'faults', 'HT-5', {}, { purpose: 'orient' }),
      check('f-6', 'faults', 'HT-5'),
    ).expect(201);
    expect(places(body.refused).sort()).toEqual([
      '/setupChecks/0/setup setup_unknown',
      '/setupChecks/1/shots/0 reading_incomplete',
      '/setupChecks/2/shots/0/clientId target_repeated',
      '/setupChecks/3/shots/0/target target_unknown',
      '/setupChecks/4/purpose invalid_value',
    ]);
    expect(body.setupChecks.map((c: { clientId: string }) => c.clientId)).toEqual(['f-6']);
    const again = await post('faults-v', check('f-6', 'faults', 'HT-5', { clientId: 'other' }));
    expectProblem(again, 'nothing_accepted', ['/setupChecks/0/clientId client_id_taken']);
  });

  it('do not reach a setup of another project', async () => {
    await newSetup('home');
    const other = await newSite(site.admin, 'Other pad');
    const sent = document('away', { setupChecks: [check('away-c', 'home', 'HT-5')] });
    const answer = await site.admin.post(other.at('/uploads'), sent);
    expectProblem(answer, 'nothing_accepted', ['/setupChecks/0/setup setup_unknown']);
  });

  it('all count where several arrive at the same moment', async () => {
    const setup = await newSetup('crowd');
    const marks: Mark[] = ['HT-5', 'BM-1', 'HT-1', 'HT-2'];
    const answers = await Promise.all(
      marks.map((mark) => post(`crowd-${mark}`, check(`crowd-${mark}`, 'crowd', mark))),
    );
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201, 201]);
    const now = await read(setup.id);
    expect(now.checks).toHaveLength(4);
    expect(now.provenance.resultVersion).toBe(5);
    expect(now.verdict).toBe('pass');
  });
});
