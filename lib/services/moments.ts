/**
 * An instant as PostgreSQL (`2031-04-12 13:41:00.25+00`) or JavaScript writes it, as RFC 3339 in UTC with the digits
 * that matter: `2031-04-12T13:41:00.25Z`.
 */
export function asMoment(text: string): string {
  return text
    .replace(' ', 'T')
    .replace(/\+00(?::00)?$/, 'Z')
    .replace(/\.(\d*?)0*Z$/, (_, digits: string) => (digits === '' ? 'Z' : `.${digits}Z`));
}

export function asMomentOrNull(text: string | null): string | null {
  return text === null ? null : asMoment(text);
}

const PARTS = /^(\d{4}-\d\d-\d\d)[Tt](\d\d:\d\d):(\d\d)(?:\.(\d{1,9}))?([Zz]|[+-]\d\d:\d\d)$/;

/**
 * A client's RFC 3339 instant in UTC, to the microsecond that PostgreSQL keeps; the text has passed its schema.
 * A leap second counts as the first of the next minute, as PostgreSQL counts it.
 */
export function utcInstant(text: string): string {
  const [, date, minute, second, fraction = '', offset] = PARTS.exec(text)!;
  const whole = Date.parse(`${date}T${minute}:00${offset.toUpperCase()}`) + Number(second) * 1000;
  const micros = Math.round(Number(`0.${fraction || '0'}`) * 1e6);
  const base = new Date(whole + (micros === 1e6 ? 1000 : 0)).toISOString().slice(0, 19);
  return asMoment(`${base}.${String(micros % 1e6).padStart(6, '0')}Z`);
}
