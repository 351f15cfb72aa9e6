import { and, eq } from 'drizzle-orm';
import { directory, people } from '@/db/schema';
import { newSecret, sha256 } from '@/lib/access/secrets';
import type { VerbContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { type PersonRow, presentPerson } from './present';

const VALID_DAYS = 7;

/** Gives a person a new invitation; an earlier one ends with it. The token is answered and nowhere kept. */
export async function invite({ tenant, runtime }: VerbContext, person: PersonRow) {
  const token = newSecret('hti', runtime);
  const invitationSha256 = sha256(token);
  const expiresAt = new Date(runtime.now().getTime() + VALID_DAYS * 86_400_000).toISOString();
  if (person.invitationSha256) {
    await tenant.db.delete(directory).where(eq(directory.handleSha256, person.invitationSha256));
  }
  await tenant.db.insert(directory).values({
    handleSha256: invitationSha256,
    organizationId: person.organizationId,
    kind: 'invitation',
    subjectId: person.id,
  });
  await tenant.db
    .update(people)
    .set({ invitationSha256, invitationExpiresAt: expiresAt })
    .where(and(eq(people.organizationId, person.organizationId), eq(people.id, person.id)));
  // The token stands behind #, where no server and no log sees it.
  const invitation = { token, path: `/invitation#${token}`, expiresAt: asMoment(expiresAt) };
  return { person: presentPerson(person), invitation };
}
