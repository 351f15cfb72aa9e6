import { getSystemErrorMap } from 'node:util';
import { describe, expect, it } from 'vitest';
import { databaseFault } from '@/db/faults';
import { problemOf } from '@/lib/http/faults';

const failure = (code: string) => Object.assign(new Error(`write ${code}`), { code });

describe('what a failed statement means', () => {
  it.each([...getSystemErrorMap().values()].map(([code]) => code))('is no SQLSTATE by %s', (code) => {
    expect(databaseFault(failure(code))?.sqlstate ?? null).toBeNull();
  });

  it.each(['EPIPE', 'ECONNRESET', 'ECONNREFUSED', 'ETIMEDOUT', 'EAI_AGAIN'])(
    'is a database that is away by %s, alone or as a cause',
    (code) => {
      const error = failure(code);
      for (const thrown of [error, new Error('Failed query', { cause: error })])
        expect(problemOf(thrown)).toMatchObject({ code: 'unavailable', status: 503 });
    },
  );

  it.each([
    ['57P01', 'unavailable'],
    ['40001', 'unavailable'],
    ['23505', 'conflict'],
    ['22P05', 'internal'],
    ['XX000', 'internal'],
  ])('is told by its SQLSTATE %s', (code, problem) => {
    expect(problemOf(failure(code)).code).toBe(problem);
  });
});
