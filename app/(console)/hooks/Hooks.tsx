'use client';

import Link from 'next/link';
import { useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/webhooks';
import { EventTypes } from './EventTypes';
import { type Hook, hookState, hostOf } from './hook';
import { MakeHook } from './MakeHook';

/** Milliseconds between two looks: a hook that fails is told of by nobody else. */
const LOOK_AGAIN = 20_000;

export function Hooks() {
  const list = usePages<typeof contracts.listWebhookEndpoints>(
    '/webhook-endpoints',
    { query: { limit: 200 } },
    { every: LOOK_AGAIN },
  );
  const mayMake = useCan('webhooks:write');
  const [making, setMaking] = useState(false);
  return (
    <>
      <Crumb trail={[{ name: 'Hooks' }]} />
      <PageHead
        title="Hooks"
        sub="Addresses that are told what happens, each message signed. What does not get through is tried again for three days."
        aside={mayMake ? <Button onClick={() => setMaking(true)}>Make a hook</Button> : null}
      />
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title="No hook yet">
          A program that wants to know at once when a setup is withdrawn has it posted to an address of its
          own. Programs that ask now and then follow the events instead.
        </Empty>
      ) : (
        <HookTable
          hooks={list.rows}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
        />
      )}
      {making ? <MakeHook close={() => setMaking(false)} /> : null}
    </>
  );
}

function HookTable({
  hooks,
  more,
}: {
  hooks: readonly Hook[];
  more: { has: boolean; busy: boolean; read: () => void };
}) {
  return (
    <Table
      caption="Hooks, newest first"
      file="hooks"
      rows={hooks}
      keyOf={(hook) => hook.id}
      more={more}
      columns={[
        {
          name: 'Receiver',
          value: (hook) => hook.description ?? hostOf(hook),
          cell: (hook) => (
            <>
              <Link href={`/hooks/${hook.id}`} className="block font-semibold underline">
                {hook.description ?? hostOf(hook)}
              </Link>
              <code className="font-code text-[12.5px] break-all text-ink-third">{hook.url}</code>
            </>
          ),
        },
        {
          name: 'Told of',
          wide: true,
          value: (hook) => hook.eventTypes?.join(' ') ?? 'everything',
          cell: (hook) => <EventTypes types={hook.eventTypes} />,
        },
        {
          name: 'Projects',
          wide: true,
          value: (hook) => (hook.projectIds === null ? 'all' : `${hook.projectIds.length} chosen`),
        },
        {
          name: 'Last delivered',
          wide: true,
          value: (hook) => hook.lastDeliveredAt,
          cell: (hook) => (hook.lastDeliveredAt === null ? 'never' : moment(hook.lastDeliveredAt)),
        },
        {
          name: 'State',
          value: (hook) => hookState(hook).word,
          cell: (hook) => <State tone={hookState(hook).tone}>{hookState(hook).word}</State>,
        },
      ]}
    />
  );
}
