'use client';

import { call } from '@/app/ui/data/call';
import { useWhoami } from '@/app/ui/data/whoami';
import type * as contracts from '@/openapi/contracts/sessions';

/** Who is signed in, and the way out. */
export function SignOut() {
  const { data } = useWhoami();
  if (!data) return null;
  async function leave() {
    await call<typeof contracts.signOut>('DELETE', '/sessions/current').catch(() => undefined);
    window.location.assign('/sign-in');
  }
  return (
    <div className="text-[13.5px] leading-snug text-ink-second">
      <p className="font-medium text-ink">{data.name}</p>
      <p>{data.organization.name}</p>
      <button type="button" onClick={leave} className="mt-1 cursor-pointer underline">
        Sign out
      </button>
    </div>
  );
}
