'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import type { SentOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/people';
import type { Role } from '@/openapi/scopes';
import { InvitationLink } from './InvitationLink';
import { RoleSelect } from './RoleSelect';

export function InvitePerson({ close }: { close: () => void }) {
  const client = useQueryClient();
  const invite = useMutation({
    mutationFn: (body: SentOf<typeof contracts.createPerson>) =>
      call<typeof contracts.createPerson>('POST', '/people', { body }),
    onSuccess: () => refresh(client, '/people'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const text = (name: string) => String(form.get(name));
    invite.mutate({ name: text('name'), email: text('email'), role: text('role') as Role });
  }
  return (
    <Dialog
      title={invite.data ? `Invitation for ${invite.data.person.name}` : 'Invite a person'}
      close={close}
      held={invite.isPending || invite.isSuccess}
    >
      {invite.data ? (
        <InvitationLink invitation={invite.data.invitation} close={close} />
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <Field label="Name" name="name" required maxLength={120} autoFocus />
          <Field label="E-mail, to sign in with" name="email" type="email" required maxLength={254} />
          <RoleSelect />
          {invite.error ? <Failure error={invite.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={invite.isPending}>
              Invite
            </Button>
            <Button look="plain" disabled={invite.isPending} onClick={close}>
              Not now
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
