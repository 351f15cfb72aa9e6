import type { InferInsertModel } from 'drizzle-orm';
import type {
  benchChecks,
  gradeChecks,
  levelDifferences,
  levelRuns,
  observations,
  pegTests,
  setupChecks,
  setupResults,
  setups,
} from '@/db/schema';
import type { BenchCheckRow } from '@/lib/services/benchChecks/load';
import type { LevelRunRow } from '@/lib/services/levelRuns/load';
import type { PegTestRow } from '@/lib/services/pegTests/result';
import type { Happening } from '@/lib/services/record';
import type { CheckRow, LoadedSetup, SetupRow } from '@/lib/services/setups/load';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import type { Site, SiteSetup } from './site';

type GradeRow = Required<InferInsertModel<typeof gradeChecks>>;

/** What an upload will write, item after item; what a setup becomes is seen by the items behind it. */
export interface Draft {
  uploadId: string;
  document: Document;
  /** Where each accepted item stood in what was sent. */
  places: Record<string, number[]>;
  site: Site;
  refused: ProblemItem[];
  setups: LoadedSetup[];
  checks: CheckRow[];
  gradeRows: GradeRow[];
  benchRows: BenchCheckRow[];
  levelRows: LevelRunRow[];
  pegRows: PegTestRow[];
  rows: {
    setups: InferInsertModel<typeof setups>[];
    setupResults: InferInsertModel<typeof setupResults>[];
    observations: InferInsertModel<typeof observations>[];
    setupChecks: InferInsertModel<typeof setupChecks>[];
    gradeChecks: InferInsertModel<typeof gradeChecks>[];
    benchChecks: InferInsertModel<typeof benchChecks>[];
    pegTests: InferInsertModel<typeof pegTests>[];
    levelRuns: InferInsertModel<typeof levelRuns>[];
    levelDifferences: InferInsertModel<typeof levelDifferences>[];
  };
  /** Setups that stood before and have a new result. */
  rejudged: Map<string, SetupRow>;
  happenings: Happening[];
}

/** Where item `index` of an array stood in what was sent. */
export function pointerOf(draft: Draft, kind: string, index: number): string {
  return `/${kind}/${draft.places[kind]?.[index] ?? index}`;
}

/** A setup by clientId or id: one of this upload, or one that stood before, in its newest state. */
export function findSetup(draft: Draft, ref: string): SiteSetup | null {
  const made = draft.setups.find(({ setup }) => setup.clientId === ref || setup.id === ref);
  if (made) {
    const shotIds = draft.rows.observations.filter((o) => o.setupId === made.setup.id).map((o) => o.clientId);
    return { setup: made.setup, result: made.result.result, checks: made.checks, releases: [], shotIds };
  }
  return draft.site.setups.find(({ setup }) => setup.clientId === ref || setup.id === ref) ?? null;
}

/** The setup that refits have put in place of a superseded one; null for one that stands. */
export function successorOf({ site }: Draft, { setup }: SiteSetup): SiteSetup | null {
  if (setup.state !== 'superseded') return null;
  return (
    site.setups.find((other) => other.setup.rootId === setup.rootId && other.setup.state !== 'superseded') ??
    null
  );
}
