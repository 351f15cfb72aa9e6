export interface Figure {
  name: string;
  /** Rounds of the figure and, where it is a ratio, of its baseline. */
  measured: number[];
  unit: string;
  baseline: { name: string; measured: number[] } | null;
  /** The least ratio to the baseline; without one, the least figure. */
  target: number;
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/** The median of the rounds, or of the ratios of rounds that ran one after the other. */
function figureOf({ measured, baseline }: Figure): number {
  return median(baseline ? measured.map((value, round) => value / baseline.measured[round]) : measured);
}

export function isMet(figure: Figure): boolean {
  return figureOf(figure) >= figure.target;
}

const whole = (value: number) => Math.round(value).toLocaleString('en');

/** A table of figures, baselines, ratios, targets and whether each is met. */
export function table(figures: readonly Figure[]): string {
  const rows = figures.map((figure) => {
    const { name, measured, unit, baseline, target } = figure;
    return [
      name,
      `${whole(median(measured))} ${unit}`,
      baseline ? `${whole(median(baseline.measured))} ${baseline.name}` : '',
      baseline ? figureOf(figure).toFixed(3) : '',
      baseline ? target.toFixed(2) : whole(target),
      isMet(figure) ? 'met' : 'NOT MET',
    ];
  });
  const all = [['', 'measured', 'baseline', 'ratio', 'at least', ''], ...rows];
  const widths = all[0].map((_, column) => Math.max(...all.map((row) => row[column].length)));
  return all
    .map((row) =>
      row
        .map((cell, column) => cell.padEnd(widths[column]))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}
