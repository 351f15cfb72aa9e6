import type * as z from 'zod';
import { ITEM_PROBLEMS, type ItemProblemCode } from '@/openapi/problemCodes';
import { pointerTo, problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

type Issue = z.core.$ZodIssue;

/** Unknown fields of one object that are listed; a million of them say no more than the first hundred. */
const MAX_UNKNOWN = 100;

/** What a schema finds wrong in a value, place by place, in the hub's codes and words. */
export function problemsOfIssues(issues: readonly Issue[], value: unknown): ProblemItem[] {
  return issues.flatMap((issue) => problemsOfIssue(issue, value));
}

function problemsOfIssue(issue: Issue, value: unknown): ProblemItem[] {
  const { path } = issue;
  const pointer = pointerTo(path);
  const found = at(value, path);
  switch (issue.code) {
    case 'unrecognized_keys':
      return issue.keys
        .slice(0, MAX_UNKNOWN)
        .map((key) =>
          problemItem(
            pointerTo([...path, key]),
            'unknown_field',
            `The field ${JSON.stringify(shorten(key))} is not known here.`,
          ),
        );
    case 'custom':
      return [problemItem(pointer, customCode(issue.params), issue.message)];
    case 'invalid_union':
      if (found === undefined) return [missing(path)];
      // Without errors of its branches none was tried: the word that chooses among them is not known.
      if (issue.errors.length === 0)
        return [
          problemItem(pointer, 'invalid_value', `${describe(found)} is none of those that are taken here.`),
        ];
      return [
        problemItem(pointer, 'wrong_type', `${describe(found)} is none of the forms that are taken here.`),
      ];
    case 'invalid_type':
      if (found === undefined) return [missing(path)];
      return [
        problemItem(
          pointer,
          'wrong_type',
          `${describe(found)} stands where ${article(issue.expected)} belongs.`,
        ),
      ];
    case 'invalid_value': {
      if (found === undefined) return [missing(path)];
      const values = issue.values.map((v) => JSON.stringify(v)).join(', ');
      return [problemItem(pointer, 'invalid_value', `${describe(found)} is not one of ${values}.`)];
    }
    case 'too_small': {
      const least = `${issue.inclusive ? 'at least' : 'more than'} ${issue.minimum}`;
      return [problemItem(pointer, 'invalid_value', outOfRange(issue.origin, found, least))];
    }
    case 'too_big': {
      const most = `${issue.inclusive ? 'at most' : 'less than'} ${issue.maximum}`;
      return [problemItem(pointer, 'invalid_value', outOfRange(issue.origin, found, most))];
    }
    default:
      return [problemItem(pointer, 'invalid_value', `${describe(found)}: ${issue.message}.`)];
  }
}

function missing(path: readonly PropertyKey[]): ProblemItem {
  const pointer = pointerTo(path);
  if (path[0] === 'units') {
    const name = path[1] === undefined ? 'units' : `units.${String(path[1])}`;
    return problemItem(pointer, 'units_required', `${name} is missing: no unit is assumed.`);
  }
  return problemItem(pointer, 'required', `${String(path.at(-1) ?? 'The body')} is missing.`);
}

function customCode(params: Record<string, unknown> | undefined): ItemProblemCode {
  const code = params?.code;
  return typeof code === 'string' && code in ITEM_PROBLEMS ? (code as ItemProblemCode) : 'invalid_value';
}

function at(value: unknown, path: readonly PropertyKey[]): unknown {
  let found = value;
  for (const key of path) {
    if (typeof found !== 'object' || found === null || !Object.hasOwn(found, key)) return undefined;
    found = (found as Record<PropertyKey, unknown>)[key];
  }
  return found;
}

function describe(value: unknown): string {
  if (value === null) return 'null';
  if (Array.isArray(value)) return 'A list';
  if (typeof value === 'object') return 'An object';
  return shorten(JSON.stringify(value) ?? 'Nothing');
}

function shorten(text: string): string {
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
}

/** Text is not repeated: it may be a password. */
function outOfRange(origin: string, found: unknown, allowed: string): string {
  if (origin === 'string') return `The text must have ${allowed} characters.`;
  if (origin === 'array') return `The list must have ${allowed} items.`;
  return `${describe(found)} stands where ${allowed} belongs.`;
}

const KINDS: Record<string, string> = {
  number: 'a number',
  int: 'a whole number',
  string: 'text',
  boolean: 'true or false',
  array: 'a list',
  tuple: 'a list',
  object: 'an object',
};

function article(expected: string): string {
  return KINDS[expected] ?? expected;
}
