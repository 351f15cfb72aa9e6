'use client';

import type * as contracts from '@/openapi/contracts/setups';
import { usePages } from './queries';
import { useCan } from './whoami';

/** Milliseconds between two looks at what was withdrawn: somebody may be working from it. */
const LOOK_AGAIN = 20_000;

/** Withdrawals that crews have not answered, the newest first; read again by itself. */
export function useOpenWithdrawals(projectId: string | undefined) {
  const mayRead = useCan('acknowledgements:read');
  return usePages<typeof contracts.listAcknowledgements>(
    '/projects/{projectId}/acknowledgements',
    { params: { projectId: projectId ?? '' }, query: { open: 'true', limit: 200 } },
    { enabled: mayRead && projectId !== undefined, every: LOOK_AGAIN },
  );
}
