import type { ItemProblemCode } from '@/openapi/problemCodes';
import { pointerTo, problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

const MAX_DEPTH = 64;
/** Every item with a flaw must be known by one, since it is refused for it; its twentieth says no more. */
const MAX_FLAWS_OF_ITEM = 20;
const MAX_FLAWS = 20_000;
const FORBIDDEN_KEYS = new Set(['__proto__', 'constructor', 'prototype']);

/** Text that is no JSON, or nested beyond reason. */
export class JsonError extends Error {
  override readonly name = 'JsonError';

  constructor(
    readonly code: 'body_unreadable' | 'json_too_deep',
    message: string,
  ) {
    super(message);
  }
}

export interface StrictJson {
  value: unknown;
  /** What JSON.parse would have passed over in silence, each with its place. */
  flaws: ProblemItem[];
}

/**
 * Parses JSON and finds what loses meaning on the way: keys that stand twice, keys that reach prototypes, numbers
 * that a double cannot hold, negative zeros, NUL and half surrogate pairs.
 *
 * @throws JsonError
 */
export function parseStrictJson(text: string): StrictJson {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    throw new JsonError(
      'body_unreadable',
      `It is not JSON: ${error instanceof Error ? error.message : 'broken'}.`,
    );
  }
  return { value, flaws: findFlaws(text) };
}

interface Level {
  /** Keys seen so far; null in an array. */
  keys: Set<string> | null;
  /** The key or index of the value that is being read. */
  at: string | number;
}

const QUOTE = 0x22;
const COMMA = 0x2c;
const MINUS = 0x2d;
const BACKSLASH = 0x5c;
const OPEN_BRACKET = 0x5b;
const CLOSE_BRACKET = 0x5d;
const OPEN_BRACE = 0x7b;
const CLOSE_BRACE = 0x7d;

/** Walks a text that is known to be JSON, so that a character tells which token begins. */
function findFlaws(text: string): ProblemItem[] {
  const levels: Level[] = [];
  const flaws: ProblemItem[] = [];
  let expectKey = false;
  const ofItem = new Map<string, number>();
  const report = (code: ItemProblemCode, detail: string) => {
    const path = levels.map((level) => level.at);
    const item = pointerTo(path.slice(0, 2));
    const earlier = ofItem.get(item) ?? 0;
    ofItem.set(item, earlier + 1);
    if (earlier >= MAX_FLAWS_OF_ITEM) return;
    if (flaws.length >= MAX_FLAWS)
      throw new JsonError('body_unreadable', `More than ${MAX_FLAWS} places in it cannot be taken.`);
    flaws.push(problemItem(pointerTo(path), code, detail));
  };

  for (let i = 0; i < text.length; i++) {
    const character = text.charCodeAt(i);
    if (character === QUOTE) {
      const end = closingQuote(text, i);
      const raw = text.slice(i + 1, end);
      const escaped = raw.includes('\\');
      const string = escaped ? (JSON.parse(text.slice(i, end + 1)) as string) : raw;
      i = end;
      const level = levels[levels.length - 1];
      if (expectKey && level.keys) {
        level.at = string;
        expectKey = false;
        if (level.keys.has(string))
          report('duplicate_key', `The key ${JSON.stringify(string)} stands twice.`);
        if (FORBIDDEN_KEYS.has(string)) report('key_forbidden', `The key ${string} is not taken.`);
        level.keys.add(string);
      }
      // Well-formed UTF-8 brings NUL and half pairs in by escapes alone.
      if (escaped && !isKeepable(string))
        report('text_forbidden', 'The text holds NUL or half a surrogate pair.');
    } else if (character === OPEN_BRACE || character === OPEN_BRACKET) {
      if (levels.length >= MAX_DEPTH) {
        throw new JsonError('json_too_deep', `It is nested more than ${MAX_DEPTH} levels deep.`);
      }
      expectKey = character === OPEN_BRACE;
      levels.push({ keys: expectKey ? new Set() : null, at: expectKey ? '' : 0 });
    } else if (character === CLOSE_BRACE || character === CLOSE_BRACKET) {
      levels.pop();
      expectKey = false;
    } else if (character === COMMA) {
      const level = levels[levels.length - 1];
      if (level.keys) expectKey = true;
      else level.at = Number(level.at) + 1;
    } else if (character === MINUS || isDigit(character)) {
      const start = i;
      while (isNumberPart(text.charCodeAt(i + 1))) i++;
      const flaw = numberFlaw(text.slice(start, i + 1));
      if (flaw) report(...flaw);
    }
  }
  return flaws;
}

function closingQuote(text: string, open: number): number {
  for (let close = text.indexOf('"', open + 1); ; close = text.indexOf('"', close + 1)) {
    let backslashes = 0;
    while (text.charCodeAt(close - 1 - backslashes) === BACKSLASH) backslashes++;
    if (backslashes % 2 === 0) return close;
  }
}

function isDigit(character: number): boolean {
  return character >= 0x30 && character <= 0x39;
}

/** Digits, point, sign and exponent; NaN past the end of the text is none of them. */
function isNumberPart(character: number): boolean {
  return (
    isDigit(character) ||
    character === 0x2e ||
    character === 0x2b ||
    character === MINUS ||
    (character | 0x20) === 0x65
  );
}

function isKeepable(text: string): boolean {
  return text.isWellFormed() && !text.includes('\u0000');
}

function numberFlaw(literal: string): [ItemProblemCode, string] | null {
  // Up to fifteen characters without an exponent nothing can be lost but the sign of zero.
  if (literal.length <= 15 && !literal.startsWith('-') && !/e/i.test(literal)) return null;
  const value = Number(literal);
  if (!Number.isFinite(value))
    return ['number_out_of_range', `${shorten(literal)} is beyond what a double holds.`];
  const mantissa = literal.split(/e/i)[0];
  if (value === 0) {
    if (literal.startsWith('-')) return ['negative_zero', `${shorten(literal)} is a zero with a sign.`];
    if (/[1-9]/.test(mantissa)) return ['number_out_of_range', `${shorten(literal)} would become zero.`];
  }
  if (/^-?\d+$/.test(literal) && !Number.isSafeInteger(value)) {
    return ['integer_too_large', `${shorten(literal)} is beyond 2^53.`];
  }
  return null;
}

function shorten(literal: string): string {
  return literal.length > 40 ? `${literal.slice(0, 37)}…` : literal;
}
