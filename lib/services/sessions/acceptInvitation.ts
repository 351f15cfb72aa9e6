import { and, eq } from 'drizzle-orm';
import { directory, people } from '@/db/schema';
import { handleTransaction } from '@/db/tenant';
import { hashPassword, isWeakPassword } from '@/lib/access/passwords';
import { isSecret, sha256 } from '@/lib/access/secrets';
import { countFailure, requireAttempt } from '@/lib/access/throttle';
import { invalid, Problem } from '@/lib/problem';
import type { PublicContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { endSessions } from './end';
import { type OpenedSession, openSession } from './open';

/** Sets the password of an invited person, ends the invitation and signs in. */
export async function acceptInvitation(
  context: PublicContext,
  { body }: { body: { token: string; password: string } },
): Promise<OpenedSession> {
  const handle = sha256(body.token);
  await requireAttempt(handle.toString('hex'), context.address);
  if (isWeakPassword(body.password)) throw invalid('/password', 'password_weak');
  if (!isSecret(body.token, 'hti')) {
    await countFailure(handle.toString('hex'), context.address);
    throw new Problem('invitation_used', 'That is no invitation of this hub.');
  }
  const passwordHash = await hashPassword(body.password);
  return handleTransaction(handle, 'invitation', async (tenant) => {
    const [found] = await tenant.db
      .select()
      .from(people)
      .where(eq(people.invitationSha256, handle))
      .for('update');
    const expired =
      !found?.invitationExpiresAt || new Date(found.invitationExpiresAt) <= context.runtime.now();
    if (!found || expired || found.status === 'closed') throw new Problem('invitation_used');
    const change = {
      passwordHash,
      status: 'active' as const,
      invitationSha256: null,
      invitationExpiresAt: null,
    };
    await tenant.db
      .update(people)
      .set(change)
      .where(and(eq(people.organizationId, found.organizationId), eq(people.id, found.id)));
    await tenant.db.delete(directory).where(eq(directory.handleSha256, handle));
    // Whoever knew the old password is out.
    await endSessions({ ...context, tenant }, found);
    const { organizationId, id, name } = found;
    record(
      { ...context, tenant },
      { kind: 'person', organizationId, personId: id, name },
      { type: 'person.accepted', subject: id },
    );
    return openSession({ ...context, tenant }, { ...found, ...change });
  });
}
