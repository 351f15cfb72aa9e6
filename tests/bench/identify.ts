import { spawnSync } from 'node:child_process';
import { type Identification, identify } from '@/lib/compute/survey/identify';
import { ControlIndex } from '@/lib/compute/survey/identifyControl';
import { asTask, type Task } from '@/tests/compute/identifySite';
import { seededChance } from '@/tests/simulator/chance';
import { crowdedSite } from '@/tests/simulator/crowdedSite';

const SITES = 10;
const POINTS = 10_000;
const SHOTS = 8;
/** Between neighbouring points, m: a highway, a subdivision, a stake-out. */
const SPACINGS = [40, 15, 6];
const MOST_MS = 50;
const PYTHON = '/usr/bin/python3';

interface IdentificationTimes {
  /** Metres between neighbouring points. */
  spacing: number;
  /** Median of the sites, ms: the points laid out anew, and not. */
  fromPoints: number;
  fromIndex: number;
  /** The same by SciPy's k-d tree, ms; null where there is no SciPy. */
  baseline: { fromPoints: number; fromTree: number } | null;
  /** Sites on which both name the same points. */
  same: number;
  sites: number;
}

/** Says how long identifications take, beside another way to the same names; whether all are quick and the same. */
export function identificationSection(say: (text: string) => void): boolean {
  const all = SPACINGS.map(identificationTimes);
  say(
    `\nIdentification of ${SHOTS} shots, one a stray, among ${POINTS.toLocaleString('en')} points, under ${MOST_MS} ms each\n`,
  );
  for (const { spacing, fromPoints, fromIndex, baseline, same, sites } of all) {
    const other = baseline
      ? `SciPy ${baseline.fromPoints.toFixed(1)} ms (${baseline.fromTree.toFixed(1)}), the same names on ${same} of ${sites} sites`
      : 'no SciPy to compare with';
    const own = `${fromPoints.toFixed(1)} ms (${fromIndex.toFixed(1)} once the points are laid out)`;
    say(`${String(spacing).padStart(4)} m apart: ${own}; ${other}`);
  }
  say('');
  return all.every(
    ({ fromPoints, baseline, same, sites }) => fromPoints < MOST_MS && (baseline === null || same === sites),
  );
}

/** Eight shots, one of them a stray, among 10,000 points, as long as it takes on one core, site after site. */
function identificationTimes(spacing: number): IdentificationTimes {
  const chance = seededChance(spacing);
  const tasks = Array.from({ length: SITES + 1 }, () =>
    asTask(
      crowdedSite(chance, {
        points: [POINTS, POINTS],
        shots: [SHOTS, SHOTS],
        strays: 1,
        spacing: [spacing, spacing],
        programme: { faces: ['left'], sets: 1 },
      }),
    ),
  );
  // The first one warms up.
  const runs = tasks.map(timed).slice(1);
  const others = byTree(tasks.slice(1));
  const same = runs.filter(({ found }, i) => others?.[i].names.join() === found.best.marks.join()).length;
  return {
    spacing,
    fromPoints: median(runs.map(({ laidOut, searched }) => laidOut + searched)),
    fromIndex: median(runs.map(({ searched }) => searched)),
    baseline: others && {
      fromPoints: median(others.map(({ laidOut, searched }) => laidOut + searched)),
      fromTree: median(others.map(({ searched }) => searched)),
    },
    same,
    sites: SITES,
  };
}

function timed({ shots, marks, sighting }: Task) {
  const unnamed = shots.map(({ target: _, ...shot }) => shot);
  const points = [...marks.values()];
  const began = performance.now();
  const index = new ControlIndex(points);
  const ready = performance.now();
  const found: Identification = identify(index, { ...sighting, shots: unnamed, control: marks });
  const done = performance.now();
  return { laidOut: ready - began, searched: done - ready, found };
}

interface Other {
  laidOut: number;
  searched: number;
  names: (string | null)[];
}

/** The same sites by a script of its own, which shares nothing with the hub; null without SciPy. */
function byTree(tasks: readonly Task[]): Other[] | null {
  const input = tasks.map(({ shots, marks, sighting: { ppm, surroundings } }) => ({
    points: [...marks.values()].map(({ name, easting, northing, elevation }) => [
      name,
      easting,
      northing,
      elevation,
    ]),
    shots: shots.map(({ direction, zenith, distance, targetHeight }) => ({
      direction,
      zenith,
      targetHeight,
      ...distance,
    })),
    ppm,
    combinedFactor: surroundings.combinedFactor,
  }));
  const { stdout, status } = spawnSync(PYTHON, ['tests/bench/identify.py'], {
    input: JSON.stringify(input),
    env: { ...process.env, OPENBLAS_NUM_THREADS: '1' },
    encoding: 'utf8',
    maxBuffer: 256e6,
  });
  return status === 0 ? (JSON.parse(stdout) as Other[]) : null;
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1];
}
