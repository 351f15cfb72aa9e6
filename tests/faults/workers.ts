import { environmentOf, type HubDatabase } from '@/tests/setup/hub';
import { startProgram } from '@/tests/setup/program';

export type Worker = Awaited<ReturnType<typeof startWorker>>;

/** Starts a worker on a database, waits until it is ready, and keeps what it says. */
export async function startWorker(database: HubDatabase) {
  const program = startProgram('scripts/worker.ts', environmentOf(database));
  const lines: string[] = [];
  program.listen((line) => lines.push(line));
  await program.said(/worker ready/);
  const count = (words: string) => lines.filter((line) => line.includes(words)).length;
  return { ...program, count, jobsDone: () => count('"job done"') };
}

/** Jobs of a worker that died a moment ago are taken for those of one that has just come: now it is longer ago. */
export const LONGER_AGO = `
  update graphile_worker._private_jobs set locked_at = locked_at - interval '1 minute' where locked_at is not null`;
