'use client';

import { EventTypes } from '@/app/(console)/hooks/EventTypes';
import { type Hook, hookState, hostOf } from '@/app/(console)/hooks/hook';
import { useRead } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Ledger } from '@/app/ui/Ledger';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type * as contracts from '@/openapi/contracts/webhooks';
import { Acts } from './Acts';
import { Deliveries } from './Deliveries';

/** Milliseconds between two looks at how it stands: every delivery may change it. */
const LOOK_AGAIN = 5_000;

/** One hook: how it stands, what was told and what came back. */
export function HookSheet({ webhookEndpointId }: { webhookEndpointId: string }) {
  const hook = useRead<typeof contracts.getWebhookEndpoint>(
    '/webhook-endpoints/{webhookEndpointId}',
    { params: { webhookEndpointId } },
    true,
    LOOK_AGAIN,
  );
  const mayChange = useCan('webhooks:write');
  const trail = [{ name: 'Hooks', href: '/hooks' }];
  if (hook.error || !hook.data)
    return (
      <>
        <Crumb trail={[...trail, { name: 'Hook' }]} />
        <PageHead title="Hook" />
        {hook.error ? <Failure error={hook.error} retry={hook.refetch} /> : <Skeleton />}
      </>
    );
  const { data } = hook;
  const name = data.description ?? hostOf(data);
  const { tone, word } = hookState(data);
  return (
    <>
      <Crumb trail={[...trail, { name }]} />
      <PageHead
        title={name}
        sub={<code className="font-code text-[13.5px] break-all">{data.url}</code>}
        aside={mayChange ? <Acts hook={data} /> : null}
      >
        <p className="mt-3">
          <State tone={tone}>{word}</State>
        </p>
      </PageHead>
      <Why hook={data} />
      <div className="grid gap-x-14 gap-y-9 xl:grid-cols-[minmax(0,1fr)_23rem]">
        <Deliveries hook={data} mayReplay={mayChange} />
        <About hook={data} />
      </div>
    </>
  );
}

/** What is the matter, and what to do. */
function Why({ hook }: { hook: Hook }) {
  const { reason, status } = hook;
  if (reason === null || reason.code === 'by_request') return null;
  const look = status === 'disabled' ? 'border-fail bg-fail-soft' : 'border-hold bg-hold-soft';
  return (
    <p role="status" className={`mb-7 rounded border px-5 py-4 ${look}`}>
      <span className="font-semibold">{reason.text}</span> {reason.action}
    </p>
  );
}

function About({ hook }: { hook: Hook }) {
  const { secret, projectIds, lastDeliveredAt, createdAt, eventTypes } = hook;
  return (
    <Ledger
      title="What it is told"
      entries={[
        { name: 'Events', value: <EventTypes types={eventTypes} /> },
        { name: 'Projects', value: projectIds === null ? 'all' : `${projectIds.length} chosen` },
        { name: 'Since', value: moment(createdAt) },
        { name: 'Last delivered', value: lastDeliveredAt === null ? 'never' : moment(lastDeliveredAt) },
        { name: 'Secret made', value: moment(secret.madeAt) },
        ...(secret.previousEndsAt
          ? [{ name: 'Old secret signs', value: `until ${moment(secret.previousEndsAt)}` }]
          : []),
      ]}
    />
  );
}
