import type { FittedOccupation, StationFit } from './stationFit';
import { type Axis, type Lower, MARKS_WANTED, type SetupLimits } from './verdict';

type OverMark = StationFit & { occupied: FittedOccupation };

/**
 * What is wrong with a setup over a mark: distances and heights to its backsights beyond the class' limits. Where the
 * limit lies within 2u of the difference, coordinates and readings may be right as well: that holds, and fails nobody.
 */
export function judgeBacksights(fit: StationFit, limits: SetupLimits, lower: Lower): void {
  for (const { target, distance, height } of fit.backsights) {
    for (const [axis, comparison] of [
      ['horizontal', distance],
      ['vertical', height],
    ] as const) {
      const limit = limits.residual[axis];
      if (!comparison || Math.abs(comparison.difference) <= limit) continue;
      const { difference: value, uncertainty } = comparison;
      if (Math.abs(value) - 2 * uncertainty > limit)
        lower([axis], 'fail', { code: 'backsight_over', axis, target, value, limit });
      else lower([axis], 'hold', { code: 'backsight_unproven', axis, target, value, uncertainty, limit });
    }
  }
}

/**
 * What is not proven of a setup over a mark. A single backsight orients the circle and nothing confirms it: its
 * distance says that it is the right mark along the line, not across it. Two and more confirm each other; that the
 * instrument stands over its own mark is proven by their distances. An agreed check on another mark proves both.
 */
export function judgeBacksightProof(
  fit: OverMark,
  limits: SetupLimits,
  agreed: (axis: Axis) => boolean,
  lower: Lower,
): void {
  if (!agreed('horizontal')) judgePlace(fit, limits.residual.horizontal, lower);
  if (!agreed('vertical')) judgeHeight(fit, limits.residual.vertical, lower);
}

function judgePlace({ occupied, marks, station }: OverMark, limit: number, lower: Lower): void {
  const axis = 'horizontal';
  const oriented = marks.filter(
    ({ status, readings }) => status === 'trusted' && readings.some(({ kind }) => kind === 'direction'),
  );
  if (oriented.length < 2) {
    const [mark = null] = oriented;
    const measured = mark?.readings.some(({ kind }) => kind === 'distance') ?? false;
    lower([axis], 'hold', { code: 'orientation_unproven', target: mark?.name ?? null, measured });
    return;
  }
  const worst = widest(oriented, ({ without, published }) => {
    if (!without) return Number.POSITIVE_INFINITY;
    const lever = Math.hypot(published.easting - station.easting, published.northing - station.northing);
    return Math.abs(without.orientation) * lever + without.horizontal;
  });
  if (worst.value === Number.POSITIVE_INFINITY) {
    lower([axis], 'hold', { code: 'single_mark_needed', axis, target: worst.of.name });
  } else if (worst.value > limit) {
    const turn = worst.of.without!.orientation;
    lower([axis], 'hold', {
      code: 'backsights_disagree',
      target: worst.of.name,
      value: worst.value,
      turn,
      limit,
    });
  }
  if (occupied.status !== 'trusted') {
    lower([axis], 'hold', { code: 'occupied_suspect', target: occupied.name });
  } else if (!occupied.without) lower([axis], 'hold', { code: 'occupied_unproven', target: occupied.name });
  else if (occupied.without.horizontal > limit) {
    const value = occupied.without.horizontal;
    lower([axis], 'hold', { code: 'single_mark_dominates', axis, target: occupied.name, value, limit });
  }
}

function judgeHeight({ occupied, marks }: OverMark, limit: number, lower: Lower): void {
  const axis = 'vertical';
  const levelled = marks.filter((mark) => mark.vertical && mark.status === 'trusted');
  const carries = occupied.published.elevation !== null && occupied.status === 'trusted';
  const count = levelled.length + Number(carries);
  if (count < MARKS_WANTED.vertical) {
    lower([axis], 'hold', { code: 'too_few_marks', axis, count, limit: MARKS_WANTED.vertical });
    return;
  }
  const shifts = [
    ...levelled.map(({ name, without }) => ({ name, shift: without?.vertical ?? null })),
    ...(carries ? [{ name: occupied.name, shift: occupied.heightWithout }] : []),
  ];
  const worst = widest(shifts, ({ shift }) => (shift === null ? 0 : Math.abs(shift)));
  if (worst.value > limit) {
    const { name: target } = worst.of;
    lower([axis], 'hold', { code: 'single_mark_dominates', axis, target, value: worst.value, limit });
  }
}

function widest<T>(list: readonly T[], of: (item: T) => number): { of: T; value: number } {
  return list
    .map((item) => ({ of: item, value: of(item) }))
    .reduce((worst, one) => (one.value > worst.value ? one : worst));
}
