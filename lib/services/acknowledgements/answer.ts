import { and, eq } from 'drizzle-orm';
import { acknowledgements } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { selectAcknowledgements } from './load';
import { presentAcknowledgement } from './present';

type Answer = typeof contract.answerAcknowledgement;

/** Somebody says that a machine's crew knows of a withdrawal. */
export async function answerAcknowledgement(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Answer>; body: JsonOf<Answer> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const mine = and(
    eq(acknowledgements.organizationId, organizationId),
    eq(acknowledgements.id, params.acknowledgementId),
  );
  const [found] = await selectAcknowledgements(tenant)
    .where(and(mine, eq(acknowledgements.projectId, project.id)))
    .for('update', { of: acknowledgements });
  if (!found) throw new Problem('not_found', 'There is no such acknowledgement in this project.');
  if (found.row.acknowledgedAt !== null) throw new Problem('already_answered');
  const answer = {
    acknowledgedAt: runtime.now().toISOString(),
    acknowledgedBy: caller.name,
    note: body.note ?? null,
  };
  await tenant.db.update(acknowledgements).set(answer).where(mine);
  const { id, machine, setupId } = found.row;
  record(context, caller, {
    type: 'withdrawal.acknowledged',
    subject: id,
    projectId: project.id,
    data: { machine, setupId },
  });
  return presentAcknowledgement({ ...found, row: { ...found.row, ...answer } });
}
