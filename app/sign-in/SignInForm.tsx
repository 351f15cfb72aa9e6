'use client';

import { type FormEvent, useState } from 'react';
import { call, Refusal } from '@/app/ui/data/call';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { nextPath } from '@/app/ui/frame/nextPath';
import type * as contracts from '@/openapi/contracts/sessions';

/** What to tell somebody who could not sign in. */
function explain(error: unknown): string {
  if (!(error instanceof Refusal)) return 'The hub cannot be reached. Check the connection and try again.';
  const { code, detail, requestId } = error.problem;
  if (code === 'sign_in_failed') return 'E-mail or password is wrong.';
  return code === 'too_many_requests'
    ? `${detail} Try again in ${Math.ceil((error.retryAfter ?? 60) / 60)} min.`
    : `${detail} Request ${requestId}.`;
}

export function SignInForm() {
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setBusy(true);
    setFailure(null);
    try {
      const body = { email: String(form.get('email')), password: String(form.get('password')) };
      await call<typeof contracts.signIn>('POST', '/sessions', { body });
      window.location.assign(nextPath(window.location.search));
    } catch (error) {
      setFailure(explain(error));
      setBusy(false);
    }
  }

  return (
    <form onSubmit={submit} className="max-w-[26rem] space-y-5">
      <Field label="E-mail" name="email" type="email" autoComplete="username" required autoFocus />
      <Field label="Password" name="password" type="password" autoComplete="current-password" required />
      <p role="alert" className="min-h-6 font-medium text-fail">
        {failure}
      </p>
      <Button type="submit" disabled={busy}>
        {busy ? 'Signing in…' : 'Sign in'}
      </Button>
    </form>
  );
}
