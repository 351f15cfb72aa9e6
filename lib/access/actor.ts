import type { Role, Scope } from '@/openapi/scopes';

/** Who acts. A key acts for its responsible person, who counts as submitter. */
export type Actor =
  | {
      kind: 'person';
      organizationId: string;
      personId: string;
      name: string;
      role: Role;
      scopes: readonly Scope[];
      projectIds: null;
      sessionId: string;
      expiresAt: string;
    }
  | {
      kind: 'key';
      organizationId: string;
      personId: string;
      keyId: string;
      name: string;
      scopes: readonly Scope[];
      /** Null = all projects. */
      projectIds: readonly string[] | null;
      expiresAt: string | null;
    }
  | { kind: 'job'; organizationId: string; name: string };

/** A person or a key: somebody whom a request can come from. */
export type Caller = Exclude<Actor, { kind: 'job' }>;

/** The id under which an actor's rows are kept: the key's own, the person's own. */
export function callerId(
  caller: { kind: 'person'; personId: string } | { kind: 'key'; keyId: string },
): string {
  switch (caller.kind) {
    case 'person':
      return caller.personId;
    case 'key':
      return caller.keyId;
  }
}

export function mayUseProject(caller: Caller, projectId: string): boolean {
  return caller.projectIds === null || caller.projectIds.includes(projectId);
}
