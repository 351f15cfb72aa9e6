import { EventEmitter } from 'node:events';
import pg from 'pg';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { Presence } from '@/lib/jobs/presence';

vi.mock('@/lib/log/log', () => ({ log: () => ({ warn: () => undefined }) }));

/** Sessions with a database, and what each has locked; those whose number stands in `refusing` lock nothing. */
const sessions: Session[] = [];
const refusing = new Set<number>();

class Session extends EventEmitter {
  readonly number = sessions.push(this) - 1;
  readonly held: string[] = [];
  looks = 0;
  ended = false;
  async connect() {}
  async query(text: string, [id]: string[]) {
    if (!text.includes('pg_advisory_lock')) this.looks++;
    else if (refusing.has(this.number)) throw new Error('canceling statement due to lock timeout');
    else this.held.push(id);
    return { rows: [] };
  }
  async end() {
    this.ended = true;
    this.emit('end');
  }
}

beforeEach(() => {
  vi.useFakeTimers();
  vi.spyOn(pg, 'Client').mockImplementation(function client() {
    return new Session() as never;
  });
});
afterEach(() => {
  vi.useRealTimers();
  vi.restoreAllMocks();
  sessions.length = 0;
  refusing.clear();
});

it('looks in no session that lacks a lock of the living', async () => {
  const presence = new Presence('postgresql://none');
  await presence.add('a');
  await presence.begin();
  expect(sessions.map(({ held }) => held)).toEqual([['a']]);
  await sessions[0].end();
  refusing.add(1);
  await vi.advanceTimersByTimeAsync(5_000);
  await vi.advanceTimersByTimeAsync(5_000);
  expect(sessions.map(({ held, ended, looks }) => [held, ended, looks])).toEqual([
    [['a'], true, 0],
    [[], true, 0],
    [['a'], false, 1],
  ]);
  refusing.add(2);
  await expect(presence.add('b')).rejects.toThrow('lock timeout');
  await vi.advanceTimersByTimeAsync(5_000);
  expect([sessions[2].ended, sessions[3].held]).toEqual([true, ['a', 'b']]);
  await presence.end();
});
