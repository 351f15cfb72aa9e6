import type * as z from 'zod';
import type { Person as PersonSchema } from '@/openapi/schemas/access';
import type { Role } from '@/openapi/scopes';

export type Person = z.output<typeof PersonSchema>;

/** What a role is for, in words. */
export const ROLE_WORDS: Record<Role, string> = {
  admin: 'keeps the hub: keys, people and all that a surveyor may',
  surveyor: 'runs the site: control, setups, releases, design',
  foreman: 'reads results and answers withdrawals',
  inspector: 'reads everything, posts checks and may withdraw a setup',
  analyst: 'reads results',
};
