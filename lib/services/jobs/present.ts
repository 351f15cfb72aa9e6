import { problemDocument } from '@/lib/problem';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import { API_BASE } from '@/openapi/base';
import { REQUEST_PROBLEMS, type RequestProblemCode } from '@/openapi/problemCodes';
import type { Job } from '@/openapi/schemas/job';
import { hasEnded, type JobRow } from './load';
import { STEPS } from './steps';

const RESULTS: Record<JobRow['kind'], (row: JobRow) => string> = {
  adjustment: ({ projectId, subjectId }) => `/projects/${projectId}/adjustments/${subjectId}`,
};

export function presentJob(row: JobRow): Job {
  const { progress } = row;
  return {
    id: row.id,
    kind: row.kind,
    status: row.status,
    projectId: row.projectId,
    progress: progress && {
      step: STEPS[progress.step] ?? progress.step,
      done: progress.done,
      of: progress.of,
    },
    result: row.status === 'succeeded' ? `${API_BASE}${RESULTS[row.kind](row)}` : null,
    problem: row.problem && presentProblem(row, row.problem),
    attempts: row.attempts,
    cancelRequested: row.cancelRequestedAt !== null && !hasEnded(row),
    createdBy: row.createdBy,
    createdAt: asMoment(row.createdAt),
    startedAt: asMomentOrNull(row.startedAt),
    finishedAt: asMomentOrNull(row.finishedAt),
  };
}

function presentProblem({ id, requestId }: JobRow, { code, detail, errors }: NonNullable<JobRow['problem']>) {
  const known = (code in REQUEST_PROBLEMS ? code : 'internal') as RequestProblemCode;
  return problemDocument(
    { code: known, message: detail, options: { errors } },
    requestId,
    `${API_BASE}/jobs/${id}`,
  );
}
