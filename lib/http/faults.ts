import { databaseFault } from '@/db/faults';
import { RolledBackError } from '@/db/tenant';
import { BodyError } from '@/lib/formats/body';
import { JsonError } from '@/lib/formats/strictJson';
import { Problem } from '@/lib/problem';
import { BusyError } from '@/lib/turns';

const RETRY_SECONDS = 2;

/** What went wrong, as a problem: the only place where errors become answers. */
export function problemOf(error: unknown): Problem {
  if (error instanceof Problem) return error;
  if (error instanceof BodyError || error instanceof JsonError) return new Problem(error.code, error.message);
  if (error instanceof BusyError || error instanceof RolledBackError) return unavailable();
  const fault = databaseFault(error);
  if (fault?.kind === 'unavailable') return unavailable();
  if (fault?.kind === 'unique') return new Problem('conflict');
  return new Problem('internal');
}

function unavailable(): Problem {
  return new Problem('unavailable', undefined, { retryAfter: RETRY_SECONDS });
}
