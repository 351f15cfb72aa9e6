import type { Tenant } from '@/db/tenant';
import type { Actor } from '@/lib/access/actor';
import type { Runtime } from '@/lib/runtime';
import type { JobContext } from './end';
import type { JobRow } from './load';

/** A job under way, as the work of its kind sees it. */
export interface RunningJob {
  job: JobRow;
  runtime: Runtime;
  /** A transaction of the job's organization to read in. What is written in it is there even if the job fails. */
  read<T>(work: (tenant: Tenant) => Promise<T>): Promise<T>;
  /**
   * Says that a step begins; throws where the job was cancelled or has passed to another worker.
   *
   * @param step a code of STEPS
   */
  step(step: string, done: number, of: number): Promise<void>;
}

/** Writes what came of a job, in the transaction in which the job succeeds. */
export type Finish = (context: JobContext, actor: Actor) => Promise<void>;

/**
 * What a kind of job does. It may be run twice, and another time after its worker died: it writes nothing but through
 * the Finish that it answers.
 *
 * @throws Problem where it cannot be done: the job then fails, with that problem
 */
export type Work = (job: RunningJob) => Promise<Finish>;
