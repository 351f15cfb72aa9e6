/** An instant as PostgreSQL writes it (`2031-04-12 13:41:00.25+00`) as RFC 3339 in UTC, all digits kept. */
export function asMoment(text: string): string {
  return text.replace(' ', 'T').replace(/\+00(?::00)?$/, 'Z');
}

export function asMomentOrNull(text: string | null): string | null {
  return text === null ? null : asMoment(text);
}
