import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/webhooks';
import { setPendingAside } from './disable';
import { requireEventScope, requireKnownProjects, requireTarget } from './filters';
import { changeEndpoint, type EndpointRow, loadEndpoint } from './load';
import { presentEndpoint } from './present';
import { tipOf } from './tip';

type Update = typeof contract.updateWebhookEndpoint;

/** Another address or filter, or off and on again: what happened between is not sent by itself. */
export async function updateWebhookEndpoint(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Update>; body: JsonOf<Update> },
) {
  const { tenant, caller, runtime } = context;
  const before = await loadEndpoint(context, params.webhookEndpointId, true);
  const { enabled, url, description, eventTypes, projectIds } = body;
  // To switch it off is always allowed: it may be what stops a leak.
  const onlyOff = enabled === false && Object.keys(body).length === 1;
  if (!onlyOff) requireEventScope(context);
  if (url !== undefined) requireTarget(url);
  if (projectIds !== undefined) await requireKnownProjects(context, projectIds);
  const change: Partial<EndpointRow> = {
    ...(url === undefined ? {} : { url }),
    ...(description === undefined ? {} : { description }),
    ...(eventTypes === undefined ? {} : { eventTypes }),
    ...(projectIds === undefined ? {} : { projectIds }),
  };
  if (enabled === true && !before.enabled)
    Object.assign(change, {
      ...(await tipOf(tenant, caller.organizationId)),
      enabled: true,
      disabledAt: null,
      disabledReason: null,
      failingSince: null,
    } satisfies Partial<EndpointRow>);
  if (enabled === false && before.enabled) {
    const at = runtime.now().toISOString();
    Object.assign(change, {
      enabled: false,
      disabledAt: at,
      disabledReason: 'by_request',
    } satisfies Partial<EndpointRow>);
    await setPendingAside(tenant, before, at);
  }
  const after = await changeEndpoint(context, before, change);
  const changed = { ...body, ...(url === undefined ? {} : { url: new URL(url).host }) };
  record(context, caller, { type: 'webhookEndpoint.changed', subject: before.id, data: { changed } });
  return presentEndpoint(after, runtime.now());
}
