import { ARCSECOND, designElevation, pointings, TARGET_HEIGHT } from './fieldwork';

/** The field work as partners send it: feet, degrees with minutes and seconds, Fahrenheit, inches of mercury. */

const FOOT = 0.3048;
export const feet = (metres: number, decimals = 4) => Number((metres / FOOT).toFixed(decimals));

/** `124-30-15.2`, as a data collector writes an angle. */
function dms(angle: number): string {
  const tenths = Math.round(angle / (ARCSECOND / 10));
  const seconds = (tenths % 600) / 10;
  const minutes = Math.floor(tenths / 600) % 60;
  const two = (value: number, decimals: number) => value.toFixed(decimals).padStart(decimals ? 4 : 2, '0');
  return `${Math.floor(tenths / 36_000)}-${two(minutes, 0)}-${two(seconds, 1)}`;
}

/** A setup of an upload document. */
export function setupItem(clientId: string, seed: number) {
  return {
    clientId,
    station: 'ST-7',
    method: 'resection',
    instrument: 'TS-2',
    instrumentHeight: 5.12,
    toleranceClass: 'earthwork',
    observedAt: '2031-04-12T07:41:00-06:00',
    atmosphere: { temperature: 68, pressure: 29.5 },
    shots: pointings(seed).map(({ target, face, horizontal, zenith, slopeDistance }, i) => ({
      clientId: `st-7/${i + 1}`,
      target,
      face,
      set: 1,
      compensator: 'on',
      horizontal: dms(horizontal),
      zenith: dms(zenith),
      slopeDistance: feet(slopeDistance),
      targetHeight: feet(TARGET_HEIGHT),
      prismConstantMm: -30,
      prismConstantAppliedMm: -30,
      appliedPpm: 0,
      distanceMode: 'prism',
      observedAt: `2031-04-12T07:4${i}:10-06:00`,
    })),
  };
}

/** Ground near the surface of the site, on a grid of places. */
export function gradeItem(clientId: string, index: number) {
  const easting = 1405 + (index % 40) * 5;
  const northing = 2270 + (Math.floor(index / 40) % 25) * 6.5;
  const ground = designElevation(easting, northing) + 0.03 * Math.sin(index);
  return {
    clientId,
    layer: 'subgrade',
    position: { easting: feet(easting), northing: feet(northing), elevation: feet(ground) },
    sigma: { horizontal: 0.03, vertical: 0.02 },
    observedAt: '2031-04-12T09:15:00-06:00',
  };
}

/** The pad as points on a grid, in feet. */
export function surfacePoints(): [number, number, number][] {
  return Array.from({ length: 21 * 21 }, (_, i) => {
    const easting = 1395 + (i % 21) * 11;
    const northing = 2260 + Math.floor(i / 21) * 9.5;
    return [feet(easting), feet(northing), feet(designElevation(easting, northing))];
  });
}

const UNITS = { length: 'ft', angle: 'dms', temperature: 'F', pressure: 'inHg' };

/** A document as text with a mark where its id belongs: only ids differ from request to request. */
class Template {
  private readonly parts: string[];

  constructor(document: (id: string) => object) {
    this.parts = JSON.stringify(document('\u0001')).split('\\u0001');
  }

  body(id: string): Buffer {
    return Buffer.from(this.parts.join(id));
  }
}

const VARIANTS = 64;

function varied(document: (id: string, seed: number) => object): (id: string) => Buffer {
  const templates = Array.from(
    { length: VARIANTS },
    (_, seed) => new Template((id) => document(id, seed + 1)),
  );
  let next = 0;
  return (id) => templates[next++ % VARIANTS].body(id);
}

/** Documents of one setup with eight shots. */
export const oneSetup = varied((id, seed) => ({
  clientId: id,
  units: UNITS,
  setups: [setupItem(`st-${id}`, seed)],
}));

/** Documents of 125 setups: a thousand shots. */
export function manySetups(): (id: string) => Buffer {
  const template = new Template((id) => ({
    clientId: id,
    units: UNITS,
    setups: Array.from({ length: 125 }, (_, i) => setupItem(`st-${id}-${i}`, i + 1)),
  }));
  return (id) => template.body(id);
}

/** Documents of a thousand grade shots. */
export function manyGradeShots(): (id: string) => Buffer {
  const template = new Template((id) => ({
    clientId: id,
    units: { length: 'ft' },
    gradeShots: Array.from({ length: 1000 }, (_, i) => gradeItem(`g-${id}-${i}`, i)),
  }));
  return (id) => template.body(id);
}
