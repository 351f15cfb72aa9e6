import { setImmediate } from 'node:timers/promises';
import {
  burden,
  type Forecast,
  type FullForecast,
  forecastInFull,
  forecastSetup,
  inSight,
  type NoForecast,
} from '@/lib/compute/survey/forecast';
import { invalid } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Turns } from '@/lib/turns';
import type { ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setupForecasts';
import { candidatePlaces, type ForecastGrid, type ForecastPlace, gridOf, gridPlaces } from './places';
import { type ForecastBody, type ForecastPlan, readPlan } from './plan';
import { presentForecasts } from './present';

type Ask = typeof contract.forecastSetups;

/** A place with what would come of it. */
export interface Forecasted {
  place: ForecastPlace;
  /** Marks in range. */
  marks: number;
  forecast: Forecast | null;
  /** Why no station comes of it, where none does. */
  none: NoForecast['code'] | null;
}

/** The same, told in full. */
export interface ToldForecast extends Forecasted {
  forecast: FullForecast | null;
}

/** Sights of all places together, and of one: what one core computes in two seconds. */
const MOST_SIGHTS = 30_000;
const MOST_MARKS = 50;
/** Places after which other requests have their turn: some ten milliseconds. */
const SLICE = 32;
/** A map holds a connection while it is computed: two of the eight at most are lent to maps. */
const maps = new Turns(2, 'Other forecasts of many places are being computed.');
/** Best cells of a grid that are told in full. */
const BEST_CELLS = 5;

/** What setups would be good for at places where nobody stands yet; writes nothing. */
export async function forecastSetups(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Ask>; body: ForecastBody },
) {
  const plan = await readPlan(context, params.projectId, body);
  const grid = body.grid ? gridOf(body.grid, plan) : null;
  const places = grid ? gridPlaces(grid, plan) : candidatePlaces(body.candidates ?? [], plan);
  const compute = () => forecastPlaces(places, grid, plan, body);
  return places.length > SLICE ? maps.take(compute) : compute();
}

async function forecastPlaces(
  places: readonly ForecastPlace[],
  grid: ForecastGrid | null,
  plan: ForecastPlan,
  body: ForecastBody,
) {
  const marks = await inSlices(places, (place) => inSight(place, plan.task).length);
  requireFewSights(marks, plan);
  const forecasted = await inSlices(places, (place, i): Forecasted => {
    const forecast = forecastSetup(place, plan.task);
    const none = 'code' in forecast ? forecast.code : null;
    return { place, marks: marks[i], forecast: 'code' in forecast ? null : forecast, none };
  });
  const ranked = byMerit(forecasted, plan);
  const told = (grid ? wellApart(ranked, grid.spacing) : ranked).map((one): ToldForecast => {
    const forecast = forecastInFull(one.place, plan.task);
    return { ...one, forecast: 'code' in forecast ? null : forecast };
  });
  return presentForecasts({ plan, body, ranked, told, grid: grid && { ...grid, cells: forecasted } });
}

/** Something of every place, other requests having their turn in between. */
async function inSlices<T>(
  places: readonly ForecastPlace[],
  of: (place: ForecastPlace, i: number) => T,
): Promise<T[]> {
  const all: T[] = [];
  for (const [i, place] of places.entries()) {
    if (i % SLICE === SLICE - 1) await setImmediate();
    all.push(of(place, i));
  }
  return all;
}

/** @param marks in range of each place */
function requireFewSights(marks: readonly number[], { task, length }: ForecastPlan): void {
  const most = Math.max(...marks);
  if (most > MOST_MARKS) {
    const range = length.text(task.sight.longest, 0);
    const detail = `${most} marks lie within ${range} of one place; ${MOST_MARKS} are the most.`;
    throw invalid('/targets', 'forecast_too_large', detail);
  }
  const sights = marks.reduce((sum, count) => sum + count, 0);
  if (sights <= MOST_SIGHTS) return;
  const detail = `${sights.toLocaleString('en')} sights in all; ${MOST_SIGHTS.toLocaleString('en')} are the most.`;
  throw invalid('/grid', 'forecast_too_large', detail);
}

/** What passes first, then what leaves most of the work's limits; places without a station last. */
function byMerit(forecasted: readonly Forecasted[], { task }: ForecastPlan): Forecasted[] {
  const keyed = forecasted.map((one) => ({
    one,
    held: one.forecast?.verdict.verdict === 'pass' ? 0 : 1,
    burden: one.forecast ? burden(one.forecast, task.limits) : Number.POSITIVE_INFINITY,
    none: one.none === null ? 0 : 1,
  }));
  const rank = (a: number, b: number) => (a === b ? 0 : a - b);
  keyed.sort((a, b) => a.held - b.held || a.none - b.none || rank(a.burden, b.burden));
  return keyed.map(({ one }) => one);
}

/** The best cells, none a neighbour of a better one: five cells side by side would say one thing five times. */
function wellApart(ranked: readonly Forecasted[], spacing: number): Forecasted[] {
  const distance = (a: ForecastPlace, b: ForecastPlace) =>
    Math.max(Math.abs(a.easting - b.easting), Math.abs(a.northing - b.northing));
  const extent = Math.max(0, ...ranked.map(({ place }) => distance(place, ranked[0].place)));
  const apart = Math.max(2 * spacing, extent / 4) * (1 - 1e-9);
  const told: Forecasted[] = [];
  for (const one of ranked) {
    if (told.length === BEST_CELLS || one.forecast === null) break;
    if (told.every(({ place }) => distance(place, one.place) >= apart)) told.push(one);
  }
  return told;
}
