import { parentPort, workerData } from 'node:worker_threads';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { NetworkError } from '@/lib/compute/survey/networkResult';
import type { Outcome } from './compute';

/** What a thread of its own does: one adjustment, from the data that it is started with to one message. */
function outcome(input: NetworkInput): Outcome {
  try {
    return { result: adjustNetwork(input) };
  } catch (error) {
    if (!(error instanceof NetworkError)) throw error;
    // A class does not survive the way between threads.
    const { code, points, sources } = error;
    return { refused: { code, points, sources } };
  }
}

parentPort?.postMessage(outcome((workerData as { input: NetworkInput }).input));
