'use client';

import { useMutation } from '@tanstack/react-query';
import { type FormEvent, useState, useSyncExternalStore } from 'react';
import { call } from '@/app/ui/data/call';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { Heading } from '@/app/ui/frame/Heading';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/sessions';

const subscribe = (change: () => void) => {
  window.addEventListener('hashchange', change);
  return () => window.removeEventListener('hashchange', change);
};

/** The token stands after the # of the link, which no server log ever sees; null until the browser has told. */
function useToken(): string | null {
  return useSyncExternalStore(
    subscribe,
    () => window.location.hash.slice(1),
    () => null,
  );
}

export function Accept() {
  const token = useToken();
  if (token === null) return null;
  if (token !== '') return <SetPassword token={token} />;
  return (
    <Heading lead="Copy the whole link of your invitation, up to its last character, or ask your administrator for a new one.">
      The link is incomplete
    </Heading>
  );
}

function SetPassword({ token }: { token: string }) {
  const [differs, setDiffers] = useState(false);
  const accept = useMutation({
    mutationFn: (password: string) =>
      call<typeof contracts.acceptInvitation>('POST', '/invitations/acceptances', {
        body: { token, password },
      }),
    onSuccess: () => window.location.assign('/projects'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const same = form.get('password') === form.get('again');
    setDiffers(!same);
    if (same) accept.mutate(String(form.get('password')));
  }
  return (
    <>
      <Heading lead="Set the password that you will sign in with. The link works once.">
        You are invited
      </Heading>
      <form onSubmit={submit} className="max-w-[26rem] space-y-5">
        <Field
          label="Password, twelve characters at least"
          name="password"
          type="password"
          required
          minLength={12}
          maxLength={200}
          autoComplete="new-password"
          autoFocus
        />
        <Field label="Once more" name="again" type="password" required autoComplete="new-password" />
        <p role="alert" className="min-h-6 font-medium text-fail">
          {differs ? 'The two differ.' : ''}
        </p>
        {accept.error ? <Failure error={accept.error} /> : null}
        <Button type="submit" disabled={accept.isPending || accept.isSuccess}>
          Set the password
        </Button>
      </form>
    </>
  );
}
