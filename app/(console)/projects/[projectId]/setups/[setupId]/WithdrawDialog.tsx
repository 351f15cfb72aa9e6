'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import Link from 'next/link';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/setups';
import type { ShownSetup } from './SetupSheet';

export function WithdrawDialog({
  setup,
  projectId,
  close,
}: {
  setup: ShownSetup;
  projectId: string;
  close: () => void;
}) {
  const client = useQueryClient();
  const withdraw = useMutation({
    mutationFn: (note: string | undefined) =>
      call<typeof contracts.withdrawSetup>('POST', '/projects/{projectId}/setups/{setupId}/withdraw', {
        params: { projectId, setupId: setup.id },
        body: { note },
      }),
    onSuccess: () =>
      refresh(
        client,
        '/projects/{projectId}/setups/{setupId}',
        '/projects/{projectId}/setups/{setupId}/affected',
        '/projects/{projectId}/setups',
        '/projects/{projectId}/acknowledgements',
        '/audit-entries',
      ),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    withdraw.mutate(String(new FormData(event.currentTarget).get('note') ?? '').trim() || undefined);
  }
  return (
    <Dialog title={`Withdraw ${setup.station}`} close={close} held={withdraw.isPending}>
      {withdraw.data ? (
        <div className="space-y-4">
          <p className="font-semibold text-fail">{withdraw.data.caution}</p>
          {withdraw.data.acknowledgements.length > 0 ? (
            <>
              <ul className="list-disc pl-5">
                {withdraw.data.acknowledgements.map(({ id, text }) => (
                  <li key={id}>{text}</li>
                ))}
              </ul>
              <p>
                Each crew’s answer is kept under{' '}
                <Link href={`/projects/${projectId}/withdrawals`} className="underline">
                  Withdrawals
                </Link>
                .
              </p>
            </>
          ) : (
            <p>It was released to no machine: no crew has to answer.</p>
          )}
          <Button onClick={close}>Done</Button>
        </div>
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <p>It ends the setup’s force. It stops no machine: radio each one, now.</p>
          <Field label="What happened" name="note" maxLength={2000} autoFocus />
          {withdraw.error ? <Failure error={withdraw.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" look="danger" disabled={withdraw.isPending}>
              Withdraw
            </Button>
            <Button look="plain" disabled={withdraw.isPending} onClick={close}>
              Keep it
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
