'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'next/navigation';
import { type FormEvent, useState } from 'react';
import type { Hook } from '@/app/(console)/hooks/hook';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/webhooks';
import { RotateHook } from './RotateHook';

const PATH = '/webhook-endpoints/{webhookEndpointId}';
const READ = ['/webhook-endpoints', PATH, `${PATH}/deliveries`];

/** What can be done with a hook. */
export function Acts({ hook }: { hook: Hook }) {
  const client = useQueryClient();
  const params = { webhookEndpointId: hook.id };
  const [open, setOpen] = useState<'rotate' | 'replay' | 'off' | 'delete' | null>(null);
  const close = () => setOpen(null);
  const test = useMutation({
    mutationFn: () => call<typeof contracts.testWebhookEndpoint>('POST', `${PATH}/test`, { params }),
    onSuccess: () => refresh(client, ...READ),
  });
  const on = useMutation({
    mutationFn: () =>
      call<typeof contracts.updateWebhookEndpoint>('PATCH', PATH, { params, body: { enabled: true } }),
    onSuccess: () => refresh(client, ...READ),
  });
  const error = test.error ?? on.error;
  return (
    <div className="flex max-w-[34rem] flex-wrap justify-end gap-2.5 max-md:justify-start">
      <Button disabled={test.isPending} onClick={() => test.mutate()}>
        Send a test
      </Button>
      {hook.enabled ? (
        <Button look="plain" onClick={() => setOpen('replay')}>
          Replay a time
        </Button>
      ) : (
        <Button look="plain" disabled={on.isPending} onClick={() => on.mutate()}>
          Switch on
        </Button>
      )}
      <Button look="plain" onClick={() => setOpen('rotate')}>
        Rotate
      </Button>
      {hook.enabled ? (
        <Button look="danger" onClick={() => setOpen('off')}>
          Switch off
        </Button>
      ) : (
        <Button look="danger" onClick={() => setOpen('delete')}>
          Delete
        </Button>
      )}
      {error ? <Failure error={error} /> : null}
      {open === 'rotate' ? <RotateHook hook={hook} close={close} /> : null}
      {open === 'replay' ? <ReplayTime hook={hook} close={close} /> : null}
      {open === 'off' ? <SwitchOff hook={hook} close={close} /> : null}
      {open === 'delete' ? <DeleteHook hook={hook} close={close} /> : null}
    </div>
  );
}

interface Act {
  hook: Hook;
  close: () => void;
}

function SwitchOff({ hook, close }: Act) {
  const client = useQueryClient();
  const off = useMutation({
    mutationFn: () =>
      call<typeof contracts.updateWebhookEndpoint>('PATCH', PATH, {
        params: { webhookEndpointId: hook.id },
        body: { enabled: false },
      }),
    onSuccess: async () => {
      await refresh(client, ...READ);
      close();
    },
  });
  return (
    <Dialog title="Switch it off" close={close} held={off.isPending}>
      <div className="space-y-4">
        <p>
          Nothing is sent from now on, nor what is still on its way. Once it is on again, replay the time
          between.
        </p>
        {off.error ? <Failure error={off.error} /> : null}
        <div className="flex gap-3">
          <Button look="danger" disabled={off.isPending} onClick={() => off.mutate()}>
            Switch it off now
          </Button>
          <Button look="plain" disabled={off.isPending} onClick={close}>
            Leave it on
          </Button>
        </div>
      </div>
    </Dialog>
  );
}

function DeleteHook({ hook, close }: Act) {
  const client = useQueryClient();
  const router = useRouter();
  const remove = useMutation({
    mutationFn: () =>
      call<typeof contracts.deleteWebhookEndpoint>('DELETE', PATH, {
        params: { webhookEndpointId: hook.id },
      }),
    onSuccess: async () => {
      await refresh(client, '/webhook-endpoints');
      router.push('/hooks');
    },
  });
  return (
    <Dialog title="Delete the hook" close={close} held={remove.isPending}>
      <div className="space-y-4">
        <p>
          It goes with all its deliveries, and its secret signs nothing more. Who did it stays in the audit.
        </p>
        {remove.error ? <Failure error={remove.error} /> : null}
        <div className="flex gap-3">
          <Button look="danger" disabled={remove.isPending} onClick={() => remove.mutate()}>
            Delete it
          </Button>
          <Button look="plain" disabled={remove.isPending} onClick={close}>
            Keep it
          </Button>
        </div>
      </div>
    </Dialog>
  );
}

function ReplayTime({ hook, close }: Act) {
  const client = useQueryClient();
  const replay = useMutation({
    mutationFn: (body: { since: string; until?: string }) =>
      call<typeof contracts.replayWebhookEvents>('POST', `${PATH}/replays`, {
        params: { webhookEndpointId: hook.id },
        body,
      }),
    onSuccess: () => refresh(client, ...READ),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const until = String(form.get('until') ?? '');
    replay.mutate({
      since: new Date(String(form.get('since'))).toISOString(),
      until: until ? new Date(until).toISOString() : undefined,
    });
  }
  return (
    <Dialog title="Replay a time" close={close} held={replay.isPending}>
      {replay.data ? (
        <div className="space-y-4">
          <p role="status">
            {replay.data.count === 0
              ? 'Nothing of what this hook is told happened in that time.'
              : `${replay.data.count} ${replay.data.count === 1 ? 'message is' : 'messages are'} on the way.`}
          </p>
          <Button onClick={close}>Good</Button>
        </div>
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <p>
            Everything that this hook is told of is sent again, each message under its own id, so that the
            receiver knows what it has had already.
          </p>
          <div className="grid gap-4 sm:grid-cols-2">
            <Field label="From" name="since" type="datetime-local" required />
            <Field label="To; now, if left empty" name="until" type="datetime-local" />
          </div>
          {replay.error ? <Failure error={replay.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={replay.isPending}>
              Send again
            </Button>
            <Button look="plain" disabled={replay.isPending} onClick={close}>
              Not now
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
