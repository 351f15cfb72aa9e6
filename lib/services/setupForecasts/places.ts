import { FORECAST_DEFAULTS } from '@/lib/compute/survey/forecast';
import type { AxisPlace } from '@/lib/compute/survey/forecastShots';
import { invalid, invalidItems } from '@/lib/problem';
import { problemItem } from '@/openapi/problemItem';
import { MOST_CELLS } from '@/openapi/schemas/setupForecast';
import type { ForecastBody, ForecastPlan } from './plan';

/** Somewhere to forecast, m: the ground and the axis above it. */
export interface ForecastPlace extends AxisPlace {
  name: string | null;
  elevation: number;
}

/** Cells by rows from the south, each from the west, m. */
export interface ForecastGrid {
  origin: { easting: number; northing: number };
  spacing: number;
  rows: number;
  columns: number;
}

/** Cells at most where the spacing is left to the hub. */
const CELLS_BY_DEFAULT = 625;

/** @throws Problem where a candidate stands on a mark */
export function candidatePlaces(
  candidates: NonNullable<ForecastBody['candidates']>,
  { length, instrumentHeight, ground, task }: ForecastPlan,
): ForecastPlace[] {
  const places = candidates.map(({ name, easting, northing, elevation }): ForecastPlace => {
    const height = elevation === undefined ? ground : length.in(elevation);
    return {
      name: name ?? null,
      easting: length.in(easting),
      northing: length.in(northing),
      elevation: height,
      axis: height + instrumentHeight,
    };
  });
  const problems = places.flatMap((place, i) => {
    const mark = task.targets.find(
      ({ easting, northing }) =>
        Math.hypot(easting - place.easting, northing - place.northing) < FORECAST_DEFAULTS.shortestSight,
    );
    if (!mark) return [];
    const detail = `The place is on ${mark.name}, nearer than ${length.text(FORECAST_DEFAULTS.shortestSight, 1)}.`;
    return [problemItem(`/candidates/${i}`, 'candidate_on_mark', detail)];
  });
  if (problems.length > 0) throw invalidItems(problems);
  return places;
}

/** @throws Problem where the grid has too many cells, or nothing says where it lies */
export function gridOf(asked: NonNullable<ForecastBody['grid']>, plan: ForecastPlan): ForecastGrid {
  const { length } = plan;
  const { extent } = asked;
  const box = extent
    ? {
        west: length.in(extent.minEasting),
        east: length.in(extent.maxEasting),
        south: length.in(extent.minNorthing),
        north: length.in(extent.maxNorthing),
      }
    : boxOf(plan);
  const spacing = asked.spacing === undefined ? roundSpacing(box, plan) : length.in(asked.spacing);
  // A box that is a whole number of spacings wide but for rounding ends in a cell.
  const cells = (width: number) => Math.floor(width / spacing + 1e-9) + 1;
  const [rows, columns] = [cells(box.north - box.south), cells(box.east - box.west)];
  if (!(rows * columns <= MOST_CELLS)) {
    const detail = `${rows.toLocaleString('en')} by ${columns.toLocaleString('en')} cells; ${MOST_CELLS.toLocaleString('en')} are the most.`;
    throw invalid('/grid/spacing', 'forecast_too_large', detail);
  }
  return { origin: { easting: box.west, northing: box.south }, spacing, rows, columns };
}

export function gridPlaces(
  { origin, spacing, rows, columns }: ForecastGrid,
  { ground, instrumentHeight }: ForecastPlan,
): ForecastPlace[] {
  return Array.from({ length: rows * columns }, (_, cell) => ({
    name: null,
    easting: origin.easting + (cell % columns) * spacing,
    northing: origin.northing + Math.floor(cell / columns) * spacing,
    elevation: ground,
    axis: ground + instrumentHeight,
  }));
}

interface Box {
  west: number;
  east: number;
  south: number;
  north: number;
}

function boxOf({ task: { targets } }: ForecastPlan): Box {
  if (targets.length === 0) {
    const detail = 'The project has no trusted control that would say where the site lies.';
    throw invalid('/grid/extent', 'required', detail, 'Send the extent, or bring control in.');
  }
  const east = targets.map(({ easting }) => easting);
  const north = targets.map(({ northing }) => northing);
  return {
    west: Math.min(...east),
    east: Math.max(...east),
    south: Math.min(...north),
    north: Math.max(...north),
  };
}

/** The smallest 1, 2 or 5 times a power of ten, in the answer's unit, that keeps the cells few. */
function roundSpacing({ west, east, south, north }: Box, { length }: ForecastPlan): number {
  const [width, height] = [east - west, north - south];
  const count = (spacing: number) => (Math.floor(width / spacing) + 1) * (Math.floor(height / spacing) + 1);
  for (let power = 0; ; power++) {
    for (const step of [1, 2, 5]) {
      const spacing = length.in(step * 10 ** power);
      if (count(spacing) <= CELLS_BY_DEFAULT) return spacing;
    }
  }
}
