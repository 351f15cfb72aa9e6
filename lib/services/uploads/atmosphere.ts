import {
  type Atmosphere,
  atmosphericPpm,
  DEFAULT_HUMIDITY,
  humidityFromWetBulb,
  standardPressure,
} from '@/lib/compute/survey/atmosphere';
import { toKelvin, toPascal } from '@/lib/compute/units/convert';
import type { Air } from '@/lib/services/setups/result';
import type { Units } from '@/lib/services/shots/units';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import type { Site, SiteInstrument } from './site';

/** More than this off the standard atmosphere is a pressure reduced to sea level, or a wrong unit; Pa. */
const PRESSURE_LIMIT = 3000;
/** Freezing point, K: a wet bulb below it carries ice, for which the psychrometer has another constant. */
const FREEZING = 273.15;

type Sent = NonNullable<Document['setups'][number]['atmosphere']>;

/** The air at the instrument, and where its humidity comes from. */
export type Weather = Atmosphere & Pick<Air, 'humiditySource'>;

/** @param targets of the setup, whose mean elevation stands for the station's */
export function readAtmosphere(
  sent: Sent | undefined,
  units: Units,
  site: Site,
  targets: readonly string[],
  pointer: string,
): { atmosphere: Weather | null; problems: ProblemItem[] } {
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
  const temperature = toKelvin(sent.temperature, units.temperature);
  const pressure = toPascal(sent.pressure, units.pressure);
  const celsius = temperature - 273.15;
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
  if (elevation !== null && Math.abs(pressure - standardPressure(elevation)) > PRESSURE_LIMIT) {
    const expected = (standardPressure(elevation) / 100).toFixed(0);
    const detail = `${(pressure / 100).toFixed(0)} hPa at ${elevation.toFixed(0)} m, where about ${expected} hPa belong.`;
    problems.push(problemItem(`${pointer}/atmosphere/pressure`, 'pressure_contradicts_elevation', detail));
  }
  const humidity = readHumidity(sent, { temperature, pressure }, units.temperature, `${pointer}/atmosphere`);
  if (Array.isArray(humidity)) return { atmosphere: null, problems: [...problems, ...humidity] };
  return { atmosphere: problems.length > 0 ? null : { temperature, pressure, ...humidity }, problems };
}

/** Relative humidity as stated, by the wet bulb, or as it is taken where nobody measured it. */
function readHumidity(
  { humidityPercent, wetBulb }: Sent,
  air: Pick<Atmosphere, 'temperature' | 'pressure'>,
  unit: NonNullable<Units['temperature']>,
  pointer: string,
): Pick<Weather, 'humidity' | 'humiditySource'> | ProblemItem[] {
  if (humidityPercent !== undefined && wetBulb !== undefined) {
    const detail = 'humidityPercent and wetBulb say the same thing twice.';
    return [problemItem(`${pointer}/wetBulb`, 'mutually_exclusive', detail, 'Send one of them.')];
  }
  if (humidityPercent !== undefined) return { humidity: humidityPercent / 100, humiditySource: 'stated' };
  if (wetBulb === undefined) return { humidity: DEFAULT_HUMIDITY, humiditySource: 'default' };
  const wet = toKelvin(wetBulb, unit);
  const refused = (detail: string, fix: string) => [
    problemItem(`${pointer}/wetBulb`, 'invalid_value', detail, fix),
  ];
  if (wet > air.temperature) {
    return refused('A wet bulb is never warmer than the air.', 'Exchange temperature and wetBulb.');
  }
  if (wet < FREEZING) return refused('A wet bulb below freezing carries ice.', 'Send humidityPercent.');
  const humidity = humidityFromWetBulb(air, wet);
  if (humidity < 0) return refused('No air is so dry: the wet bulb is too cold.', 'Read it again.');
  return { humidity, humiditySource: 'wetBulb' };
}

/** The air with what an instrument's distance meter takes for granted of it. */
export function airOf(weather: Weather, instrument: SiteInstrument): Air {
  const { temperature, pressure, humidity, humiditySource } = weather;
  const { carrierWavelength, referenceRefractivity } = instrument;
  return { temperature, pressure, humidity, humiditySource, carrierWavelength, referenceRefractivity };
}

/** First velocity correction wanted, ppm. */
export function wantedPpm(air: Air): number {
  return atmosphericPpm(air, air.carrierWavelength, air.referenceRefractivity);
}

function meanElevation(site: Site, targets: readonly string[]): number | null {
  const elevations = [...new Set(targets)].flatMap((name) => site.control.get(name)?.elevation ?? []);
  return elevations.length === 0 ? null : elevations.reduce((a, b) => a + b, 0) / elevations.length;
}
