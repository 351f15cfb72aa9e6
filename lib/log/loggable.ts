import { databaseFault } from '@/db/faults';

/** What the log may hold of an error: a driver's message carries parameters, so it is left out. */
export function loggable(error: unknown): Record<string, unknown> {
  const fault = databaseFault(error);
  if (!(error instanceof Error)) return { error: typeof error };
  const frames = (error.stack ?? '').split('\n').filter((line) => /^\s+at /.test(line));
  if (fault) return { error: error.name, sqlstate: fault.sqlstate, constraint: fault.constraint, frames };
  return { error: error.name, message: error.message, frames };
}
