import type { AdjustmentModel } from './model';

/** ∂f/∂∇ of one observation by one suspected fault: a constant. */
export interface SuspectedEntry {
  row: number;
  fault: number;
  coefficient: number;
}

/**
 * A model with suspected faults ∇ as further unknowns, f(x) + C∇: the alternative hypothesis of a test for errors in
 * the observations (Baarda 1968, "A testing procedure for use in geodetic networks"; Teunissen, Testing Theory,
 * ch. 4). The faults become the last of the shared unknowns, [model.shared, model.shared + count).
 *
 * @param entries coefficients C, any number a row
 */
export function withSuspicions(
  model: AdjustmentModel,
  count: number,
  entries: readonly SuspectedEntry[],
): AdjustmentModel {
  const rows = model.weights.length;
  const ofRow: SuspectedEntry[][] = Array.from({ length: rows }, () => []);
  for (const entry of entries) ofRow[entry.row].push(entry);

  const rowStart = new Int32Array(rows + 1);
  const columns = new Int32Array(model.columns.length + entries.length);
  for (let i = 0; i < rows; i++) {
    let e = rowStart[i];
    for (let b = model.rowStart[i]; b < model.rowStart[i + 1]; b++) {
      const column = model.columns[b];
      columns[e++] = column < model.shared ? column : column + count;
    }
    for (const { fault } of ofRow[i]) columns[e++] = model.shared + fault;
    rowStart[i + 1] = e;
  }

  const own = new Float64Array(model.unknowns);
  const ownCoefficients = new Float64Array(model.columns.length);
  return {
    unknowns: model.unknowns + count,
    shared: model.shared + count,
    blocks: model.blocks.map((start) => start + count),
    rowStart,
    columns,
    weights: model.weights,
    linearise(x, coefficients, misclosures) {
      own.set(x.subarray(0, model.shared));
      own.set(x.subarray(model.shared + count), model.shared);
      model.linearise(own, ownCoefficients, misclosures);
      for (let i = 0; i < rows; i++) {
        let e = rowStart[i];
        for (let b = model.rowStart[i]; b < model.rowStart[i + 1]; b++)
          coefficients[e++] = ownCoefficients[b];
        for (const { fault, coefficient } of ofRow[i]) {
          coefficients[e++] = coefficient;
          misclosures[i] -= coefficient * x[model.shared + fault];
        }
      }
    },
  };
}

/** Start values of the model with suspicions from those of the model itself: every fault begins at zero. */
export function suspiciousStart(
  { shared }: AdjustmentModel,
  start: Float64Array,
  count: number,
): Float64Array {
  const result = new Float64Array(start.length + count);
  result.set(start.subarray(0, shared));
  result.set(start.subarray(shared), shared + count);
  return result;
}
