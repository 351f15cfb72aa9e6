'use client';

import { useMutation } from '@tanstack/react-query';
import { call, Refusal } from '@/app/ui/data/call';
import { useWhoami } from '@/app/ui/data/whoami';
import type * as contracts from '@/openapi/contracts/sessions';

/** Who is signed in, and the way out. Nobody is shown the door while the session still works. */
export function SignOut() {
  const { data } = useWhoami();
  const leave = useMutation({
    mutationFn: () => call<typeof contracts.signOut>('DELETE', '/sessions/current').catch(unlessEnded),
    onSuccess: () => window.location.assign('/sign-in'),
  });
  if (!data) return null;
  return (
    <div className="text-[13.5px] leading-snug text-ink-second">
      <p className="font-medium text-ink">{data.name}</p>
      <p>{data.organization.name}</p>
      <button
        type="button"
        disabled={leave.isPending}
        onClick={() => leave.mutate()}
        className="mt-1 cursor-pointer underline"
      >
        Sign out
      </button>
      {leave.error ? (
        <p role="alert" className="mt-2 font-medium text-fail">
          You are still signed in: {leave.error.message} Try again.
        </p>
      ) : null}
    </div>
  );
}

/** A session that has ended already needs no end. */
function unlessEnded(error: unknown): void {
  if (!(error instanceof Refusal && error.problem.status === 401)) throw error;
}
