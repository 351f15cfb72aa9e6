import type { Occupied } from '@/lib/compute/survey/stationAdjustment';
import { toMetres } from '@/lib/compute/units/convert';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import type { Site } from './site';

type SetupItem = Document['setups'][number];

/** The mark that a setup by backsights stands on, or what is wrong with it; null of other setups. */
export function readOccupied(
  { site, document }: { site: Site; document: Document },
  item: SetupItem,
  pointer: string,
): { occupied: Occupied | null; problems: ProblemItem[] } {
  const { method, stationPoint, instrumentHeight } = item;
  if (method !== 'backsight') {
    return { occupied: null, problems: stationPoint === undefined ? [] : [superfluous(method, pointer)] };
  }
  const problems: ProblemItem[] = [];
  const at = `${pointer}/stationPoint`;
  const mark = stationPoint === undefined ? undefined : site.control.get(stationPoint);
  if (stationPoint === undefined) problems.push(problemItem(at, 'station_point_required'));
  else if (!mark) {
    problems.push(
      problemItem(at, 'target_unknown', `There is no control point ${stationPoint} in this project.`),
    );
  } else if (mark.status === 'quarantined') {
    problems.push(
      problemItem(
        at,
        'target_quarantined',
        `${stationPoint} is quarantined: nothing can be set up on it.`,
        'Set up over another mark, or anywhere as a resection.',
      ),
    );
  }
  if (instrumentHeight === null) {
    problems.push(problemItem(`${pointer}/instrumentHeight`, 'instrument_height_required'));
  }
  item.shots.forEach((shot, i) => {
    if (shot.target === stationPoint && stationPoint !== undefined) {
      problems.push(problemItem(`${pointer}/shots/${i}/target`, 'target_is_station'));
    }
  });
  const oriented = item.shots.some((shot) => shot.purpose === 'orient' && shot.horizontal !== undefined);
  if (!oriented) {
    const detail = 'No backsight was read with a direction: nothing orients the circle.';
    problems.push(problemItem(`${pointer}/shots`, 'setup_not_computable', detail));
  }
  if (problems.length > 0 || !mark || instrumentHeight === null) return { occupied: null, problems };
  return {
    occupied: { mark, instrumentHeight: toMetres(instrumentHeight, document.units.length) },
    problems,
  };
}

function superfluous(method: SetupItem['method'], pointer: string): ProblemItem {
  return problemItem(
    `${pointer}/stationPoint`,
    'mutually_exclusive',
    `stationPoint and method ${method}: it finds its station from the targets.`,
    'Leave stationPoint out; it belongs to a backsight.',
  );
}
