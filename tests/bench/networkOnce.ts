import { writeFileSync } from 'node:fs';
import { SparseNormals } from '@/lib/compute/adjustment/sparseNormals';
import { adjustNetwork } from '@/lib/compute/survey/network';
import { networkModel } from '@/lib/compute/survey/networkModel';
import { setupReadings } from '@/lib/compute/survey/networkReadings';
import { networkStart } from '@/lib/compute/survey/networkStart';
import { networkAsEngine } from '@/tests/compute/networkAsEngine';
import { seededChance } from '@/tests/simulator/chance';
import { simulateNetwork } from '@/tests/simulator/siteNetwork';

/**
 * Adjusts one simulated network in a process of its own and prints what it took: the first time, as a job meets it, and
 * again. With a path, the normal equations are left there for another solver.
 *
 * Arguments: share of the full size, path.
 */
const [share, path] = [Number(process.argv[2]), process.argv[3] as string | undefined];
const network = simulateNetwork(
  {
    ...{ setups: 500 * share, points: 2000 * share, sightsOfPoint: 2, faces: ['left', 'right'], sets: 1 },
    ...{ occupiedEvery: 10, controlEvery: 25, controlSigma: 0.003 },
    ...{ roverEvery: 50, levelled: 200 * share, baselines: 50 * share },
  },
  seededChance(17),
);
const input = networkAsEngine(network);

/** By the clock, and of the processor: a machine that does other work changes the second little. */
const seconds = (work: () => void) => {
  const [began, used] = [performance.now(), process.cpuUsage()];
  work();
  const { user, system } = process.cpuUsage(used);
  return { clock: (performance.now() - began) / 1000, processor: (user + system) / 1e6 };
};
const result = { points: 0, readings: 0, unknowns: 0, degreesOfFreedom: 0 };
const adjust = () => {
  const adjusted = adjustNetwork(input);
  result.points = adjusted.points.length;
  result.readings = adjusted.observations.filter(({ shots }) => shots.length > 0).length;
  result.unknowns = adjusted.unknowns;
  result.degreesOfFreedom = adjusted.test.degreesOfFreedom;
};
const first = seconds(adjust);
const again = seconds(adjust);
const peakMegabytes = process.resourceUsage().maxRSS / 1000;

/** Analysis, factorisation and one solution, the part that another solver can be set beside. */
const readings = input.setups.map(setupReadings);
const model = networkModel(input, readings, networkStart(input, readings));
const coefficients = new Float64Array(model.columns.length);
const misclosures = new Float64Array(model.weights.length);
model.linearise(model.start, coefficients, misclosures);
const step = new Float64Array(model.unknowns);
const solved = [1, 2, 3].map(() =>
  seconds(() => {
    const normals = new SparseNormals(model);
    normals.build(coefficients, misclosures);
    normals.solve(step);
  }),
);
if (path) {
  const { rowStart, columns, weights } = model;
  const rows = weights.length;
  const header = Int32Array.of(rows, model.unknowns, columns.length);
  const parts = [header, rowStart, columns, coefficients, weights, misclosures, step];
  writeFileSync(
    path,
    Buffer.concat(parts.map((part) => Buffer.from(part.buffer, part.byteOffset, part.byteLength))),
  );
}
process.stdout.write(
  JSON.stringify({
    ...result,
    first,
    again,
    solved: Math.min(...solved.map(({ processor }) => processor)),
    peakMegabytes,
  }),
);
