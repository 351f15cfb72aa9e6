import type { VerbContext } from '@/lib/services/context';
import type { ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/jobs';
import { loadJob } from './load';
import { presentJob } from './present';

type Read = typeof contract.getJob;

export async function readJob({ tenant, caller }: VerbContext, { params }: { params: ParamsOf<Read> }) {
  return presentJob(await loadJob(tenant, caller, params.jobId));
}
