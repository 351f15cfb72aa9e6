import { eq } from 'drizzle-orm';
import { directory, people } from '@/db/schema';
import { handleTransaction } from '@/db/tenant';
import { verifyPassword } from '@/lib/access/passwords';
import { emailHandle } from '@/lib/access/secrets';
import { clearFailures, countFailure, requireAttempt } from '@/lib/access/throttle';
import { Problem } from '@/lib/problem';
import type { PublicContext } from '@/lib/services/context';
import { loadPerson } from '@/lib/services/people/load';
import type { PersonRow } from '@/lib/services/people/present';
import { record } from '@/lib/services/record';
import { type OpenedSession, openSession } from './open';

/** Checks e-mail and password and opens a session; wrong and unknown answer alike, in like time. */
export async function signIn(
  context: PublicContext,
  { body }: { body: { email: string; password: string } },
): Promise<OpenedSession> {
  const handle = emailHandle(body.email);
  const account = handle.toString('hex');
  await requireAttempt(account, context.address);
  const person = await findPerson(handle);
  const usable = person?.status === 'active' ? person : null;
  if (!(await verifyPassword(body.password, usable?.passwordHash ?? null)) || !usable) {
    await countFailure(account, context.address);
    throw new Problem('sign_in_failed');
  }
  const opened = await handleTransaction(handle, 'email', async (tenant) => {
    const { organizationId, id } = usable;
    const person = await loadPerson(tenant, organizationId, id, true);
    // While the password was verified it may have been set anew, or the account closed.
    if (person.passwordHash !== usable.passwordHash || person.status !== 'active')
      throw new Problem('sign_in_failed');
    const { name } = person;
    record(
      { ...context, tenant },
      { kind: 'person', organizationId, personId: id, name },
      { type: 'session.opened', subject: id },
    );
    return openSession({ ...context, tenant }, person);
  });
  await clearFailures(account);
  return opened;
}

function findPerson(handle: Buffer): Promise<PersonRow | undefined> {
  return handleTransaction(handle, 'email', async (tenant) => {
    const [row] = await tenant.db
      .select({ person: people })
      .from(directory)
      .innerJoin(people, eq(people.id, directory.subjectId))
      .where(eq(directory.handleSha256, handle));
    return row?.person;
  });
}
