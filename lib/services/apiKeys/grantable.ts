import type { Caller } from '@/lib/access/actor';
import { invalidItems } from '@/lib/problem';
import { problemItem } from '@/openapi/problemItem';
import type { Scope } from '@/openapi/scopes';

/** Nobody hands out, or takes over by rotating, more than they have. */
export function requireOwnScopes(caller: Caller, scopes: readonly Scope[]): void {
  const foreign = scopes.flatMap((scope, i) =>
    caller.scopes.includes(scope)
      ? []
      : [problemItem(`/scopes/${i}`, 'scope_not_yours', `You do not have ${scope} yourself.`)],
  );
  if (foreign.length > 0) throw invalidItems(foreign);
}

/** Whether a caller's own projects cover those of a key. */
export function coversProjects(caller: Caller, projectIds: readonly string[] | null): boolean {
  if (caller.projectIds === null) return true;
  return projectIds?.every((id) => caller.projectIds?.includes(id)) ?? false;
}
