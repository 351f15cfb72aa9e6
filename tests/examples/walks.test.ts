import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import type * as z from 'zod';
import type { BenchCheck } from '@/openapi/schemas/benchCheck';
import type { GradeCheck, LayerSummary } from '@/openapi/schemas/gradeCheck';
import type { LevelRun } from '@/openapi/schemas/levelRun';
import type { Setup } from '@/openapi/schemas/setup';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { BUMPED_TARGET, GOOD } from './generator/setups';
import { EXAMPLES, LANGUAGES, type Language, type Walked, walk } from './walks';

/** What a walk left behind on the hub, as the hub tells it. */
interface Left {
  walked: Walked;
  projectId: string;
  setups: Record<string, z.output<typeof Setup>>;
  bench: Record<string, z.output<typeof BenchCheck>>;
  grade: z.output<typeof GradeCheck>[];
  levelRuns: z.output<typeof LevelRun>[];
  summary: z.output<typeof LayerSummary>;
}

const left = {} as Record<Language, Left>;

beforeAll(async () => {
  const { hub, key } = await newOrganization();
  const { get } = api(hub.url, key);
  for (const language of LANGUAGES) {
    const walked = await walk('walk', language, { HUBTACK_URL: hub.url, HUBTACK_KEY: key });
    if (walked.code !== 0) throw new Error(`${language} ended with ${walked.code}.\n${walked.problem}`);
    const [, name, projectId] = /^Project: (.+), (\S+)$/m.exec(walked.out)!;
    const of = async (path: string) => (await get(`/projects/${projectId}${path}`).expect(200)).body;
    expect((await of('')).name).toBe(name);
    const byClientId = <T extends { clientId: string }>({ data }: { data: T[] }) =>
      Object.fromEntries(data.map((item) => [item.clientId, item]));
    const setups: { data: z.output<typeof Setup>[] } = await of('/setups');
    left[language] = {
      walked,
      projectId,
      setups: byClientId({ data: setups.data.filter(({ supersedes }) => supersedes === null) }),
      bench: byClientId(await of('/bench-checks')),
      grade: (await of('/grade-checks?layer=subgrade&limit=200')).data,
      levelRuns: (await of('/level-runs')).data,
      summary: await of('/layers/subgrade/summary'),
    };
  }
}, 120_000);

describe.each(LANGUAGES)('the walk in %s', (language) => {
  it('ends well and complains of nothing', () => {
    const { code, problem } = left[language].walked;
    expect({ code, problem }).toEqual({ code: 0, problem: '' });
  });

  it('gets a pass for the good setup, with agreed checks on a benchmark outside the fit', () => {
    const { verdict, status, checks, targets, release } = left[language].setups['st-1'];
    expect({ verdict, status }).toEqual({ verdict: 'pass', status: 'released' });
    expect(release).toMatchObject({ machine: 'DZ-4', layer: 'subgrade', offset: -0.5 });
    expect(checks.map(({ agreed }) => agreed)).toEqual([true, true]);
    expect(checks.flatMap((check) => check.targets).map(({ target, role }) => [target, role])).toEqual([
      ['BM-2', 'independent'],
      ['BM-2', 'independent'],
      ['HT-102', 'drift'],
    ]);
    expect(targets.filter(({ used }) => used).map(({ target }) => target)).not.toContain('BM-2');
  });

  // The simulated truth; 0.02 ft is three of the standard deviations that the hub states.
  it('finds the good station where the simulation put it', () => {
    const { position, instrumentElevation, orientation, standardDeviations } = left[language].setups['st-1'];
    expect(Math.abs(position.easting - GOOD.axis.easting)).toBeLessThan(0.02);
    expect(Math.abs(position.northing - GOOD.axis.northing)).toBeLessThan(0.02);
    expect(Math.abs(instrumentElevation! - GOOD.axis.elevation)).toBeLessThan(0.02);
    expect(position.elevation).toBeCloseTo(instrumentElevation! - GOOD.instrumentHeight!, 9);
    expect(Math.abs(orientation! - GOOD.orientation) * 3600).toBeLessThan(15);
    expect(3 * standardDeviations.easting).toBeLessThan(0.02);
  });

  // The simulated line of sight rises by 0.04 mm per metre; 12 mm√km over 415 ft are 0.014 ft.
  it('levels from one benchmark to the other, and closes', () => {
    const { levelRuns, walked } = left[language];
    expect(levelRuns.map(({ from, to, verdict }) => [from, to, verdict])).toEqual([['BM-1', 'BM-2', 'pass']]);
    const [{ collimation, closure, points }] = levelRuns;
    expect(collimation.source).toBe('pegTest');
    expect(Math.abs(collimation.mmPerM - 0.04)).toBeLessThan(0.02);
    expect(closure.allowed).toBeCloseTo(0.014, 3);
    expect(Math.abs(points[1].elevation - 1236.952)).toBeLessThan(0.01);
    expect(walked.out).toMatch(/^ {2}Level run BM-1 to BM-2 is good, it closes to 0\.\d{3} ft/m);
  });

  it('gets a fail for the forgotten prism constant: every distance is out by the same sign', () => {
    const { verdict, targets, position } = left[language].setups['st-2'];
    expect(verdict).toBe('fail');
    const distances = targets
      .flatMap(({ observations }) => observations)
      .filter(({ kind }) => kind === 'distance');
    expect(distances).toHaveLength(4);
    for (const { standardised } of distances) expect(standardised).toBeGreaterThan(3.29);
    expect(position.elevation).toBeNull();
  });

  it('gets a fail for the bumped target, names it first, and says so in the radio line', () => {
    const { walked, setups } = left[language];
    const { verdict, reasons } = setups['st-3'];
    expect(verdict).toBe('fail');
    expect(reasons[0].text).toContain('HT-103');
    expect(walked.out).toMatch(/^Setup ST-3: fail\n {2}Stop\. .*HT-103/im);
  });

  it('finds the left edge low, and within its tolerance once corrected', () => {
    const { 'bench-before': before, 'bench-after': after } = left[language].bench;
    expect(before).toMatchObject({ machine: 'DZ-4', edge: 'left', verdict: 'fail' });
    // 1238.3167 read, 1238.437 known.
    expect(before.difference).toBeCloseTo(-0.1203, 4);
    expect(before.correction).toBeCloseTo(0.1203, 4);
    expect(before.instruction).toMatch(/reads 0\.12 ft low.*add 0\.12 ft/);
    expect(after).toMatchObject({ verdict: 'pass', correctionAppliedFor: 'bench-before' });
  });

  it('gets the lot refused for its high north-east corner alone', () => {
    const { grade, summary } = left[language];
    expect(summary).toMatchObject({ verdict: 'fail', count: 42, withinTolerance: 37 });
    expect(summary.radio).toMatch(
      /^Cut the north-east corner and shoot again\. subgrade is not accepted: 5 of 42 high, none low; worst C /,
    );
    expect(summary.notCounted).toEqual({ outside: 0, notInForce: 0 });
    const failed = grade.filter(({ verdict }) => verdict === 'fail');
    expect(failed).toHaveLength(5);
    for (const { point, deviation, label } of failed) {
      expect(deviation).toBeGreaterThan(0.05);
      expect(label).toMatch(/^C /);
      expect(point.easting).toBeGreaterThan(5190);
      expect(point.northing).toBeGreaterThan(10_190);
    }
  });

  it('prints the verdicts and the lines to read out', () => {
    const { walked, setups, bench, summary } = left[language];
    // A superseded setup says so by now; when it was printed it said what was wrong with it.
    const standing = Object.values(setups).filter(({ status }) => status !== 'superseded');
    for (const { radio } of standing) expect(walked.out).toContain(radio);
    expect(walked.out).toMatch(/Wait\. ST-1 .*Have it released.*Released to DZ-4.*Go\. ST-1 /s);
    for (const { instruction } of Object.values(bench)) expect(walked.out).toContain(instruction);
    expect(walked.out).toContain(summary.radio);
  });
});

describe('the three walks', () => {
  const others = LANGUAGES.filter((language) => language !== 'node');

  it.each(others)('%s gets the figures of node for every setup', (language) => {
    for (const [name, setup] of Object.entries(left[language].setups)) {
      const same = left.node.setups[name];
      expect(setup.position.easting).toBeCloseTo(same.position.easting, 9);
      expect(setup.position.northing).toBeCloseTo(same.position.northing, 9);
      expect(setup.instrumentElevation!).toBeCloseTo(same.instrumentElevation!, 9);
      expect(setup.orientation!).toBeCloseTo(same.orientation!, 9);
      expect(setup.reasons).toEqual(same.reasons);
    }
    expect(Object.keys(left[language].setups).sort()).toEqual(['st-1', 'st-2', 'st-3']);
  });

  it.each(others)('%s gets the summary of node', (language) => {
    expect(left[language].summary).toEqual(left.node.summary);
  });
});

describe('the walk in node', () => {
  it('ends with a line for programs', () => {
    const { walked, projectId, setups } = left.node;
    const printed = walked.out.trimEnd().split('\n');
    const { lines, ...ids } = JSON.parse(printed.at(-1)!);
    expect(ids).toEqual({ projectId, setupId: setups['st-1'].id, layer: 'subgrade' });
    expect(lines).toEqual(printed.slice(0, -1));
  });

  it('refits the setup without the bumped target: it passes, near the true station', async () => {
    const { out } = left.node.walked;
    const [, easting, northing] = /refitted without HT-103: PASS\n.*\n {2}E ([\d.]+) ft, N ([\d.]+) ft/.exec(
      out,
    )!;
    expect(Math.abs(Number(easting) - BUMPED_TARGET.axis.easting)).toBeLessThan(0.02);
    expect(Math.abs(Number(northing) - BUMPED_TARGET.axis.northing)).toBeLessThan(0.02);
  });

  it('prints what the README shows', () => {
    const [, shown] = /among other lines:\n\n```\n([^`]+)```/.exec(
      readFileSync(`${EXAMPLES}README.md`, 'utf8'),
    )!;
    for (const line of shown.trim().split('\n')) expect(left.node.walked.out).toContain(line);
  });
});
