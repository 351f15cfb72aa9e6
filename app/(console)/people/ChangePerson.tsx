'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { useWhoami } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import type { SentOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/people';
import type { Role } from '@/openapi/scopes';
import { InvitationLink } from './InvitationLink';
import type { Person } from './person';
import { RoleSelect } from './RoleSelect';

/** Another name or role, a new invitation, or the end of the account. */
export function ChangePerson({ person, close }: { person: Person; close: () => void }) {
  const client = useQueryClient();
  const myself = useWhoami().data?.personId === person.id;
  const params = { personId: person.id };
  const change = useMutation({
    mutationFn: (body: SentOf<typeof contracts.updatePerson>) =>
      call<typeof contracts.updatePerson>('PATCH', '/people/{personId}', { params, body }),
    onSuccess: async () => {
      await refresh(client, '/people', '/whoami');
      close();
    },
  });
  const invite = useMutation({
    mutationFn: () =>
      call<typeof contracts.reinvitePerson>('POST', '/people/{personId}/invitations', { params }),
    onSuccess: () => refresh(client, '/people'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    change.mutate({ name: String(form.get('name')), role: String(form.get('role')) as Role });
  }
  const error = change.error ?? invite.error;
  const busy = change.isPending || invite.isPending;
  return (
    <Dialog title={person.name} close={close} held={busy || invite.isSuccess}>
      {invite.data ? (
        <InvitationLink invitation={invite.data.invitation} close={close} />
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <p className="text-ink-second">{person.email}</p>
          <Field label="Name" name="name" required maxLength={120} defaultValue={person.name} />
          <RoleSelect role={person.role} />
          {error ? <Failure error={error} /> : null}
          <div className="flex flex-wrap gap-3">
            <Button type="submit" disabled={busy}>
              Keep the change
            </Button>
            {person.status === 'closed' ? (
              <Button look="plain" disabled={busy} onClick={() => change.mutate({ status: 'active' })}>
                Open the account again
              </Button>
            ) : (
              <>
                <Button look="plain" disabled={busy} onClick={() => invite.mutate()}>
                  {person.status === 'invited' ? 'Invite again' : 'Let them set a new password'}
                </Button>
                <Button
                  look="danger"
                  disabled={busy || myself}
                  title={myself ? 'Your own account is closed by another administrator.' : undefined}
                  onClick={() => change.mutate({ status: 'closed' })}
                >
                  Close the account
                </Button>
              </>
            )}
          </div>
        </form>
      )}
    </Dialog>
  );
}
