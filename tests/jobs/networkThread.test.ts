import { expect, it, vi } from 'vitest';
import { computeNetwork } from '@/lib/services/adjustments/compute';

vi.mock(import('node:worker_threads'), async (original) => {
  const threads = await original();
  /** A thread that ends before it has said anything. */
  class Silent extends threads.Worker {
    constructor() {
      super('process.exit(3)', { eval: true });
    }
  }
  return { ...threads, Worker: Silent as typeof threads.Worker };
});

it('a thread that ends without a result is an error, not a wait for ever', async () => {
  const many = { setups: [], levelDifferences: Array.from({ length: 1_000 }, () => ({})) };
  await expect(computeNetwork(many as never)).rejects.toThrow('The thread ended with 3 before its result.');
});
