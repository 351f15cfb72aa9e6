import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { changeEndpoint, loadEndpoint } from './load';
import { presentEndpoint } from './present';
import { makeSecret } from './secret';

/** A new signing secret; the one before it signs along for the overlap. */
export async function rotateWebhookSecret(
  context: VerbContext,
  { params, body }: { params: { webhookEndpointId: string }; body: { overlapMinutes: number } },
) {
  const { caller, runtime } = context;
  const before = await loadEndpoint(context, params.webhookEndpointId, true);
  const now = runtime.now();
  const { secret, secretSealed } = makeSecret(before, runtime);
  const overlaps = body.overlapMinutes > 0;
  const after = await changeEndpoint(context, before, {
    secretSealed,
    secretMadeAt: now.toISOString(),
    previousSecretSealed: overlaps ? before.secretSealed : null,
    previousSecretEndsAt: overlaps
      ? new Date(now.getTime() + body.overlapMinutes * 60_000).toISOString()
      : null,
  });
  record(context, caller, {
    type: 'webhookEndpoint.rotated',
    subject: before.id,
    data: { overlapMinutes: body.overlapMinutes },
  });
  return { endpoint: presentEndpoint(after, now), secret };
}
