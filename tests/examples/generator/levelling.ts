import { type Chance, chance } from './chance';
import { truePlace } from './site';
import { FOOT } from './totalStation';

/** The level of the site, its two-peg test of the morning, and the run between both benchmarks. */

/** Rise of the line of sight, and spread of a reading at one metre, m: it grows with the root of the distance. */
const COLLIMATION = 0.00004;
const SPREAD = 0.00004;

export function level() {
  return { name: 'LV-1', kind: 'level', serial: '7-3320', levelSigmaMmPerKm: 1 };
}

function reading(drawn: Chance, axis: number, ground: number, distance: number): number {
  const spread = (SPREAD * Math.sqrt(distance * FOOT)) / FOOT;
  return Number((axis - ground + COLLIMATION * distance + drawn.normal(spread)).toFixed(3));
}

/** From the middle of the pegs and from beside A, each twice. */
function pegSetups(drawn: Chance) {
  const [a, b] = [1236.4, 1237.13];
  const standing = (axis: number, distanceA: number, distanceB: number) => ({
    readingA: reading(drawn, axis, a, distanceA),
    distanceA,
    readingB: reading(drawn, axis, b, distanceB),
    distanceB,
  });
  return [
    standing(1241.31, 80, 80),
    standing(1241.22, 80, 80),
    standing(1241.54, 12, 148),
    standing(1241.47, 12, 148),
  ];
}

/** From BM-1 at the gate by two turning points to BM-2 on the north bank. */
function runSights(drawn: Chance) {
  const ground = {
    'BM-1': truePlace('BM-1').elevation,
    'TP-1': 1236.952,
    'TP-2': 1238.064,
    'BM-2': truePlace('BM-2').elevation,
  };
  const legs = [
    { from: 'BM-1', to: 'TP-1', axis: 1241.06, back: 71, fore: 64 },
    { from: 'TP-1', to: 'TP-2', axis: 1242.38, back: 76, fore: 73 },
    { from: 'TP-2', to: 'BM-2', axis: 1243.17, back: 62, fore: 69 },
  ] as const;
  const read = legs.map(({ from, to, axis, back, fore }) => ({
    backsight: { backsight: reading(drawn, axis, ground[from], back), backsightDistance: back },
    foresight: { foresight: reading(drawn, axis, ground[to], fore), foresightDistance: fore },
  }));
  return [
    { point: 'BM-1', ...read[0].backsight },
    { point: 'TP-1', ...read[0].foresight, ...read[1].backsight },
    { point: 'TP-2', ...read[1].foresight, ...read[2].backsight },
    { point: 'BM-2', ...read[2].foresight },
  ];
}

export function levelRun() {
  const drawn = chance('levelling');
  const run = { clientId: 'lv-1', from: 'BM-1', to: 'BM-2', instrument: 'LV-1', observedAt: 'NOW' };
  return {
    clientId: 'level-run',
    units: { length: 'ft' },
    pegTests: [{ clientId: 'peg-1', instrument: 'LV-1', observedAt: 'NOW', setups: pegSetups(drawn) }],
    levelRuns: [{ ...run, sights: runSights(drawn) }],
  };
}
