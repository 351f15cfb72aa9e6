'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import type { Hook } from '@/app/(console)/hooks/hook';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import { Once } from '@/app/ui/Once';
import type * as contracts from '@/openapi/contracts/webhooks';

const OVERLAPS = [
  { minutes: 0, name: 'not at all' },
  { minutes: 60, name: 'for an hour' },
  { minutes: 1440, name: 'for a day' },
  { minutes: 10_080, name: 'for a week' },
];

export function RotateHook({ hook, close }: { hook: Hook; close: () => void }) {
  const client = useQueryClient();
  const rotate = useMutation({
    mutationFn: (overlapMinutes: number) =>
      call<typeof contracts.rotateWebhookSecret>('POST', '/webhook-endpoints/{webhookEndpointId}/rotate', {
        params: { webhookEndpointId: hook.id },
        body: { overlapMinutes },
      }),
    onSuccess: () => refresh(client, '/webhook-endpoints', '/webhook-endpoints/{webhookEndpointId}'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    rotate.mutate(Number(new FormData(event.currentTarget).get('overlap')));
  }
  return (
    <Dialog title="Rotate the secret" close={close} held={rotate.isPending || rotate.isSuccess}>
      {rotate.data ? (
        <Once
          secret={rotate.data.secret}
          what="the new signing secret"
          note="Put it into the receiver before the old one ends."
          close={close}
        />
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <p>A new signing secret is made. Meanwhile each message carries both signatures.</p>
          <Select label="The old secret still signs" name="overlap" defaultValue={1440}>
            {OVERLAPS.map(({ minutes, name }) => (
              <option key={minutes} value={minutes}>
                {name}
              </option>
            ))}
          </Select>
          {rotate.error ? <Failure error={rotate.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={rotate.isPending}>
              Make the new secret
            </Button>
            <Button look="plain" disabled={rotate.isPending} onClick={close}>
              Not now
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
