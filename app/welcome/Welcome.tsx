'use client';

import { useMutation } from '@tanstack/react-query';
import Link from 'next/link';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { useRead } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { Heading } from '@/app/ui/frame/Heading';
import { Failure, Skeleton } from '@/app/ui/Notice';
import type { SentOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/hub';

/** The first administrator of an empty hub; anywhere else there is nothing to do here. */
export function Welcome() {
  const hub = useRead<typeof contracts.getHub>('/hub');
  const make = useMutation({
    mutationFn: (body: SentOf<typeof contracts.createOrganization>) =>
      call<typeof contracts.createOrganization>('POST', '/organizations', { body }),
    onSuccess: () => window.location.assign('/projects'),
  });
  if (hub.error) return <Failure error={hub.error} retry={hub.refetch} />;
  if (!hub.data) return <Skeleton lines={4} />;
  if (!hub.data.empty && !make.isSuccess) {
    return (
      <Heading
        lead={
          <>
            This hub has its administrator already. <Link href="/sign-in">Sign in</Link>, or ask them for an
            invitation.
          </>
        }
      >
        Welcome
      </Heading>
    );
  }
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const text = (name: string) => String(form.get(name));
    make.mutate({
      name: text('organization'),
      administrator: { name: text('name'), email: text('email'), password: text('password') },
    });
  }
  return (
    <>
      <Heading lead="This hub is empty. Name the organization that it serves and make its first administrator, who invites everybody else.">
        Welcome
      </Heading>
      <form onSubmit={submit} className="max-w-[26rem] space-y-5">
        <Field
          label="Organization"
          name="organization"
          required
          maxLength={120}
          autoComplete="organization"
          autoFocus
        />
        <Field label="Your name" name="name" required maxLength={120} autoComplete="name" />
        <Field
          label="E-mail, to sign in with"
          name="email"
          type="email"
          required
          maxLength={254}
          autoComplete="username"
        />
        <Field
          label="Password, twelve characters at least"
          name="password"
          type="password"
          required
          minLength={12}
          maxLength={200}
          autoComplete="new-password"
        />
        {make.error ? <Failure error={make.error} /> : null}
        <Button type="submit" disabled={make.isPending || make.isSuccess}>
          Begin
        </Button>
      </form>
    </>
  );
}
