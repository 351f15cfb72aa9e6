import type { InferSelectModel } from 'drizzle-orm';
import type { pegTests } from '@/db/schema';
import type { PegStanding, PegTest } from '@/lib/compute/survey/levelling/pegTest';

/** A change of figures raises the version. */
export const PEG_TEST_VERSION = '1.0.0';

/** A two-peg test as it is kept, in SI units, with what it was computed from and with. */
export interface PegTestResult extends PegTest {
  standings: PegStanding[];
  doubleRun: number;
  curvature: number;
  note: string | null;
}

export type PegTestRow = Omit<InferSelectModel<typeof pegTests>, 'result'> & {
  instrumentName: string;
  result: PegTestResult;
};
