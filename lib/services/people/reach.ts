import type { Caller } from '@/lib/access/actor';
import { invalid, Problem } from '@/lib/problem';
import { ROLE_SCOPES, type Role } from '@/openapi/scopes';
import type { PersonRow } from './present';

/**
 * Nobody gives a role that may do more than they.
 *
 * @throws Problem
 */
export function requireOwnRole(caller: Caller, role: Role): void {
  const missing = missingScopes(caller, role);
  if (missing.length > 0)
    throw invalid('/role', 'scope_not_yours', `The role ${role} has ${missing.join(', ')}; you do not.`);
}

/**
 * Nobody changes, or invites anew, a person who may do more than they: an invitation is a way into the account.
 *
 * @throws Problem
 */
export function requireReach(caller: Caller, { role }: PersonRow): void {
  const missing = missingScopes(caller, role);
  if (missing.length > 0)
    throw new Problem('forbidden', `That person has ${missing.join(', ')} by their role; you do not.`);
}

function missingScopes(caller: Caller, role: Role): string[] {
  return ROLE_SCOPES[role].filter((scope) => !caller.scopes.includes(scope));
}
