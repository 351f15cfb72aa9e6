import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';

export interface SmallObservation {
  /** Unknowns that the observation touches. */
  columns: number[];
  value: number;
  sigma: number;
  /** Computed value and its derivatives by the columns. */
  at(x: Float64Array): { value: number; derivatives: number[] };
  /** The value is an angle: differences are wrapped. */
  angle?: boolean;
}

/** A textbook problem for the engine: a few unknowns, none in blocks. */
export function smallModel(unknowns: number, observations: readonly SmallObservation[]): AdjustmentModel {
  const rows = new RowBuilder();
  for (const { columns, sigma } of observations) rows.add(columns, sigma);
  const structure = rows.build();
  return {
    ...structure,
    unknowns,
    shared: unknowns,
    blocks: Int32Array.of(unknowns),
    linearise(x, coefficients, misclosures) {
      observations.forEach(({ value, angle, at }, i) => {
        const computed = at(x);
        const difference = value - computed.value;
        misclosures[i] = angle ? Math.atan2(Math.sin(difference), Math.cos(difference)) : difference;
        coefficients.set(computed.derivatives, structure.rowStart[i]);
      });
    },
  };
}

/** value = constant + Σ coefficientᵢ·x[columnᵢ]. */
export function linear(
  terms: Record<number, number>,
  value: number,
  sigma: number,
  constant = 0,
): SmallObservation {
  const columns = Object.keys(terms).map(Number);
  const derivatives = Object.values(terms);
  return {
    columns,
    value,
    sigma,
    at: (x) => ({
      value: columns.reduce((sum, column, i) => sum + derivatives[i] * x[column], constant),
      derivatives,
    }),
  };
}
