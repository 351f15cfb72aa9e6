import { expect, it } from 'vitest';
import { MAX_ATTEMPTS, nextAttempt } from '@/lib/notify/schedule';
import type { Runtime } from '@/lib/runtime';

const now = new Date('2031-04-12T12:00:00Z');
/** A runtime whose chance is one byte over and over. */
const withChance = (byte: number): Runtime => ({
  now: () => now,
  uuid: () => '',
  random: (bytes) => Buffer.alloc(bytes, byte),
});

/** Standard Webhooks specification 1.0.0, "Retry schedule", in seconds; the first attempt comes at once. */
const PUBLISHED = [5, 5 * 60, 30 * 60, 2 * 3600, 5 * 3600, 10 * 3600, 14 * 3600, 20 * 3600, 24 * 3600];

const pauses = (byte: number, retryAfter: number | null = null) =>
  PUBLISHED.map((_, i) => {
    const next = nextAttempt(i + 1, retryAfter, withChance(byte))!;
    return (next.getTime() - now.getTime()) / 1000;
  });

it('follows the schedule of the specification and ends after ten attempts', () => {
  expect(pauses(0)).toEqual(PUBLISHED);
  expect(MAX_ATTEMPTS).toBe(10);
  expect(nextAttempt(10, null, withChance(0))).toBeNull();
});

it('adds up to a tenth by chance, and never comes early', () => {
  pauses(255).forEach((pause, i) => {
    expect(pause).toBeGreaterThan(PUBLISHED[i] * 1.099);
    expect(pause).toBeLessThanOrEqual(PUBLISHED[i] * 1.1);
  });
  expect(pauses(128)[0]).toBeCloseTo(5.25, 1);
});

it('waits as long as the receiver asks, though no longer than a day', () => {
  expect(pauses(0, 600).slice(0, 3)).toEqual([600, 600, 1800]);
  expect(new Set(pauses(0, 999_999))).toEqual(new Set([86_400]));
});
