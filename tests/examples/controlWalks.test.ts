import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type * as z from 'zod';
import { closeDatabase } from '@/db/tenant';
import type { Adjustment, AdjustmentObservation } from '@/openapi/schemas/adjustment';
import type { ControlPoint } from '@/openapi/schemas/control';
import type { Setup } from '@/openapi/schemas/setup';
import { startWorker, type Worker } from '@/tests/faults/workers';
import { type Api, api } from '@/tests/setup/api';
import { type Hub, newDatabase, startHub } from '@/tests/setup/hub';
import { callerRoles } from '@/tests/setup/roles';
import { CONTROL, truePlace } from './generator/site';
import { EXAMPLES, LANGUAGES, type Language, type Walked, walk } from './walks';

/** What a walk left behind on the hub, as the hub tells it. */
interface Left {
  walked: Walked;
  setups: z.output<typeof Setup>[];
  control: z.output<typeof ControlPoint>[];
  adjustment: z.output<typeof Adjustment>;
  observations: z.output<typeof AdjustmentObservation>[];
}

let hub: Hub;
let worker: Worker;
let key: string;
let caller: Api;
const folders: string[] = [];

/** Networks are adjusted by a worker: this hub has one, and a database of its own. */
beforeAll(async () => {
  const database = await newDatabase(inject('cluster'), 'example_control_walks');
  key = (await callerRoles(database)).key;
  await closeDatabase();
  hub = await startHub(database);
  worker = await startWorker(database);
  caller = api(hub.url, key);
});
afterAll(async () => {
  for (const folder of folders) rmSync(folder, { recursive: true });
  await Promise.all([worker?.stop(), hub?.stop()]);
});

const run = (language: Language, folder?: string) =>
  walk('control-walk', language, { HUBTACK_URL: hub.url, HUBTACK_KEY: key }, folder);

/** The examples, asking for another adjustment. */
function asking(adjustment: object): string {
  const folder = `${mkdtempSync(join(tmpdir(), 'hubtack-control-'))}/`;
  folders.push(folder);
  cpSync(EXAMPLES, folder, { recursive: true });
  writeFileSync(`${folder}data/adjustment.json`, JSON.stringify(adjustment));
  return folder;
}

const left = {} as Record<Language, Left>;

beforeAll(async () => {
  for (const language of LANGUAGES) {
    const walked = await run(language);
    if (walked.code !== 0) throw new Error(`${language} ended with ${walked.code}.\n${walked.problem}`);
    const [, name, projectId] = /^Project: (.+), (\S+)$/m.exec(walked.out)!;
    const of = async (path: string) => (await caller.get(`/projects/${projectId}${path}`).expect(200)).body;
    expect((await of('')).name).toBe(name);
    const adjustments = (await of('/adjustments')).data;
    expect(adjustments).toHaveLength(1);
    const at = `/adjustments/${adjustments[0].id}`;
    const page = await of(`${at}/observations?removed=false&limit=200`);
    expect(page.nextCursor).toBeNull();
    left[language] = {
      walked,
      setups: (await of('/setups')).data.toSorted((a: { clientId: string }, b: { clientId: string }) =>
        a.clientId.localeCompare(b.clientId),
      ),
      control: (await of('/control-points')).data,
      adjustment: await of(at),
      observations: page.data,
    };
  }
}, 120_000);

describe.each(LANGUAGES)('the control walk in %s', (language) => {
  it('ends well and complains of nothing', () => {
    const { code, problem } = left[language].walked;
    expect({ code, problem }).toEqual({ code: 0, problem: '' });
  });

  it('is told to stand on the pad rather than outside', () => {
    expect(left[language].walked.out).toMatch(
      /^Forecast: Stand at the crown of the pad: 0\.0\d\d ft at 95 %, .* At the spoil heap: 0\.0\d\d ft\.$/m,
    );
  });

  it('sets up in three ways, and prints verdict and the line to read out', () => {
    const { setups, walked } = left[language];
    expect(setups.map(({ clientId, method }) => [clientId, method])).toEqual([
      ['st-4', 'backsight'],
      ['st-5', 'resection'],
      ['st-6', 'identify'],
    ]);
    const how = ['over BM-1 by backsights', 'by angles alone', 'by 5 of 6 reflectors identified'];
    setups.forEach(({ station, verdict, radio, position }, i) => {
      const at = `E ${position.easting.toFixed(3)} ft, N ${position.northing.toFixed(3)} ft, good to `;
      expect(walked.out).toContain(
        `\nSetup ${station} ${how[i]}: ${verdict.toUpperCase()}\n  ${radio}\n  ${at}`,
      );
    });
  });

  it('waits for the adjustment, which passes, and prints what fits worst of all', () => {
    const { adjustment, observations, walked } = left[language];
    expect(adjustment).toMatchObject({ verdict: 'pass', job: { status: 'succeeded' } });
    expect(adjustment.result!.provenance.setups).toHaveLength(3);
    expect(adjustment.result!.provenance.levelRuns).toHaveLength(1);
    const [, what, w] = /Worst residual: ([^,]+), .*, w (-?[\d.]+)$/m.exec(walked.out)!;
    const sizes = observations.map(({ standardised }) => Math.abs(standardised ?? 0));
    expect(Math.abs(Number(w))).toBeCloseTo(Math.max(...sizes), 2);
    const printed = observations.filter(({ standardised }) => standardised?.toFixed(2) === w);
    const names = printed.map(({ kind, setup, levelRun, to, component }) =>
      [kind, setup, levelRun, to, component].filter(Boolean).join(' '),
    );
    expect(names).toContain(what);
  });

  it('applies it: every point has a version that comes of it, and stands nearer to where it truly is', () => {
    const { adjustment, control, walked } = left[language];
    expect(adjustment.applied).not.toBeNull();
    expect(control).toHaveLength(CONTROL.length);
    let [published, adjusted] = [0, 0];
    for (const point of control) {
      expect(point).toMatchObject({ version: 2, adjustmentId: adjustment.id, status: 'trusted' });
      const before = CONTROL.find(({ name }) => name === point.name)!;
      const truth = truePlace(point.name);
      for (const axis of ['easting', 'northing', 'elevation'] as const) {
        const error = point[axis]! - truth[axis];
        const sigma = axis === 'elevation' ? point.sigma.vertical : point.sigma.horizontal;
        expect(Math.abs(error)).toBeLessThan(3.5 * sigma);
        published += (before[axis] - truth[axis]) ** 2;
        adjusted += error ** 2;
      }
      expect(point.sigma.horizontal).toBeLessThan(before.sigma.horizontal);
      expect(point.sigma.vertical).toBeLessThan(before.sigma.vertical);
    }
    expect(adjusted).toBeLessThan(published);
    const mark = control.find(({ name }) => name === 'HT-103')!;
    expect(walked.out).toContain(
      `  HT-103, version 2: E ${mark.easting.toFixed(3)} ft, N ${mark.northing.toFixed(3)} ft, elevation ${mark.elevation!.toFixed(3)} ft\n` +
        `  sigma in plan ${mark.sigma.horizontal.toFixed(3)} ft, was 0.006 ft\n`,
    );
  });

  it('applies nothing that is on hold, and says whose turn it is', async () => {
    const network = { setups: [], levelRuns: 'all', datum: { kind: 'held', points: ['BM-1'] } };
    const { code, out, problem } = await run(language, asking(network));
    expect({ code, problem }).toEqual({ code: 0, problem: '' });
    expect(out).toMatch(/^Adjustment .*: HOLD, /m);
    expect(out).toContain(
      '\n  - No observation is more than the least that is needed: no error would show.\n',
    );
    expect(out).not.toContain('Worst residual');
    expect(out).toMatch(/ {2}Not applied: on hold, another person applies it with a note\.\n$/);
    const [, projectId] = /^Project: .+, (\S+)$/m.exec(out)!;
    const { body } = await caller.get(`/projects/${projectId}/adjustments`).expect(200);
    expect(body.data).toMatchObject([{ verdict: 'hold', applied: null }]);
  });

  it('stops where the job fails, and prints why', async () => {
    // ST-4 and ST-6 share HT-106 alone: a setup on one point may turn about it.
    const network = { setups: 'all', datum: { kind: 'weighted', points: ['BM-1', 'HT-106'] } };
    const { code, out, problem } = await run(language, asking(network));
    expect(code).toBe(1);
    expect(out).not.toContain('Adjustment');
    expect(problem).toMatch(
      /^Job \S+ failed: adjustment_not_computable\. The observations do not determine HT-101, /,
    );
  });
});

describe('the three control walks', () => {
  /** All that they print but their project. */
  const said = (language: Language) => left[language].walked.out.replace(/^Project: .*\n/, '');

  it.each(LANGUAGES.filter((language) => language !== 'node'))('%s says what node says', (language) => {
    expect(said(language)).toBe(said('node'));
  });

  it('print what the README shows', () => {
    const [, shown] = /After its project it prints:\n\n```\n([^`]+)```/.exec(
      readFileSync(`${EXAMPLES}README.md`, 'utf8'),
    )!;
    expect(said('node')).toBe(shown);
  });
});
