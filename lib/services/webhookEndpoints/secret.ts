import { seal, unseal } from '@/lib/access/seal';
import { getConfig } from '@/lib/config';
import { newSigningSecret } from '@/lib/notify/signature';
import type { Runtime } from '@/lib/runtime';
import type { EndpointRow } from './load';

type Whose = Pick<EndpointRow, 'organizationId' | 'id'>;

const placeOf = ({ organizationId, id }: Whose) => `webhook/${organizationId}/${id}`;

/** A new signing secret, as it is shown once and as it is kept. */
export function makeSecret(whose: Whose, runtime: Runtime): { secret: string; secretSealed: Buffer } {
  const secret = newSigningSecret(runtime);
  return { secret, secretSealed: seal(secret, placeOf(whose), getConfig().secret, runtime) };
}

/** What takes the former secret off an endpoint whose overlap is over at a moment; null where there is none such. */
export function withoutEndedSecret(
  { previousSecretEndsAt: endsAt }: Pick<EndpointRow, 'previousSecretEndsAt'>,
  now: Date,
): Pick<EndpointRow, 'previousSecretSealed' | 'previousSecretEndsAt'> | null {
  const ended = endsAt !== null && new Date(endsAt) <= now;
  return ended ? { previousSecretSealed: null, previousSecretEndsAt: null } : null;
}

/**
 * The secrets that a message is signed with at a moment: the newest first, and the one before it while they overlap.
 *
 * @throws Error where the hub's own secret has changed since
 */
export function secretsAt(row: EndpointRow, now: Date): string[] {
  const { secretSealed, previousSecretSealed: previous, previousSecretEndsAt: endsAt } = row;
  const overlaps = previous !== null && endsAt !== null && new Date(endsAt) > now;
  return [secretSealed, ...(overlaps ? [previous] : [])].map((sealed) =>
    unseal(sealed, placeOf(row), getConfig().secret),
  );
}
