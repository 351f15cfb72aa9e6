import { and, eq, inArray, ne } from 'drizzle-orm';
import { people, projects } from '@/db/schema';
import { mayUseProject } from '@/lib/access/actor';
import { invalid, invalidItems } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { record } from '@/lib/services/record';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/apiKeys';
import { problemItem } from '@/openapi/problemItem';
import { requireOwnScopes } from './grantable';
import { issueKey } from './issue';
import { presentApiKey } from './present';

type Body = JsonOf<typeof contract.createApiKey>;

/** Makes a key: nobody hands out more than they have. */
export async function createApiKey(context: VerbContext, { body }: { body: Body }) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  requireOwnScopes(caller, body.scopes);
  await requireProjects(context, body);
  const responsiblePersonId = body.responsiblePersonId ?? caller.personId;
  const [person] = await tenant.db
    .select({ id: people.id })
    .from(people)
    .where(
      and(
        eq(people.organizationId, organizationId),
        eq(people.id, responsiblePersonId),
        ne(people.status, 'closed'),
      ),
    );
  if (!person) throw invalid('/responsiblePersonId', 'person_unknown');
  const expiresAt = body.expiresAt === undefined ? null : utcInstant(body.expiresAt);
  if (expiresAt !== null && new Date(expiresAt) <= runtime.now()) {
    throw invalid(
      '/expiresAt',
      'time_out_of_order',
      'The key would be expired already.',
      'Choose a later time.',
    );
  }
  const { row, secret } = await issueKey(context, organizationId, {
    name: body.name,
    scopes: [...new Set(body.scopes)],
    projectIds: body.projectIds,
    responsiblePersonId,
    expiresAt,
  });
  record(context, caller, {
    type: 'apiKey.created',
    subject: row.id,
    data: { name: row.name, prefix: row.prefix, scopes: row.scopes, projectIds: row.projectIds },
  });
  return { apiKey: presentApiKey(row, runtime.now()), secret };
}

/** A key bound to projects makes keys for no others. */
async function requireProjects({ tenant, caller }: VerbContext, { projectIds }: Body): Promise<void> {
  if (projectIds === null) {
    if (caller.projectIds === null) return;
    throw invalid('/projectIds', 'project_unknown', 'Your own key is bound to projects: name them.');
  }
  const found = await tenant.db
    .select({ id: projects.id })
    .from(projects)
    .where(and(eq(projects.organizationId, caller.organizationId), inArray(projects.id, projectIds)));
  const known = new Set(found.map(({ id }) => id));
  const missing = projectIds.flatMap((id, i) =>
    known.has(id) && mayUseProject(caller, id) ? [] : [problemItem(`/projectIds/${i}`, 'project_unknown')],
  );
  if (missing.length > 0) throw invalidItems(missing);
}
