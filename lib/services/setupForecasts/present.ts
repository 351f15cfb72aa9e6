import type * as z from 'zod';
import type { Forecast, FullForecast } from '@/lib/compute/survey/forecast';
import type { Blunder } from '@/lib/compute/survey/forecastBlunders';
import type { StationFit } from '@/lib/compute/survey/stationFit';
import { wrapTurn } from '@/lib/compute/units/angles';
import { toArcseconds, toAzimuth, toDegrees } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { METHOD, METHOD_VERSION } from '@/lib/services/setups/result';
import { type Words, wordsOfNote } from '@/lib/services/setups/words';
import type { SetupForecast, SetupForecasts } from '@/openapi/schemas/setupForecast';
import type { Forecasted, ToldForecast } from './forecast';
import type { ForecastGrid } from './places';
import type { ForecastBody, ForecastPlan } from './plan';
import { FORECAST_METHOD, FORECAST_METHOD_VERSION } from './result';
import { FORECAST_LIMITS, fine, summaryOf, wordsOfForecastReason, wordsOfNoStation } from './words';

export function presentForecasts(of: {
  plan: ForecastPlan;
  body: ForecastBody;
  /** All places, the best first. */
  ranked: readonly Forecasted[];
  /** Those that are told in full. */
  told: readonly ToldForecast[];
  grid: (ForecastGrid & { cells: readonly Forecasted[] }) | null;
}): z.output<typeof SetupForecasts> {
  const { plan, body, ranked, told, grid } = of;
  const { length, task, instrument } = plan;
  return {
    summary: summaryOf(ranked, plan),
    units: { length: length.unit, angle: 'deg' },
    instrument: { name: instrument.instrument.name, calibration: instrument.calibration.version },
    toleranceClass: plan.className,
    assumed: {
      faces: body.faces,
      sets: body.sets,
      observe: body.observe,
      instrumentHeight: length.out(plan.instrumentHeight),
      targetHeight: length.out(task.plan.targetHeight),
      minimumRange: length.out(task.sight.shortest),
      maximumRange: length.out(task.sight.longest),
      workRadius: length.out(task.limits.work.radius),
      atmosphereMeasured: task.atmosphereKnown,
    },
    targets: plan.targets.map(({ point, version }) => ({
      target: point.name,
      version: version.version,
      status: point.status === 'suspect' ? ('suspect' as const) : ('trusted' as const),
      easting: length.out(version.easting),
      northing: length.out(version.northing),
      elevation: length.outOrNull(version.elevation),
    })),
    forecasts: told.map((one, i) => presentForecast(one, i + 1, plan)),
    grid: grid && presentGrid(grid, plan),
    notes: notesOf(plan),
    limits: [...FORECAST_LIMITS],
    provenance: {
      method: FORECAST_METHOD,
      version: FORECAST_METHOD_VERSION,
      of: { method: METHOD, version: METHOD_VERSION },
    },
  };
}

function presentForecast(
  { place, forecast, none }: ToldForecast,
  rank: number,
  plan: ForecastPlan,
): z.output<typeof SetupForecast> {
  const { length, task } = plan;
  const head = {
    rank,
    name: place.name,
    position: {
      easting: length.out(place.easting),
      northing: length.out(place.northing),
      elevation: length.out(place.elevation),
    },
  };
  if (!forecast) {
    return {
      ...head,
      verdict: 'hold',
      verdicts: { horizontal: 'hold', vertical: 'hold' },
      reasons: none === null ? [] : [wordsOfNoStation(none)],
      notes: [],
      standardDeviations: null,
      errorEllipse: null,
      accuracyAtWork: null,
      geometry: null,
      smallestBlunder: null,
      undetected: null,
      targets: [],
    };
  }
  const { fit, work, verdict, blunders } = forecast;
  const { limits } = task;
  const hasHeight = fit.heightDetermined;
  const deviation = (i: number) => Math.sqrt(fit.station.covariance[i * 6]);
  // What was not checked is the check's own matter; nobody has shot one.
  const reasons = verdict.reasons.filter(({ code }) => code !== 'not_checked');
  return {
    ...head,
    verdict: verdict.verdict,
    verdicts: verdict.verdicts,
    reasons: reasons.map((reason) => wordsOfForecastReason(reason, length)),
    notes: notesOfForecast(forecast, plan),
    standardDeviations: {
      easting: length.out(deviation(0)),
      northing: length.out(deviation(1)),
      elevation: hasHeight ? length.out(deviation(2)) : null,
      orientationArcsec: toArcseconds(deviation(3)),
    },
    errorEllipse: {
      semiMajor: length.out(fit.ellipse95.semiMajor),
      semiMinor: length.out(fit.ellipse95.semiMinor),
      azimuth: toAzimuth(fit.ellipse95.azimuth),
      confidence: 0.95,
    },
    accuracyAtWork: {
      radius: length.out(limits.work.radius),
      horizontal: length.out(work.horizontal),
      vertical: hasHeight ? length.out(work.vertical) : null,
      confidence: 0.95,
      limits: {
        horizontal: length.out(limits.work.horizontal),
        vertical: length.out(limits.work.vertical),
      },
    },
    geometry: {
      targets: fit.marks.length,
      spreadDegrees: toDegrees(fit.geometry.spread),
      insideControl: fit.geometry.inside,
      weakestWithout: presentWeakest(fit, length),
    },
    smallestBlunder: {
      directionArcsec: hidden(blunders.largest, 'direction', toArcseconds),
      zenithArcsec: hidden(blunders.largest, 'zenith', toArcseconds),
      distance: hidden(blunders.largest, 'distance', (metres) => length.out(metres)),
    },
    undetected: {
      horizontal: length.outOrNull(blunders.undetected.horizontal),
      vertical: hasHeight ? length.outOrNull(blunders.undetected.vertical) : null,
    },
    targets: presentTargets(forecast, plan),
  };
}

/** Marks in range, the nearest first. */
function presentTargets({ fit, residuals }: FullForecast, { length, task }: ForecastPlan) {
  const { easting, northing } = fit.station;
  return fit.marks
    .map(({ name, without, published }, i) => {
      const [east, north] = [published.easting - easting, published.northing - northing];
      const residual = residuals[i];
      return {
        target: name,
        distance: length.out(Math.hypot(east, north) / task.surroundings.combinedFactor),
        azimuth: toAzimuth(wrapTurn(Math.atan2(east, north))),
        without: without && {
          horizontal: length.out(without.horizontal),
          vertical: length.outOrNull(without.vertical),
        },
        residual: residual && {
          horizontal: length.out(residual.horizontal),
          vertical: length.outOrNull(residual.vertical),
        },
      };
    })
    .sort((a, b) => a.distance - b.distance);
}

/** The mark without which the others determine no station, else the one whose loss may move it most. */
function weakestOf({ marks }: StationFit): { target: string; shift: number | null } | null {
  const needed = marks.find(({ without }) => without === null);
  if (needed) return { target: needed.name, shift: null };
  let worst: { target: string; shift: number } | null = null;
  for (const { name, without } of marks)
    if (without && without.horizontal > (worst?.shift ?? -1))
      worst = { target: name, shift: without.horizontal };
  return worst;
}

function presentWeakest(fit: StationFit, length: Lengths) {
  const weakest = weakestOf(fit);
  return weakest && { target: weakest.target, shift: length.outOrNull(weakest.shift) };
}

function hidden(largest: readonly Blunder[], kind: Blunder['kind'], out: (size: number) => number) {
  const blunder = largest.find((candidate) => candidate.kind === kind);
  return blunder ? { target: blunder.target, size: blunder.size === null ? null : out(blunder.size) } : null;
}

/** What is worth knowing of a place, though no verdict hangs on it. */
function notesOfForecast(
  { fit, residuals }: FullForecast,
  { length, task, className }: ForecastPlan,
): Words[] {
  const notes: Words[] = [];
  const { residual: limit } = task.limits;
  const wide = fit.marks.filter((_, i) => {
    const spread = residuals[i];
    return spread && (spread.horizontal > limit.horizontal || (spread.vertical ?? 0) > limit.vertical);
  });
  if (wide.length > 0) {
    const most = Math.max(...residuals.map((spread) => spread?.horizontal ?? 0));
    notes.push({
      code: 'residuals_wide',
      text: `Even without a mistake a residual of ${wide.map(({ name }) => name).join(', ')} may be beyond what ${className} allows: up to ${fine(length, most)} in plan at 95 %, ${fine(length, limit.horizontal)} allowed.`,
      action: 'Plan more sets, better reflectors or marks of better accuracy, or use a coarser class.',
    });
  }
  if (!fit.geometry.inside) {
    const text = 'The place lies outside the figure of its marks: errors grow away from them.';
    notes.push({ code: 'outside_control', text });
  }
  if (!fit.heightDetermined) notes.push(wordsOfNote({ code: 'height_undetermined' }, length));
  return notes;
}

function notesOf(plan: ForecastPlan): Words[] {
  const { task, instrument, targets, length, className, checkRequired } = plan;
  const notes: Words[] = [];
  if (!task.atmosphereKnown) {
    const ppm = task.surroundings.unknownAtmospherePpm;
    notes.push(wordsOfNote({ code: 'atmosphere_unknown', ppm }, length));
  }
  if (!instrument.calibration.accuracyStated) notes.push(wordsOfNote({ code: 'accuracy_default' }, length));
  const unstated = targets.filter(({ version }) => !version.submitted.sigma);
  if (unstated.length > 0) {
    notes.push({
      code: 'control_sigma_default',
      text: `${unstated.map(({ point }) => point.name).join(', ')}: no accuracy stated; the project’s was taken.`,
    });
  }
  for (const { point } of targets)
    if (point.status === 'suspect')
      notes.push(wordsOfNote({ code: 'mark_suspect', target: point.name }, length));
  if (checkRequired) {
    notes.push({
      code: 'check_wanted',
      text: `${className} also asks for an independent check: keep a mark outside the fit, a benchmark for the height.`,
    });
  }
  return notes;
}

function presentGrid(
  { origin, spacing, rows, columns, cells }: ForecastGrid & { cells: readonly Forecasted[] },
  { length, ground }: ForecastPlan,
) {
  const map = (value: (forecast: Forecast) => number | null) =>
    cells.map(({ forecast }) => (forecast ? value(forecast) : null));
  const deviation = (fit: StationFit, i: number) => Math.sqrt(fit.station.covariance[i * 6]);
  const height = (fit: StationFit, metres: number) => (fit.heightDetermined ? length.out(metres) : null);
  return {
    origin: { easting: length.out(origin.easting), northing: length.out(origin.northing) },
    spacing: length.out(spacing),
    rows,
    columns,
    elevation: length.out(ground),
    verdict: cells.map(({ forecast }) => forecast?.verdict.verdict ?? ('hold' as const)),
    targets: cells.map(({ marks }) => marks),
    ellipseSemiMajor: map(({ fit }) => length.out(fit.ellipse95.semiMajor)),
    elevationDeviation: map(({ fit }) => height(fit, deviation(fit, 2))),
    orientationArcsec: map(({ fit }) => toArcseconds(deviation(fit, 3))),
    workHorizontal: map(({ work }) => length.out(work.horizontal)),
    workVertical: map(({ fit, work }) => height(fit, work.vertical)),
    weakestShift: map(({ fit }) => length.outOrNull(weakestOf(fit)?.shift ?? null)),
  };
}
