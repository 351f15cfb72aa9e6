import type * as z from 'zod';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { Words } from '@/lib/services/setups/words';
import type { Affected } from '@/openapi/schemas/affected';
import type { AffectedPage, AffectedRow, Kind } from './items';

export interface Since {
  at: string | null;
  checkId: string | null;
  setupId: string | null;
  text: string;
}

export function presentAffected(
  projectId: string,
  subject: z.output<typeof Affected>['subject'],
  since: Since,
  first: Words[],
  { rows, counts, machines, nextCursor }: AffectedPage,
): z.output<typeof Affected> {
  return {
    subject,
    since: { ...since, at: asMomentOrNull(since.at) },
    counts,
    actions: [...first, ...actionsOf(counts, machines)],
    data: rows.map((row) => ({
      kind: row.kind,
      id: row.id,
      at: asMoment(row.at),
      setupId: row.setup_id,
      station: row.station,
      machine: row.machine,
      layer: row.layer,
      verdict: row.verdict,
      href: `/api/v1/projects/${projectId}/${pathOf(row)}`,
    })),
    nextCursor,
  };
}

function pathOf({ kind, id, setup_id }: AffectedRow): string {
  switch (kind) {
    case 'setup':
      return `setups/${id}`;
    case 'release':
      return `setups/${setup_id}`;
    case 'benchCheck':
      return `bench-checks/${id}`;
    case 'gradeCheck':
      return `grade-checks/${id}`;
  }
}

function actionsOf(counts: Record<Kind, number>, machines: readonly string[]): Words[] {
  const words: Words[] = [];
  const add = (code: string, text: string, action: string) => words.push({ code, text, action });
  const many = (count: number, one: string) => `${count} ${one}${count === 1 ? '' : 's'}`;
  if (machines.length > 0) {
    add(
      'machines_affected',
      `${machines.join(', ')} worked from it since.`,
      `Radio ${machines.join(', ')} now: stop, lift the blade, wait. This record stops no machine.`,
    );
  }
  if (counts.setup > 0) {
    add(
      'setups_affected',
      `${many(counts.setup, 'setup')} used it since.`,
      'Refit each without it, or withdraw it and set up anew.',
    );
  }
  if (counts.benchCheck > 0) {
    add(
      'bench_checks_affected',
      `${many(counts.benchCheck, 'bench check')} since then hang on it.`,
      'Bench those blades again on a mark that is trusted.',
    );
  }
  if (counts.gradeCheck > 0) {
    add(
      'grade_checks_affected',
      `${many(counts.gradeCheck, 'grade check')} since then hang on it.`,
      'Shoot them again from a setup that stands before the lot is claimed.',
    );
  }
  if (words.length === 0) {
    words.push({ code: 'nothing_affected', text: 'Nothing hangs on it since it was last known to be good.' });
  }
  return words;
}
