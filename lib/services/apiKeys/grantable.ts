import { type Caller, mayUseProject } from '@/lib/access/actor';
import { invalidItems, Problem } from '@/lib/problem';
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

/** @throws Problem where a key reaches projects that the caller's own do not cover */
export function requireCoveredProjects(caller: Caller, projectIds: readonly string[] | null): void {
  if (caller.projectIds === null) return;
  if (!projectIds?.every((id) => mayUseProject(caller, id)))
    throw new Problem('forbidden', 'That key reaches projects that you do not.');
}
