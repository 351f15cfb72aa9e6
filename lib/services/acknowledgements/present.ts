import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { acknowledgements } from '@/db/schema';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { Acknowledgement } from '@/openapi/schemas/setup';

export type AcknowledgementRow = InferSelectModel<typeof acknowledgements>;

/** An acknowledgement with what it is about. */
export interface FoundAcknowledgement {
  row: AcknowledgementRow;
  station: string;
  withdrawnBy: string;
}

export function presentAcknowledgement({
  row,
  station,
  withdrawnBy,
}: FoundAcknowledgement): z.output<typeof Acknowledgement> {
  return {
    id: row.id,
    machine: row.machine,
    setupId: row.setupId,
    station,
    text: `${row.machine}: stop. ${station} is withdrawn${row.reason === null ? '.' : `: ${row.reason}`}`,
    withdrawnBy,
    withdrawnAt: asMoment(row.openedAt),
    reason: row.reason,
    openedAt: asMoment(row.openedAt),
    acknowledgedAt: asMomentOrNull(row.acknowledgedAt),
    acknowledgedBy: row.acknowledgedBy,
    note: row.note,
  };
}
