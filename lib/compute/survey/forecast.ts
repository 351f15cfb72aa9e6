import { type Blunders, blundersOf } from './forecastBlunders';
import { type ResidualSpread, residualSpreads } from './forecastResiduals';
import { shiftSpreads } from './forecastShifts';
import { type AxisPlace, errorlessShots, type ShootingPlan } from './forecastShots';
import type { InstrumentAccuracy } from './instrument';
import type { ControlMark } from './shots';
import { type AdjustedStation, adjustStation, StationError } from './stationAdjustment';
import { describeStation, type StationFit } from './stationFit';
import type { Surroundings } from './surroundings';
import { judgeSetup, type SetupLimits, type SetupVerdict } from './verdict';
import { accuracyAtWork, type WorkAccuracy } from './workAccuracy';

/** What stands where a forecast states nothing, m (common practice). */
export const FORECAST_DEFAULTS = {
  /** Nearer, an instrument neither focuses nor measures. */
  shortestSight: 2,
  /** Beyond, refraction near the ground takes over. */
  longestSight: 300,
  instrumentHeight: 1.6,
};

export interface ForecastTask {
  /** Control that may be shot; from each place, what lies between the shortest and the longest sight. */
  targets: readonly ControlMark[];
  plan: ShootingPlan;
  /** Shortest and longest sight, grid distance, m. */
  sight: { shortest: number; longest: number };
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Whether temperature and pressure will be read. */
  atmosphereKnown: boolean;
  /** What the work asks; whether it asks for a check is left to the check. */
  limits: SetupLimits;
}

export interface Forecast {
  /** How its station moves without a mark is the 95 % spread: nobody has shot any yet. */
  fit: StationFit;
  work: WorkAccuracy;
  /** What the class says of the geometry: never that it fails, for nothing can be wrong yet. */
  verdict: SetupVerdict;
}

/** The same with what takes as long again to compute, and a map has no use for. */
export interface FullForecast extends Forecast {
  blunders: Blunders;
  /** What residuals may be without any mistake, in the order of the fit's marks. */
  residuals: (ResidualSpread | null)[];
}

/** A place from which no station comes of it. */
export interface NoForecast {
  code: StationError['code'];
}

/** Marks that can be sighted from a place. */
export function inSight(place: AxisPlace, { targets, sight }: ForecastTask): ControlMark[] {
  return targets.filter((mark) => {
    const distance = Math.hypot(mark.easting - place.easting, mark.northing - place.northing);
    return distance >= sight.shortest && distance <= sight.longest;
  });
}

/**
 * What a free station will be good for at a place where nobody stands yet: the adjustment of the shots that an
 * instrument without error would take there, with the weights that real ones would get. Least-squares covariances
 * depend on the geometry and the weights alone, so those of the real fit will be the same (Grafarend and Sansò,
 * Optimization and Design of Geodetic Networks: design of the first order). What stands between the instrument and
 * a mark is not known.
 */
export function forecastSetup(place: AxisPlace, task: ForecastTask): Forecast | NoForecast {
  const adjusted = adjustAt(place, task);
  return 'code' in adjusted ? adjusted : judge(adjusted, task);
}

/** The same in full. */
export function forecastInFull(place: AxisPlace, task: ForecastTask): FullForecast | NoForecast {
  const adjusted = adjustAt(place, task);
  if ('code' in adjusted) return adjusted;
  const forecast = judge(adjusted, task);
  const residuals = residualSpreads(adjusted, forecast.fit.station);
  return { ...forecast, blunders: blundersOf(adjusted), residuals };
}

function adjustAt(place: AxisPlace, task: ForecastTask): AdjustedStation | NoForecast {
  const { plan, accuracy, surroundings } = task;
  const marks = inSight(place, task);
  const shots = errorlessShots(place, marks, plan, surroundings);
  const control = new Map(marks.map((mark) => [mark.name, mark]));
  try {
    const ppm = task.atmosphereKnown ? 0 : null;
    return adjustStation({ shots, control, accuracy, surroundings, ppm });
  } catch (error) {
    if (error instanceof StationError) return { code: error.code };
    throw error;
  }
}

function judge(adjusted: AdjustedStation, { accuracy, surroundings, limits }: ForecastTask): Forecast {
  const described = describeStation(adjusted);
  const spreads = shiftSpreads(adjusted, described.station);
  const fit = { ...described, marks: described.marks.map((mark, i) => ({ ...mark, without: spreads[i] })) };
  const work = accuracyAtWork(fit.station, accuracy.zenith, limits.work.radius, surroundings);
  return { fit, work, verdict: judgeSetup(fit, { ...limits, checkRequired: false }, [], work) };
}

/** How much of what the work allows is used up at its working radius, the worse of plan and height: ranks places. */
export function burden({ work, fit }: Forecast, limits: SetupLimits): number {
  const vertical = fit.heightDetermined ? work.vertical / limits.work.vertical : Number.POSITIVE_INFINITY;
  return Math.max(work.horizontal / limits.work.horizontal, vertical);
}
