'use client';

import { useRouter } from 'next/navigation';
import { type FormEvent, useState } from 'react';
import { Field } from '@/app/ui/form/Field';
import type { Problem } from '@/openapi/schemas/problem';

/** What to tell somebody who could not sign in. */
function explain(problem: Partial<Problem>, retryAfter: string | null): string {
  if (problem.code === 'too_many_requests') {
    return `Too many attempts. Try again in ${Math.ceil(Number(retryAfter ?? 60) / 60)} min.`;
  }
  if (problem.code === 'sign_in_failed') return 'E-mail or password is wrong.';
  return `${problem.detail ?? 'The hub did not answer as expected.'} Request ${problem.requestId ?? 'unknown'}.`;
}

export function SignInForm() {
  const router = useRouter();
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const { email, password } = Object.fromEntries(new FormData(event.currentTarget));
    setBusy(true);
    setFailure(null);
    try {
      const response = await fetch('/api/v1/sessions', {
        method: 'POST',
        headers: { 'Content-Type': 'application/json' },
        body: JSON.stringify({ email, password }),
      });
      if (response.ok) {
        router.push('/reference');
        return;
      }
      setFailure(explain(await response.json(), response.headers.get('retry-after')));
    } catch {
      setFailure('The hub cannot be reached. Check the connection and try again.');
    }
    setBusy(false);
  }

  return (
    <form onSubmit={submit} className="max-w-[26rem] space-y-5">
      <Field label="E-mail" name="email" type="email" autoComplete="username" required autoFocus />
      <Field label="Password" name="password" type="password" autoComplete="current-password" required />
      <p role="alert" className="min-h-6 font-medium text-fail">
        {failure}
      </p>
      <button
        type="submit"
        disabled={busy}
        className="cursor-pointer rounded border-[1.5px] border-ink bg-ink px-5 py-3 font-semibold leading-none text-paper disabled:opacity-60"
      >
        {busy ? 'Signing in…' : 'Sign in'}
      </button>
    </form>
  );
}
