import { CONTROL, finishElevation, INSTRUMENT, LAYER, PAD, TARGET_SIGMA_MM } from './site';

/** What the office brings in: control, the instrument, the finish surface and the layer under it. */

export function control() {
  const points = CONTROL.map(({ name, easting, northing, elevation, sigma, kind, description }) => ({
    name,
    easting,
    northing,
    elevation,
    sigma,
    kind,
    description,
  }));
  return { units: { length: 'ft' }, points };
}

export function controlCsv(): string {
  const rows = CONTROL.map(({ name, easting, northing, elevation, sigma, kind, description }) =>
    [name, easting, northing, elevation, sigma.horizontal, sigma.vertical, kind, `"${description}"`].join(
      ',',
    ),
  );
  const header = 'name,easting,northing,elevation,sigmaHorizontal,sigmaVertical,kind,description';
  return `${[header, ...rows].join('\n')}\n`;
}

export function instrument() {
  const { directionArcsec, zenithArcsec, distanceMm, distancePpm } = INSTRUMENT;
  return {
    name: 'TS-1',
    kind: 'totalStation',
    serial: '30-1187',
    accuracy: { directionArcsec, zenithArcsec, distanceMm, distancePpm },
    targetCentringSigmaMm: TARGET_SIGMA_MM.centring,
    targetHeightSigmaMm: TARGET_SIGMA_MM.height,
  };
}

/** A point every 20 ft; the crown falls on points, so that triangles follow the design whichever way they are drawn. */
export function finish() {
  const points: [number, number, number][] = [];
  for (let northing = PAD.south; northing <= PAD.north; northing += PAD.spacing) {
    for (let easting = PAD.west; easting <= PAD.east; easting += PAD.spacing) {
      points.push([easting, northing, Number(finishElevation(easting, northing).toFixed(3))]);
    }
  }
  return { units: { length: 'ft' }, name: 'Pad finish', represents: 'finish', points };
}

export function layer() {
  const { name, offset, below, above } = LAYER;
  return {
    units: { length: 'ft' },
    name,
    surfaceId: 'SURFACE_ID',
    offset,
    tolerance: { below, above, citation: 'Yard earthwork specification, 4.2' },
    acceptance: { rule: 'window', required: 4, of: 5, citation: 'Yard earthwork specification, 4.5' },
  };
}
