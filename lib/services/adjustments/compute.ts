import { once } from 'node:events';
import { Worker } from 'node:worker_threads';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { NetworkError, type NetworkResult } from '@/lib/compute/survey/networkResult';
import { observationCount } from './count';

const MODULE = new URL('./networkThread.ts', import.meta.url).href;
/** Node.js 20 reads the first module of a thread without the loaders that it was given: they are registered by hand. */
const ENTRY = `import('tsx/esm/api').then(({ register }) => {
  register();
  return import(require('node:worker_threads').workerData.module);
})`;

/** What a thread answers: a result, or why there is none. */
export type Outcome =
  | { result: NetworkResult }
  | { refused: Pick<NetworkError, 'code' | 'points' | 'sources'> };

/** Observations that are adjusted within a blink: a thread of its own takes longer to begin than they do. */
const BLINK = 1_000;

/**
 * Adjusts a network, a large one in a thread of its own: it takes seconds, in which the worker still has to hear of
 * its other jobs, of messages to send and of its stop.
 *
 * @throws NetworkError where it cannot be computed at all
 */
export async function computeNetwork(input: NetworkInput): Promise<NetworkResult> {
  if (observationCount(input) < BLINK) return adjustNetwork(input);
  const thread = new Worker(ENTRY, { eval: true, workerData: { input, module: MODULE } });
  try {
    const ended = once(thread, 'exit').then(([code]) => {
      throw new Error(`The thread ended with ${code} before its result.`);
    });
    const [outcome] = (await Promise.race([once(thread, 'message'), ended])) as [Outcome];
    if ('result' in outcome) return outcome.result;
    const { code, points, sources } = outcome.refused;
    throw new NetworkError(code, points, sources);
  } finally {
    await thread.terminate();
  }
}
