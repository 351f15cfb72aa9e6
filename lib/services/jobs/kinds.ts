import { adjust } from '@/lib/services/adjustments/adjust';
import type { JobRow } from './load';
import type { Work } from './work';

/** The work of each kind of job. */
export const KINDS: Record<JobRow['kind'], Work> = { adjustment: adjust };
