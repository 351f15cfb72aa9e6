import type * as z from 'zod';
import { COORDINATE, signed } from '@/app/ui/numbers';
import type { Setup } from '@/openapi/schemas/setup';
import { type Box, type Place, placeLabels, type Segment } from './labels';
import { LETTER, northPlace, type Size, scaleRoom } from './PlanParts';
import { fitView, roundStep, type View } from './scale';

type Shown = z.output<typeof Setup>;
export type Target = Shown['targets'][number];
type Marked = Target & { published: NonNullable<Target['published']> };

/** A stray stands on no control point: it has no place in the plan. */
export function isMarked(target: Target): target is Marked {
  return target.published !== null;
}

/** The longest residual arrow or half axis, in pixels. */
const LONGEST = 46;
/** Below this magnification an arrow could be taken for a line of the site. */
const LEAST = 10;
/** Width of a character of the residuals under a name. */
const FIGURE = 6.1;

export interface Drawn {
  target: Target;
  x: number;
  y: number;
  /** The residual in pixels; null where none is drawn. */
  arrow: { dx: number; dy: number } | null;
  label: Place;
}

export interface Layout {
  view: View;
  /** Null where the fit did not converge: then nobody knows where it stands. */
  station: { x: number; y: number; name: string; label: Place } | null;
  targets: Drawn[];
  /** How many times larger than the plan residuals and ellipse are; null where they are not drawn. */
  magnified: number | null;
  /** Side of a square of the grid, in units of length. */
  grid: number;
  north: Box;
}

/** Where everything in the plan of a setup stands, so that no word lies on a line or on another word. */
export function layoutOf(setup: Shown, size: Size, edge: { x: number; y: number }): Layout {
  const { position, errorEllipse, station: name } = setup;
  const targets = setup.targets.filter(isMarked);
  const { converged } = setup.fit;
  const published = targets.map((target) => target.published);
  const view = fitView(converged ? [position, ...published] : published, size.width, size.height, edge);
  const grid = roundStep(size.width / 4 / view.scale);
  const magnified = converged ? magnification(setup, view) : null;
  const points = targets.map(({ published: p }) => ({ x: view.x(p.easting), y: view.y(p.northing) }));
  const arrows = targets.map((target) => arrowOf(target, magnified && magnified * view.scale));
  const station = converged ? { x: view.x(position.easting), y: view.y(position.northing) } : null;
  const around = Math.max(13, errorEllipse.semiMajor * view.scale * (magnified ?? 0) + 3);

  const segments: Segment[] = points.flatMap(({ x, y }, i) => {
    const arrow = arrows[i];
    const ray: Segment[] = station ? [[station.x, station.y, x, y]] : [];
    return arrow ? [...ray, [x, y, x + arrow.dx, y + arrow.dy]] : ray;
  });
  const boxes = [...points.map((point) => square(point, 9)), scaleRoom(grid * view.scale, size)];
  if (station) boxes.push(square(station, around));
  const north = northPlace({ boxes, segments }, size);
  const wanted = points.map((point, i) => ({ ...point, gap: 13, ...roomOf(targets[i]) }));
  const ours = station ? [{ ...station, gap: around + 4, width: name.length * LETTER, height: 17 }] : [];
  const labels = placeLabels([...ours, ...wanted], { boxes: [...boxes, north], segments }, size);
  return {
    view,
    grid,
    north,
    magnified,
    station: station && { ...station, name, label: labels[0] },
    targets: targets.map((target, i) => ({
      target,
      ...points[i],
      arrow: arrows[i],
      label: labels[i + ours.length],
    })),
  };
}

function magnification({ targets, errorEllipse }: Shown, { scale }: View): number | null {
  const sizes = targets.map(({ residual: r }) => Math.hypot(r.easting ?? 0, r.northing ?? 0));
  const largest = Math.max(errorEllipse.semiMajor, ...sizes, 1e-9);
  const magnified = roundStep(LONGEST / (largest * scale));
  return magnified < LEAST ? null : magnified;
}

function arrowOf({ residual: { easting, northing } }: Target, scale: number | null) {
  if (scale === null || easting === null || northing === null) return null;
  return { dx: easting * scale, dy: -northing * scale };
}

function square({ x, y }: { x: number; y: number }, half: number): Box {
  return { x: x - half, y: y - half, width: 2 * half, height: 2 * half };
}

/** The residual as it is written under a name; null where it was not measured. */
export function figuresOf({ residual: { easting, northing } }: Target): string | null {
  if (easting === null || northing === null) return null;
  return `E ${signed(easting, COORDINATE)}  N ${signed(northing, COORDINATE)}`;
}

function roomOf(target: Target): { width: number; height: number } {
  const figures = figuresOf(target);
  const name = (target.target?.length ?? 0) * LETTER;
  return { width: Math.max(name, (figures?.length ?? 0) * FIGURE), height: figures ? 30 : 17 };
}
