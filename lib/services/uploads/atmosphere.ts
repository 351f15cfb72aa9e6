import {
  type Atmosphere,
  atmosphericPpm,
  DEFAULT_HUMIDITY,
  standardPressure,
} from '@/lib/compute/survey/atmosphere';
import { toKelvin, toPascal } from '@/lib/compute/units/convert';
import type { Units } from '@/lib/services/shots/units';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import type { Site, SiteInstrument } from './site';

/** More than this off the standard atmosphere is a pressure reduced to sea level, or a wrong unit; Pa. */
const PRESSURE_LIMIT = 3000;

type Sent = NonNullable<Document['setups'][number]['atmosphere']>;

/** @param targets of the setup, whose mean elevation stands for the station's */
export function readAtmosphere(
  sent: Sent | undefined,
  units: Units,
  site: Site,
  targets: readonly string[],
  pointer: string,
): { atmosphere: Atmosphere | null; problems: ProblemItem[] } {
  if (!sent) return { atmosphere: null, problems: [] };
  const problems: ProblemItem[] = [];
  if (!units.temperature)
    problems.push(
      problemItem(
        '/units/temperature',
        'units_required',
        'A temperature was sent, but units.temperature is missing.',
      ),
    );
  if (!units.pressure)
    problems.push(
      problemItem('/units/pressure', 'units_required', 'A pressure was sent, but units.pressure is missing.'),
    );
  if (!units.temperature || !units.pressure) return { atmosphere: null, problems };
  const atmosphere: Atmosphere = {
    temperature: toKelvin(sent.temperature, units.temperature),
    pressure: toPascal(sent.pressure, units.pressure),
    humidity: sent.humidityPercent === undefined ? DEFAULT_HUMIDITY : sent.humidityPercent / 100,
  };
  const celsius = atmosphere.temperature - 273.15;
  if (celsius < -60 || celsius > 70) {
    problems.push(
      problemItem(
        `${pointer}/atmosphere/temperature`,
        'invalid_value',
        `${celsius.toFixed(0)} °C is no air temperature on a site.`,
      ),
    );
  }
  const elevation = site.project.siteElevation ?? meanElevation(site, targets);
  if (elevation !== null && Math.abs(atmosphere.pressure - standardPressure(elevation)) > PRESSURE_LIMIT) {
    const expected = (standardPressure(elevation) / 100).toFixed(0);
    const detail = `${(atmosphere.pressure / 100).toFixed(0)} hPa at ${elevation.toFixed(0)} m, where about ${expected} hPa belong.`;
    problems.push(problemItem(`${pointer}/atmosphere/pressure`, 'pressure_contradicts_elevation', detail));
  }
  return { atmosphere: problems.length > 0 ? null : atmosphere, problems };
}

/** First velocity correction wanted, ppm; null where the atmosphere is unknown. */
export function wantedPpm(atmosphere: Atmosphere | null, instrument: SiteInstrument): number | null {
  return (
    atmosphere && atmosphericPpm(atmosphere, instrument.carrierWavelength, instrument.referenceRefractivity)
  );
}

function meanElevation(site: Site, targets: readonly string[]): number | null {
  const elevations = [...new Set(targets)].flatMap((name) => site.control.get(name)?.elevation ?? []);
  return elevations.length === 0 ? null : elevations.reduce((a, b) => a + b, 0) / elevations.length;
}
