'use client';

import type * as z from 'zod';
import { type Delivery, deliveryState, type Hook } from '@/app/(console)/hooks/hook';
import { useRead } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type * as contracts from '@/openapi/contracts/webhooks';
import type { WebhookAttempt } from '@/openapi/schemas/webhook';

type Attempt = z.output<typeof WebhookAttempt>;

/** A message, and every attempt to get it through. */
export function OneDelivery({
  hook,
  delivery,
  close,
}: {
  hook: Hook;
  delivery: Delivery;
  close: () => void;
}) {
  const read = useRead<typeof contracts.getWebhookDelivery>(
    '/webhook-endpoints/{webhookEndpointId}/deliveries/{deliveryId}',
    { params: { webhookEndpointId: hook.id, deliveryId: delivery.id } },
  );
  const { tone, word } = deliveryState(delivery);
  return (
    <Dialog title={delivery.eventType} close={close}>
      <div className="space-y-5">
        <p>
          <State tone={tone}>{word}</State>
          {delivery.reason ? (
            <span className="mt-1 block text-ink-second">
              {delivery.reason.text} {delivery.reason.action}
            </span>
          ) : null}
        </p>
        {read.error ? (
          <Failure error={read.error} retry={read.refetch} />
        ) : !read.data ? (
          <Skeleton lines={3} />
        ) : (
          <>
            <div>
              <h3 className="mb-1.5 font-head text-[15px]">What is told</h3>
              <Text>{JSON.stringify(read.data.message, null, 2)}</Text>
            </div>
            {read.data.history.length > 0 ? (
              <div>
                <h3 className="mb-1.5 font-head text-[15px]">What came back</h3>
                <ol className="border-t border-rule">
                  {read.data.history.map((attempt) => (
                    <OneAttempt key={attempt.number} attempt={attempt} />
                  ))}
                </ol>
              </div>
            ) : null}
          </>
        )}
        <Button look="plain" onClick={close}>
          Close
        </Button>
      </div>
    </Dialog>
  );
}

function OneAttempt({ attempt }: { attempt: Attempt }) {
  const { number, startedAt, milliseconds, answer, failure, request } = attempt;
  return (
    <li className="border-b border-rule py-2.5">
      <p className="flex flex-wrap justify-between gap-x-4">
        <span className="font-semibold">
          {number}. {answer ? answer.status : 'no answer'}
        </span>
        <span className="text-ink-third">
          {moment(startedAt)}, {milliseconds} ms{request.address ? `, ${request.address}` : ''}
        </span>
      </p>
      {failure ? (
        <p className="text-[13.5px] text-ink-second">
          {failure.text} {failure.action}
        </p>
      ) : null}
      {answer?.body ? <Text>{answer.truncated ? `${answer.body}…` : answer.body}</Text> : null}
    </li>
  );
}

/** Text of others, as it came. */
function Text({ children }: { children: string }) {
  return (
    <pre
      // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls is reached by keyboard, too.
      tabIndex={0}
      className="max-h-[14rem] overflow-auto rounded border border-rule bg-sheet px-3.5 py-2.5 font-code text-[12.5px] leading-snug break-all whitespace-pre-wrap"
    >
      {children}
    </pre>
  );
}
