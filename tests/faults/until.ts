import { setTimeout as pause } from 'node:timers/promises';

const EVERY_MS = 20;

/** Asks until the answer is not empty and returns it; fails after `seconds`. */
export async function until<T>(
  what: string,
  ask: () => T | Promise<T>,
  seconds = 30,
): Promise<Exclude<T, null | undefined | false>> {
  const deadline = performance.now() + seconds * 1000;
  for (;;) {
    const answer = await ask();
    if (answer !== null && answer !== undefined && answer !== false)
      return answer as Exclude<T, null | undefined | false>;
    if (performance.now() > deadline) throw new Error(`Not within ${seconds} s: ${what}.`);
    await pause(EVERY_MS);
  }
}
