import { randomBytes } from 'node:crypto';
import { v7 } from 'uuid';

/** Clock, ids and chance: passed in, so that tests can hold them still. */
export interface Runtime {
  now(): Date;
  /** A new UUID of version 7. */
  uuid(): string;
  random(bytes: number): Buffer;
}

/** Randomness is drawn by the page: a system call for each id would cost more than the id. */
const POOL_BYTES = 4096;
let pool = Buffer.alloc(0);
let used = 0;

function pooled(bytes: number): Buffer {
  if (used + bytes > pool.length) {
    pool = randomBytes(POOL_BYTES);
    used = 0;
  }
  used += bytes;
  return pool.subarray(used - bytes, used);
}

let lastMilliseconds = 0;
let sequence = 0;

/** UUIDs of version 7 that grow within this process, also within a millisecond and when the clock steps back. */
function growingUuid(): string {
  const milliseconds = Date.now();
  const random = pooled(16);
  if (milliseconds > lastMilliseconds) {
    lastMilliseconds = milliseconds;
    sequence = random.readUIntBE(0, 3);
  } else sequence++;
  return v7({ msecs: lastMilliseconds, seq: sequence, random });
}

export const systemRuntime: Runtime = {
  now: () => new Date(),
  uuid: growingUuid,
  random: (bytes) => randomBytes(bytes),
};

/** Milliseconds since it was made, to a tenth: for the log and for progress. */
export function stopwatch(): () => number {
  const began = performance.now();
  return () => Math.round((performance.now() - began) * 10) / 10;
}
