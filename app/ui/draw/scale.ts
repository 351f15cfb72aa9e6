/** A step of 1, 2 or 5 times a power of ten that is at most `wanted`. */
export function roundStep(wanted: number): number {
  const power = 10 ** Math.floor(Math.log10(wanted));
  const lead = wanted / power;
  return (lead >= 5 ? 5 : lead >= 2 ? 2 : 1) * power;
}

export interface View {
  /** Pixels per unit of length. */
  scale: number;
  x(easting: number): number;
  y(northing: number): number;
}

interface Place {
  easting: number;
  northing: number;
}

/** Fits places into a drawing of a given size, north up, with room at the edge. */
export function fitView(
  places: readonly Place[],
  width: number,
  height: number,
  edge: { x: number; y: number },
): View {
  const eastings = places.map((p) => p.easting);
  const northings = places.map((p) => p.northing);
  const [west, east] = [Math.min(...eastings), Math.max(...eastings)];
  const [south, north] = [Math.min(...northings), Math.max(...northings)];
  const scale = Math.min(
    (width - 2 * edge.x) / Math.max(east - west, 1e-9),
    (height - 2 * edge.y) / Math.max(north - south, 1e-9),
  );
  const limited = Number.isFinite(scale) && scale < 1e6 ? scale : 1;
  return {
    scale: limited,
    x: (easting) => width / 2 + (easting - (west + east) / 2) * limited,
    y: (northing) => height / 2 - (northing - (south + north) / 2) * limited,
  };
}
