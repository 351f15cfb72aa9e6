import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { median } from './figures';

const ROUNDS = 3;
const MOST_SECONDS = 3;
const MOST_MEGABYTES = 400;
/** Of the time of a quarter of the size, compiled code in both: linear is 4. */
const MOST_GROWTH = 6;
/** Speed beside scipy’s SuperLU, which is C; about a half on a quiet machine, less where caches are shared. */
const LEAST_RATIO = 0.3;
const PYTHON = '/usr/bin/python3';

/** By the clock, and of the processor. */
interface Seconds {
  clock: number;
  processor: number;
}

interface Once {
  points: number;
  readings: number;
  unknowns: number;
  degreesOfFreedom: number;
  first: Seconds;
  again: Seconds;
  /** Analysis, factorisation and one solution, of the processor. */
  solved: number;
  peakMegabytes: number;
}

function once(share: number, path: string): Once {
  const run = spawnSync(
    process.execPath,
    ['--import', 'tsx', 'tests/bench/networkOnce.ts', `${share}`, path],
    {
      encoding: 'utf8',
    },
  );
  if (run.status !== 0) throw new Error(run.stderr);
  return JSON.parse(run.stdout);
}

/** The same normal equations by scipy.sparse.linalg.splu; null where there is no scipy. */
function bySplu(path: string): { seconds: number; apart: number; largest: number } | null {
  const env = { ...process.env, OPENBLAS_NUM_THREADS: '1' };
  const run = spawnSync(PYTHON, ['tests/bench/splu.py', path], { encoding: 'utf8', env });
  return run.status === 0 ? JSON.parse(run.stdout) : null;
}

/** Adjusts a large network with full statistics, and a quarter of it; true where all of it is met. */
export function networkSection(say: (text: string) => void): boolean {
  const folder = mkdtempSync(join(tmpdir(), 'network-'));
  const path = join(folder, 'normals');
  try {
    const rounds = Array.from({ length: ROUNDS }, () => {
      const quarter = once(0.25, join(folder, 'quarter'));
      const whole = once(1, path);
      return { quarter, whole, splu: bySplu(path) };
    });
    const of = (figure: (round: (typeof rounds)[number]) => number) => median(rounds.map(figure));
    const { whole, splu } = rounds[0];
    const first = of((round) => round.whole.first.processor);
    const growth = of((round) => round.whole.again.processor / round.quarter.again.processor);
    const megabytes = of((round) => round.whole.peakMegabytes);
    const ratio = splu && of((round) => (round.splu?.seconds ?? 0) / round.whole.solved);
    const count = (n: number) => n.toLocaleString('en');
    const line = (name: string, figure: string, limit: string, met: boolean) =>
      say(`  ${name.padEnd(58)}${figure.padEnd(14)}${limit.padEnd(16)}${met ? 'met' : 'NOT MET'}`);

    say(`Network of 500 setups: ${count(whole.points)} points, ${count(whole.readings)} readings,`);
    say(`${count(whole.unknowns)} unknowns, ${count(whole.degreesOfFreedom)} degrees of freedom;`);
    say(`seconds of the processor, median of ${ROUNDS} processes`);
    const inSeconds = `${first.toFixed(2)} s`;
    line(
      'adjusted with full statistics, first time',
      inSeconds,
      `under ${MOST_SECONDS} s`,
      first < MOST_SECONDS,
    );
    say(`  ${'by the clock'.padEnd(58)}${of((round) => round.whole.first.clock).toFixed(2)} s`);
    say(
      `  ${'again in the same process'.padEnd(58)}${of((round) => round.whole.again.processor).toFixed(2)} s`,
    );
    const least = `under ${MOST_MEGABYTES} MB`;
    line('most memory of the process', `${megabytes.toFixed(0)} MB`, least, megabytes < MOST_MEGABYTES);
    line(
      'the second time beside that of a quarter of the size',
      growth.toFixed(2),
      `under ${MOST_GROWTH}`,
      growth < MOST_GROWTH,
    );
    if (splu && ratio !== null) {
      const own = `${(of((round) => round.whole.solved) * 1000).toFixed(0)} ms`;
      const theirs = `${(of((round) => round.splu?.seconds ?? 0) * 1000).toFixed(0)} ms`;
      const name = `order, factor, solve: ${own}; scipy splu ${theirs}, ratio`;
      line(name, ratio.toFixed(2), `at least ${LEAST_RATIO}`, ratio >= LEAST_RATIO);
      const apart = splu.apart / splu.largest;
      line(
        'largest difference of the steps beside the largest step',
        apart.toExponential(0),
        'under 1e-9',
        apart < 1e-9,
      );
    } else say('  no scipy to set beside it (install python3-scipy)');
    return (
      first < MOST_SECONDS &&
      megabytes < MOST_MEGABYTES &&
      growth < MOST_GROWTH &&
      (ratio ?? 1) >= LEAST_RATIO
    );
  } finally {
    rmSync(folder, { recursive: true });
  }
}

// Alone: node --import tsx tests/bench/network.ts
if (import.meta.url === pathToFileURL(process.argv[1]).href) {
  if (!networkSection((text) => process.stdout.write(`${text}\n`))) process.exitCode = 1;
}
