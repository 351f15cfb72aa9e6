'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { answerOf, type Delivery, deliveryState, type Hook } from '@/app/(console)/hooks/hook';
import { call } from '@/app/ui/data/call';
import { refresh, usePages } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/webhooks';
import { OneDelivery } from './OneDelivery';

const PATH = '/webhook-endpoints/{webhookEndpointId}/deliveries';
/** Milliseconds between two looks: whoever has just sent a test waits for its answer. */
const LOOK_AGAIN = 3_000;
const SHOWN = 25;

const KIND = { event: null, replay: 'sent again', test: 'a test' } as const;

/** What was told, newest first, and what came back. */
export function Deliveries({ hook, mayReplay }: { hook: Hook; mayReplay: boolean }) {
  const client = useQueryClient();
  const params = { webhookEndpointId: hook.id };
  const list = usePages<typeof contracts.listWebhookDeliveries>(
    PATH,
    { params, query: { limit: SHOWN } },
    { every: LOOK_AGAIN },
  );
  const [seen, setSeen] = useState<Delivery | null>(null);
  const replay = useMutation({
    mutationFn: (deliveryId: string) =>
      call<typeof contracts.replayWebhookDelivery>('POST', `${PATH}/{deliveryId}/replay`, {
        params: { ...params, deliveryId },
      }),
    onSuccess: () => refresh(client, PATH),
  });
  return (
    <section className="min-w-0">
      <h2 className="mb-3 font-head text-[19px]">Deliveries</h2>
      {replay.error ? <Failure error={replay.error} /> : null}
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title="Nothing told yet">
          What happens from now on comes here. Send a test to see whether the receiver answers.
        </Empty>
      ) : (
        <Table
          caption="Deliveries, newest first"
          rows={list.rows}
          keyOf={(delivery) => delivery.id}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            {
              name: 'Message',
              value: (delivery) => delivery.eventType,
              cell: (delivery) => (
                <>
                  <button
                    type="button"
                    onClick={() => setSeen(delivery)}
                    className="cursor-pointer text-left font-semibold break-all underline"
                  >
                    {delivery.eventType}
                    <span className="sr-only"> of {moment(delivery.createdAt)}</span>
                  </button>
                  <span className="block text-[13.5px] text-ink-third">
                    {[moment(delivery.createdAt), KIND[delivery.kind]].filter(Boolean).join(', ')}
                  </span>
                </>
              ),
            },
            { name: 'Answer', wide: true, value: answerOf },
            { name: 'Attempts', wide: true, value: (delivery) => delivery.attempts },
            {
              name: 'State',
              value: (delivery) => deliveryState(delivery).word,
              cell: (delivery) => (
                <State tone={deliveryState(delivery).tone}>{deliveryState(delivery).word}</State>
              ),
            },
            ...(mayReplay
              ? [
                  {
                    name: 'Acts',
                    cell: (delivery: Delivery) =>
                      delivery.kind === 'test' || !hook.enabled || delivery.status === 'pending' ? null : (
                        <span className="flex justify-end">
                          <Button
                            look="plain"
                            small
                            disabled={replay.isPending}
                            onClick={() => replay.mutate(delivery.id)}
                          >
                            Replay
                            <span className="sr-only">
                              {' '}
                              {delivery.eventType} of {moment(delivery.createdAt)}
                            </span>
                          </Button>
                        </span>
                      ),
                  },
                ]
              : []),
          ]}
        />
      )}
      {seen ? <OneDelivery hook={hook} delivery={seen} close={() => setSeen(null)} /> : null}
    </section>
  );
}
