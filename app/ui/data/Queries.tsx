'use client';

import { QueryCache, QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { type ReactNode, useState } from 'react';
import { Refusal } from './call';
import { shouldRetry } from './queries';

/** Somebody whose session has ended signs in again and comes back to the same page. */
function toSignIn(error: Error): void {
  if (!(error instanceof Refusal) || error.problem.status !== 401) return;
  const { pathname, search } = window.location;
  window.location.assign(`/sign-in?next=${encodeURIComponent(pathname + search)}`);
}

/** `open` pages are read by whoever comes: nobody is sent to sign in from them. */
export function Queries({ open = false, children }: { open?: boolean; children: ReactNode }) {
  const [client] = useState(
    () =>
      new QueryClient({
        queryCache: new QueryCache(open ? {} : { onError: toSignIn }),
        defaultOptions: {
          queries: { retry: shouldRetry, staleTime: 10_000, networkMode: 'always' },
          // A change is made now or not at all: none waits unseen for the connection.
          mutations: { networkMode: 'always' },
        },
      }),
  );
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}
