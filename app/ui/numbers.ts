/** Figures as people read them: grouped, with a true minus sign, rounded only here. */

const MINUS = '\u2212';
const formats = new Map<number, Intl.NumberFormat>();

export function fixed(value: number, decimals: number): string {
  let format = formats.get(decimals);
  if (!format) {
    format = new Intl.NumberFormat('en-US', {
      minimumFractionDigits: decimals,
      maximumFractionDigits: decimals,
    });
    formats.set(decimals, format);
  }
  const text = format.format(Math.abs(value));
  return value < 0 && Number(text.replaceAll(',', '')) !== 0 ? `${MINUS}${text}` : text;
}

/** The same with its sign always shown. */
export function signed(value: number, decimals: number): string {
  const text = fixed(value, decimals);
  return text.startsWith(MINUS) || Number(text.replaceAll(',', '')) === 0 ? text : `+${text}`;
}

/** Decimal degrees as degrees, minutes and seconds. */
export function sexagesimal(degrees: number, secondDecimals = 0): string {
  const scale = 10 ** secondDecimals;
  const total = Math.round(Math.abs(degrees) * 3600 * scale);
  const seconds = (total / scale) % 60;
  const minutes = Math.floor(total / scale / 60) % 60;
  const whole = Math.floor(total / scale / 3600);
  const pad = seconds.toFixed(secondDecimals).padStart(secondDecimals ? 3 + secondDecimals : 2, '0');
  return `${degrees < 0 ? MINUS : ''}${whole}°${String(minutes).padStart(2, '0')}′${pad}″`;
}

const UNIT_NAMES = { m: 'metres', ft: 'international feet', ftUS: 'US survey feet' } as const;
export type LengthUnit = keyof typeof UNIT_NAMES;

export function unitName(unit: LengthUnit): string {
  return UNIT_NAMES[unit];
}

export function unitSign(unit: LengthUnit): string {
  return unit === 'm' ? 'm' : 'ft';
}

/** Decimals of a coordinate and of a residual. */
export const COORDINATE = 3;

/** A tenth of a millimetre is the last that anybody states. */
const MOST_DECIMALS = 4;

/** Decimals of a length that somebody stated: the unit's usual ones, and more where it would read as another length. */
export function decimalsOf(value: number, unit: LengthUnit): number {
  let decimals = unit === 'm' ? 3 : 2;
  while (decimals < MOST_DECIMALS && Math.abs(value - Number(value.toFixed(decimals))) > 1e-6) decimals++;
  return decimals;
}

/** A stated length, such as a tolerance. */
export function stated(value: number, unit: LengthUnit): string {
  return fixed(value, decimalsOf(value, unit));
}

const MOMENT = new Intl.DateTimeFormat('en-GB', {
  day: 'numeric',
  month: 'short',
  hour: '2-digit',
  minute: '2-digit',
});
const DAY = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', year: 'numeric' });

/** An instant in the reader's own time. */
export function moment(text: string): string {
  const date = new Date(text);
  const sameYear = date.getFullYear() === new Date().getFullYear();
  return sameYear ? MOMENT.format(date) : `${DAY.format(date)}, ${MOMENT.format(date).split(', ').at(-1)}`;
}

export function timeZone(): string {
  return Intl.DateTimeFormat().resolvedOptions().timeZone;
}

export function bytes(count: number): string {
  if (count < 1000) return `${count} B`;
  return count < 1e6 ? `${fixed(count / 1e3, 1)} kB` : `${fixed(count / 1e6, 1)} MB`;
}
