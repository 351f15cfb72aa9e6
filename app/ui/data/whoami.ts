'use client';

import type * as contracts from '@/openapi/contracts/hub';
import type { Scope } from '@/openapi/scopes';
import { useRead } from './queries';

export function useWhoami() {
  return useRead<typeof contracts.whoami>('/whoami');
}

/** Whether the person at the screen may do something; false while it is not known. */
export function useCan(scope: Scope): boolean {
  return useWhoami().data?.scopes.includes(scope) ?? false;
}
