import { randomBytes } from 'node:crypto';
import { v7 } from 'uuid';

/** Clock, ids and chance: passed in, so that tests can hold them still. */
export interface Runtime {
  now(): Date;
  /** A new UUID of version 7. */
  uuid(): string;
  random(bytes: number): Buffer;
}

export const systemRuntime: Runtime = {
  now: () => new Date(),
  uuid: () => v7(),
  random: (bytes) => randomBytes(bytes),
};

/** Milliseconds since it was made, to a tenth: for the log and for progress. */
export function stopwatch(): () => number {
  const began = performance.now();
  return () => Math.round((performance.now() - began) * 10) / 10;
}
