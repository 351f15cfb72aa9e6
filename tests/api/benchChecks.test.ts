import { beforeAll, describe, expect, it } from 'vitest';
import { minutesAgo } from './fixtures/moments';
import { places } from './fixtures/problems';
import { document, newLayer, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

/** BM-1 stands at 411.25 ft. */
const KNOWN = 411.25;

describe('bench checks', () => {
  let site: SiteOrganization;
  let design: Awaited<ReturnType<typeof newLayer>>;
  beforeAll(async () => {
    site = await newSiteOrganization();
    design = await newLayer(site.admin, site.at);
  });

  let count = 0;
  const post = (...items: object[]) => {
    const benchChecks = items.map((item) => ({
      clientId: `b-${++count}`,
      machine: 'DZ-3',
      benchmark: 'BM-1',
      edge: 'left',
      elevations: [KNOWN],
      tolerance: 0.05,
      observedAt: minutesAgo(30),
      ...item,
    }));
    return site.upload(document(`u-${count}`, { benchChecks }));
  };
  const check = async (item: object) => (await post(item).expect(201)).body.benchChecks[0];
  const codes = (items: { code: string }[]) => items.map(({ code }) => code);

  it('fail a low edge, and say to add what it lacks once the benchmark is checked', async () => {
    const low = await check({ elevations: [KNOWN - 0.12, KNOWN - 0.12, KNOWN - 0.12] });
    expect(low).toMatchObject({
      machine: 'DZ-3',
      benchmark: 'BM-1',
      benchmarkVersion: 1,
      edge: 'left',
      readings: 3,
      verdict: 'fail',
      instruction:
        "Left edge reads 0.12 ft low: it would leave ground 0.12 ft high. First check BM-1 by the setup. Only if the setup agrees, add 0.12 ft to the left edge's height, then bench again.",
    });
    expect(low.knownElevation).toBe(KNOWN);
    expect(low.readElevation).toBeCloseTo(KNOWN - 0.12, 9);
    expect(low.difference).toBeCloseTo(-0.12, 9);
    expect(low.correction).toBeCloseTo(0.12, 9);
    expect(low.spread).toBeCloseTo(0, 9);
    expect(codes(low.reasons)).toEqual(['edge_low']);
    expect((await site.admin.get(site.at(`/bench-checks/${low.id}`)).expect(200)).body).toEqual(low);
  });

  it('turn every sign for a high edge', async () => {
    const high = await check({ edge: 'right', elevations: [KNOWN + 0.08] });
    expect(high).toMatchObject({ verdict: 'fail', spread: null });
    expect(high.difference).toBeCloseTo(0.08, 9);
    expect(high.correction).toBeCloseTo(-0.08, 9);
    expect(high.instruction).toMatch(/^Right edge reads 0\.08 ft high: it would leave ground 0\.08 ft low\./);
    expect(high.instruction).toContain("take 0.08 ft off the right edge's height");
  });

  it('pass within the tolerance, at both of its limits', async () => {
    const verdicts = [];
    for (const off of [-0.0501, -0.05, 0.05, 0.0501])
      verdicts.push((await check({ edge: 'centre', elevations: [KNOWN + off] })).verdict);
    expect(verdicts).toEqual(['fail', 'pass', 'pass', 'fail']);
    const good = await check({ elevations: [KNOWN + 0.01, KNOWN - 0.01] });
    expect(good).toMatchObject({ verdict: 'pass', reasons: [] });
    expect(good.spread).toBeCloseTo(0.02, 9);
    expect(good.instruction).toBe('Left edge agrees with BM-1 within the tolerance (0.00 ft).');
  });

  it('hold without a correction where the repeats do not agree', async () => {
    const unsteady = await check({ elevations: [KNOWN - 0.1, KNOWN - 0.16] });
    expect(unsteady).toMatchObject({ verdict: 'hold', correction: null });
    expect(codes(unsteady.reasons)).toEqual(['readings_unsteady']);
    expect(unsteady.instruction).toMatch(/^Do not correct\./);
  });

  it('hold without a correction where benchmark or setup cannot speak for the blade', async () => {
    const { body } = await site.upload(document('s', { setups: [resection('s')] })).expect(201);
    const low = { setup: 's', elevations: [KNOWN - 0.12] };
    const idle = await check(low);
    expect(idle).toMatchObject({ verdict: 'hold', correction: null, setupId: body.setups[0].id });
    expect(codes(idle.reasons)).toContain('setup_not_in_force');
    const release = { releasedAt: minutesAgo(60), validMinutes: 120 };
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/release`), release).expect(200);
    expect(await check(low)).toMatchObject({ verdict: 'fail' });
    expect((await check(low)).correction).toBeCloseTo(0.12, 9);
    const early = await check({ ...low, observedAt: minutesAgo(61) });
    expect(codes(early.reasons)).toContain('setup_not_in_force');

    const inFit = await check({ ...low, benchmark: 'HT-1', elevations: [409.9] });
    expect(inFit).toMatchObject({ verdict: 'hold', correction: null });
    expect(codes(inFit.reasons)).toContain('benchmark_in_fit');
    expect(inFit.instruction).toMatch(/^Do not correct\..*outside the fit/);

    await site.admin.patch(site.at('/control-points/BM-1'), { status: 'suspect', note: 'Kerb moved.' });
    const suspect = await check({ elevations: [KNOWN - 0.12] });
    expect(suspect).toMatchObject({ verdict: 'hold', correction: null });
    expect(codes(suspect.reasons)).toContain('benchmark_not_trusted');
    await site.admin.patch(site.at('/control-points/BM-1'), { status: 'trusted', note: 'Checked.' });
  });

  it('hold where the machine’s offset or surface is not the layer’s, and say what it must be', async () => {
    const bound = { layer: 'subgrade', activeOffset: -0.5, surfaceSha256: design.surface.sha256 };
    expect(await check(bound)).toMatchObject({
      verdict: 'pass',
      layer: 'subgrade',
      layerOffset: -0.5,
      activeOffset: -0.5,
    });
    const offset = await check({ ...bound, activeOffset: 0.5 });
    expect([offset.verdict, codes(offset.reasons)]).toEqual(['hold', ['offset_differs']]);
    expect(offset.instruction).toBe(
      'Left edge agrees with BM-1 within the tolerance (0.00 ft). The machine’s active offset is +0.50 ft, that of subgrade is −0.50 ft. Set −0.50 ft in the machine before it cuts.',
    );
    const close = await check({ ...bound, activeOffset: -0.501 });
    expect(close.reasons[0].text).toContain('is −0.501000 ft, that of subgrade is −0.500000 ft');
    const surface = await check({ ...bound, surfaceSha256: 'ab'.repeat(32) });
    expect([surface.verdict, codes(surface.reasons)]).toEqual(['hold', ['surface_differs']]);
  });

  it('ask for the offset before any correction where the edge is off by just that', async () => {
    const low = await check({ layer: 'subgrade', activeOffset: -0.5, elevations: [KNOWN - 0.5] });
    expect(low).toMatchObject({
      verdict: 'fail',
      correction: null,
      instruction:
        'Do not correct. The edge reads 0.50 ft low, exactly the offset of subgrade (−0.50 ft): is the offset left on (or off)? Look at the offset in the machine, and read the edge again with the offset excluded.',
    });
    expect(codes(low.reasons)).toEqual(['layer_offset_suspected', 'edge_low']);
    const high = await check({ layer: 'subgrade', activeOffset: 0, elevations: [KNOWN + 0.46] });
    expect(codes(high.reasons)).toEqual(['layer_offset_suspected', 'offset_differs', 'edge_high']);
    expect(high).toMatchObject({ verdict: 'fail', correction: null });
    expect(high.instruction).toContain(
      'reads 0.46 ft high, within the tolerance of the offset of subgrade (−0.50 ft)',
    );
    expect(high.instruction).toContain('active offset is 0.00 ft, that of subgrade is −0.50 ft');
    const beside = await check({ layer: 'subgrade', elevations: [KNOWN - 0.44] });
    expect(beside.correction).toBeCloseTo(0.44, 9);
  });

  it('know the offset from the machine alone, or from what the setup was released to it for', async () => {
    const alone = await check({ activeOffset: -0.3, elevations: [KNOWN - 0.3] });
    expect(codes(alone.reasons)).toEqual(['active_offset_suspected', 'edge_low']);
    expect(alone.instruction).toContain('exactly the machine’s active offset (−0.30 ft)');

    const { body } = await site.upload(document('released', { setups: [resection('released')] })).expect(201);
    const release = {
      machine: 'DZ-3',
      layer: 'subgrade',
      releasedAt: minutesAgo(60),
      validMinutes: 120,
    };
    await site.admin.post(site.at(`/setups/${body.setups[0].id}/release`), release).expect(200);
    const bound = { setup: 'released', elevations: [KNOWN - 0.5] };
    const told = await check(bound);
    expect(told).toMatchObject({ layer: 'subgrade', layerOffset: -0.5, correction: null });
    expect(codes(told.reasons)).toEqual(['layer_offset_suspected', 'edge_low']);
    expect((await site.admin.get(site.at(`/bench-checks/${told.id}`)).expect(200)).body).toEqual(told);
    const other = await check({ ...bound, machine: 'DZ-4' });
    expect(other).toMatchObject({ layer: null, layerOffset: null });
    const surface = { surfaceSha256: 'ab'.repeat(32), elevations: [KNOWN], activeOffset: -0.5 };
    expect(codes((await check({ ...bound, ...surface })).reasons)).toEqual(['surface_differs']);
  });

  it('fail without a correction for a gross error, and say what it looks like', async () => {
    const metres = await check({ elevations: [KNOWN * 0.3048, KNOWN * 0.3048] });
    expect(metres).toMatchObject({ verdict: 'fail', correction: null });
    expect(codes(metres.reasons)).toEqual(['gross_error', 'metres_as_feet']);
    expect(metres.instruction).toBe(
      'Do not correct. The edge reads 285.90 ft low: a gross error, no blade is off by more than 2.0 ft. It looks like metres in a foot job. Check the unit of the readings first, then that the edge stood on BM-1, then the frame that the machine works in. Send the elevations in the unit that is declared with them.',
    );
    const elsewhere = await check({ elevations: [KNOWN + 3] });
    expect(codes(elsewhere.reasons)).toEqual(['gross_error']);
    // Whatever else is amiss, and with repeats that scatter among themselves.
    const both = await check({ elevations: [KNOWN + 3, KNOWN + 4] });
    expect(codes(both.reasons)).toEqual(['readings_unsteady', 'gross_error']);
    expect(both).toMatchObject({ verdict: 'fail', correction: null });
    const slip = await check({ elevations: [KNOWN, KNOWN - 100] });
    expect([slip.verdict, codes(slip.reasons)]).toEqual(['hold', ['readings_unsteady']]);
  });

  it('are refused one by one with what is wrong', async () => {
    const points = [{ name: 'FLAT', easting: 1, northing: 1 }];
    await site.admin.post(site.at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
    const { body } = await post(
      { benchmark: 'BM-9' },
      { benchmark: 'FLAT' },
      { setup: 'nowhere', layer: 'nowhere' },
      { elevations: [] },
      { tolerance: 0, edge: 'top' },
      { surfaceSha256: 'AB' },
      {},
    ).expect(201);
    expect(places(body.refused).sort()).toEqual([
      '/benchChecks/0/benchmark benchmark_unknown',
      '/benchChecks/1/benchmark benchmark_without_elevation',
      '/benchChecks/2/layer layer_unknown',
      '/benchChecks/2/setup setup_unknown',
      '/benchChecks/3/elevations invalid_value',
      '/benchChecks/4/edge invalid_value',
      '/benchChecks/4/tolerance invalid_value',
      '/benchChecks/5/surfaceSha256 invalid_value',
    ]);
    expect(body.benchChecks).toHaveLength(1);
  });

  it('are listed by machine', async () => {
    await check({ machine: 'EX-7' });
    const { body } = await site.admin.get(site.at('/bench-checks?machine=EX-7')).expect(200);
    expect(body.data.map((c: { machine: string }) => c.machine)).toEqual(['EX-7']);
    expect((await site.admin.get(site.at('/bench-checks?length=m'))).body.data[0].units.length).toBe('m');
  });
});
