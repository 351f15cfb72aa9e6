import { chance } from './chance';
import { GOOD, groundShot, standingAtGoodSetup, UNITS } from './setups';
import { finishElevation, LAYER, PAD } from './site';

/** The lot of grade shots and the bench checks of the dozer. */

const MACHINE = 'DZ-4';
const COLUMNS = 7;
const ROWS = 6;

/** Where the dozer has not been yet: how high the ground stands there, by row and column of the lot, ft. */
const HIGH_CORNER: Record<string, number> = {
  '4/5': 0.11,
  '4/6': 0.13,
  '5/6': 0.17,
  '5/5': 0.14,
  '5/4': 0.1,
};

/** Walked to and fro, row by row from the south: the rows turn at the high corner. */
export function gradeShots() {
  const ground = chance('ground of the lot');
  const from = standingAtGoodSetup('grade shots');
  const [dE, dN] = [(PAD.east - PAD.west - 30) / (COLUMNS - 1), (PAD.north - PAD.south - 20) / (ROWS - 1)];
  const shots = [];
  for (let row = 0; row < ROWS; row++) {
    for (let step = 0; step < COLUMNS; step++) {
      const column = row % 2 === 0 ? step : COLUMNS - 1 - step;
      const easting = PAD.west + 15 + column * dE + ground.between(-2, 2);
      const northing = PAD.south + 10 + row * dN + ground.between(-2, 2);
      const high = HIGH_CORNER[`${row}/${column}`] ?? 0;
      const elevation =
        finishElevation(easting, northing) + LAYER.offset - 0.015 + high + ground.normal(0.02);
      shots.push({
        clientId: `g-${String(shots.length + 1).padStart(2, '0')}`,
        layer: LAYER.name,
        setup: GOOD.clientId,
        observedAt: 'NOW',
        shot: groundShot(from, { easting, northing, elevation }),
      });
    }
  }
  const { length, angle } = UNITS;
  return { clientId: 'grade-shots', units: { length, angle }, gradeShots: shots };
}

function benchCheck(clientId: string, elevations: readonly number[], more = {}) {
  return {
    clientId,
    units: { length: UNITS.length },
    benchChecks: [
      {
        clientId,
        machine: MACHINE,
        setup: GOOD.clientId,
        benchmark: 'BM-2',
        edge: 'left',
        elevations,
        layer: LAYER.name,
        activeOffset: LAYER.offset,
        tolerance: 0.05,
        ...more,
        observedAt: 'NOW',
      },
    ],
  };
}

/** The edge stands on BM-2, 1238.437 ft, and the machine shows 0.12 ft less. */
export function benchBefore() {
  return benchCheck('bench-before', [1238.31, 1238.32, 1238.32]);
}

export function benchAfter() {
  return benchCheck('bench-after', [1238.42, 1238.43, 1238.43], { correctionAppliedFor: 'bench-before' });
}

/** The setup is put in force for the dozer, with what it is to cut. */
export function release() {
  return { machine: MACHINE, layer: LAYER.name, offset: LAYER.offset, validMinutes: 600 };
}

export function machine() {
  return { name: MACHINE, kind: 'machine', serial: 'dozer, blade 14 ft' };
}
