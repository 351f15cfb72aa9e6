import { describe, expect, it } from 'vitest';
import { databaseFault } from '@/db/faults';

/** Trouble that no test can bring about at will: a pipe that breaks within one turn, a name server that is away. */
describe('what a failed statement means', () => {
  const error = (code: string) => Object.assign(new Error('failed'), { code });
  const kind = (code: string) => databaseFault(error(code))?.kind;

  it.each(['EPIPE', 'ECONNRESET', 'ETIMEDOUT', 'ENOTFOUND', 'EAI_AGAIN', 'EHOSTUNREACH', 'ENETUNREACH'])(
    'the connection is broken: %s',
    (code) => {
      expect(kind(code)).toBe('unavailable');
    },
  );

  it('the pool is closed, since the process ends', () => {
    const message = 'Cannot use a pool after calling end on the pool';
    expect(databaseFault(new Error(message))?.kind).toBe('unavailable');
  });

  it('the statement itself is at fault: a SQLSTATE of another class', () => {
    expect(kind('42P01')).toBe('other');
    expect(kind('23505')).toBe('unique');
  });
});
