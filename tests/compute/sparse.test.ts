import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { assemblyTree } from '@/lib/compute/adjustment/assemblyTree';
import { BlockNormals } from '@/lib/compute/adjustment/blockNormals';
import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { minimumDegreeOrder } from '@/lib/compute/adjustment/minimumDegree';
import { type AdjustmentModel, SingularError } from '@/lib/compute/adjustment/model';
import { movableUnknowns } from '@/lib/compute/adjustment/movable';
import { reliability } from '@/lib/compute/adjustment/reliability';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import { snoop } from '@/lib/compute/adjustment/snooping';
import { solve } from '@/lib/compute/adjustment/solve';
import { SparseNormals } from '@/lib/compute/adjustment/sparseNormals';
import { ErrorTests } from '@/lib/compute/adjustment/suspects';
import { type Chance, seededChance, wholeBetween } from '@/tests/simulator/chance';

/** A linear model of rows with random entries. */
function linearModel(
  rowsOf: readonly (readonly number[])[],
  unknowns: number,
  shared: number,
  blocks: readonly number[],
  chance: Chance,
): AdjustmentModel {
  const rows = new RowBuilder();
  for (const columns of rowsOf) rows.add(columns, 0.5 + chance.uniform());
  const structure = rows.build();
  const entries = Float64Array.from(structure.columns, () => chance.normal());
  const values = Float64Array.from(rowsOf, () => chance.normal());
  return {
    ...structure,
    unknowns,
    shared,
    blocks: Int32Array.from(blocks),
    linearise(x, coefficients, misclosures) {
      coefficients.set(entries);
      for (let i = 0; i < values.length; i++) {
        misclosures[i] = values[i];
        for (let e = structure.rowStart[i]; e < structure.rowStart[i + 1]; e++) {
          misclosures[i] -= entries[e] * x[structure.columns[e]];
        }
      }
    },
  };
}

/** Any model of shared unknowns and blocks, determined by pseudo-observations of all unknowns. */
function anyModel(seed: number): AdjustmentModel {
  const chance = seededChance(seed);
  const shared = wholeBetween(chance, 3, 40);
  const blocks = [shared];
  for (let b = wholeBetween(chance, 0, 4); b > 0; b--)
    blocks.push(blocks.at(-1)! + wholeBetween(chance, 1, 4));
  const unknowns = blocks.at(-1)!;
  const rows: number[][] = Array.from({ length: unknowns }, (_, i) => [i]);
  for (let i = wholeBetween(chance, 0, 3 * unknowns); i > 0; i--) {
    const columns = new Set<number>();
    for (let k = wholeBetween(chance, 1, 4); k > 0; k--) columns.add(wholeBetween(chance, 0, shared - 1));
    if (blocks.length > 1 && chance.uniform() < 0.6) {
      const b = wholeBetween(chance, 0, blocks.length - 2);
      columns.add(wholeBetween(chance, blocks[b], blocks[b + 1] - 1));
    }
    rows.push([...columns]);
  }
  return linearModel(rows, unknowns, shared, blocks, chance);
}

/** One large difference of two arrays. */
function farthest(a: ArrayLike<number>, b: ArrayLike<number>): number {
  expect(a.length).toBe(b.length);
  return Array.from(a).reduce((most, value, i) => Math.max(most, Math.abs(value - b[i])), 0);
}

const anySeed = fc.integer({ min: 1, max: 1_000_000 });
const RUNS = { numRuns: 150, seed: 5 };

describe('the sparse elimination', () => {
  it('gives steps, decrements and cofactors of the dense one, with a block left out too', () => {
    fc.assert(
      fc.property(anySeed, (seed) => {
        const model = anyModel(seed);
        const coefficients = new Float64Array(model.columns.length);
        const misclosures = new Float64Array(model.weights.length);
        model.linearise(new Float64Array(model.unknowns), coefficients, misclosures);
        for (const without of model.blocks.length > 1 ? [-1, 0] : [-1]) {
          const [dense, sparse] = [new BlockNormals(model), new SparseNormals(model)];
          const steps = [new Float64Array(model.unknowns), new Float64Array(model.unknowns)];
          dense.build(coefficients, misclosures, without);
          sparse.build(coefficients, misclosures, without);
          const decrement = dense.solve(steps[0], without);
          expect(Math.abs(sparse.solve(steps[1], without) - decrement)).toBeLessThan(1e-9 * (1 + decrement));
          expect(farthest(steps[0], steps[1])).toBeLessThan(1e-9);
          const [a, b] = [dense.cofactors(without), sparse.cofactors()];
          const all = [...Array(model.unknowns).keys()];
          const took = all.filter((i) => without < 0 || i < model.blocks[0] || i >= model.blocks[1]);
          for (const i of took) {
            expect(
              farthest(
                took.map((j) => a.of(i, j)),
                took.map((j) => b.of(i, j)),
              ),
            ).toBeLessThan(1e-9);
          }
          const vector = Float64Array.from(all, (i) => (took.includes(i) ? Math.sin(i) : 0));
          const images = [a.times(vector), b.times(vector)];
          expect(
            farthest(
              took.map((i) => images[0][i]),
              took.map((i) => images[1][i]),
            ),
          ).toBeLessThan(1e-9);
        }
        const [dense, sparse] = [new BlockNormals(model), new SparseNormals(model)];
        dense.build(coefficients, misclosures);
        sparse.build(coefficients, misclosures);
        for (let block = 0; block + 1 < model.blocks.length; block++) {
          expect(farthest(dense.stepWithout(block), sparse.stepWithout(block))).toBeLessThan(1e-9);
          expect(farthest(dense.cofactorsWithout(block), sparse.cofactorsWithout(block))).toBeLessThan(1e-9);
        }
      }),
      RUNS,
    );
  });

  it('orders every unknown once, and a grid with no more fill than nested dissection', () => {
    const side = 32;
    const rows = new RowBuilder();
    for (let r = 0; r < side; r++) {
      for (let c = 0; c < side; c++) {
        if (c + 1 < side) rows.add([r * side + c, r * side + c + 1], 1);
        if (r + 1 < side) rows.add([r * side + c, (r + 1) * side + c], 1);
      }
    }
    const { rowStart, columns } = rows.build();
    const order = minimumDegreeOrder(side * side, rowStart, columns);
    expect([...order].sort((a, b) => a - b)).toEqual([...Array(side * side).keys()]);
    const { fronts, first, boundaryStart } = assemblyTree(side * side, rowStart, columns);
    let entries = 0;
    for (let f = 0; f < fronts; f++) {
      const size = first[f + 1] - first[f];
      entries += (size * (size + 1)) / 2 + size * (boundaryStart[f + 1] - boundaryStart[f]);
    }
    // 31/4·n²·log₂n for an n × n grid (George 1973, "Nested dissection of a regular finite element mesh").
    expect(entries).toBeLessThan((31 / 4) * side * side * Math.log2(side));
  });

  it('names every unknown that nothing determines, and none that is determined', () => {
    const chance = seededChance(9);
    // A chain 0…299 that is held at one end, and a chain 300…309 that floats.
    const differences: number[][] = [[0]];
    for (let i = 1; i < 310; i++) if (i !== 300) differences.push([i - 1, i]);
    const model = linearModel(differences, 310, 310, [310], chance);
    const floating = Array.from({ length: 10 }, (_, i) => 300 + i);
    expect(movableUnknowns(model, new Float64Array(310))).toEqual(floating);
    try {
      solve(model, new Float64Array(310));
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(SingularError);
      expect((error as SingularError).movable).toEqual(floating);
    }
  });

  it('has redundancy numbers that sum to the degrees of freedom', () => {
    const chance = seededChance(12);
    const rows = Array.from({ length: 900 }, (_, i) =>
      i < 300 ? [i] : [...new Set([0, 1, 2].map(() => wholeBetween(chance, 0, 299)))],
    );
    const solution = solve(linearModel(rows, 300, 300, [300], chance), new Float64Array(300));
    const { redundancy } = reliability(solution, new Cofactors(solution));
    expect(redundancy.reduce((sum, r) => sum + r, 0)).toBeCloseTo(600, 8);
  });
});

describe('iterated snooping', () => {
  it('removes what a full solution after each removal would remove, at the same standardised residuals', () => {
    const chance = seededChance(3);
    const rows = Array.from({ length: 700 }, (_, i) =>
      i < 230 ? [i] : [...new Set([0, 1, 2].map(() => wholeBetween(chance, 0, 229)))],
    );
    const model = linearModel(rows, 230, 230, [230], chance);
    const wrong = new Map([600, 250, 333, 420, 501].map((row, i) => [row, (i % 2 ? -1 : 1) * (12 + 3 * i)]));
    const blundered: AdjustmentModel = {
      ...model,
      linearise(x, coefficients, misclosures) {
        model.linearise(x, coefficients, misclosures);
        for (const [row, error] of wrong) misclosures[row] += error;
      },
    };
    const suspects = rows.map((_, row) => ({ rows: [row], errors: [[1]] }));
    const start = new Float64Array(230);
    const solution = solve(blundered, start);
    const { removals, ended } = snoop(solution, new Cofactors(solution), suspects, 20);

    const weights = model.weights.slice();
    const expected: { suspect: number; standardised: number; estimate: number }[] = [];
    for (;;) {
      const again = solve({ ...blundered, weights }, start);
      const tests = new ErrorTests(suspects, again, new Cofactors(again));
      let worst = { suspect: -1, standardised: 3.29, estimate: 0 };
      rows.forEach((_, suspect) => {
        if (weights[suspect] === 0) return;
        const { standardised, estimate } = tests.test(suspect);
        if (Math.abs(standardised) > Math.abs(worst.standardised))
          worst = { suspect, standardised, estimate };
      });
      if (worst.suspect < 0) break;
      expected.push(worst);
      weights[worst.suspect] = 0;
    }
    expect(ended).toBe('clean');
    expect(removals.map(({ suspect }) => suspect)).toEqual(expected.map(({ suspect }) => suspect));
    removals.forEach(({ standardised, estimate }, i) => {
      expect(standardised).toBeCloseTo(expected[i].standardised, 8);
      expect(estimate).toBeCloseTo(expected[i].estimate, 8);
    });
    for (const row of wrong.keys()) expect(removals.map(({ suspect }) => suspect)).toContain(row);
  });

  it('takes nothing out that nothing controls, and says what would show in the same way', () => {
    const rows = [[0], [0], [1], [0, 1]];
    const structure = new RowBuilder();
    for (const columns of rows) structure.add(columns, 1);
    const values = [0, 0, 0, 50];
    const model: AdjustmentModel = {
      ...structure.build(),
      unknowns: 2,
      shared: 2,
      blocks: Int32Array.of(2),
      linearise(x, coefficients, misclosures) {
        coefficients.set([1, 1, 1, 1, 1]);
        const computed = [x[0], x[0], x[1], x[0] + x[1]];
        for (let i = 0; i < 4; i++) misclosures[i] = values[i] - computed[i];
      },
    };
    const solution = solve(model, new Float64Array(2));
    const suspects = rows.map((_, row) => ({ rows: [row], errors: [[1]] }));
    const { removals, ended } = snoop(solution, new Cofactors(solution), suspects, 4);
    // The height of 1 and the sum test each other alone: after one is out, the other determines 1 by itself.
    expect(ended).toBe('clean');
    expect(removals).toHaveLength(1);
    expect([removals[0].suspect, ...removals[0].alternatives].sort()).toEqual([2, 3]);
  });
});
