import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { people } from '@/db/schema';
import { asMoment } from '@/lib/services/moments';
import type { Person } from '@/openapi/schemas/access';

export type PersonRow = InferSelectModel<typeof people>;

export function presentPerson(row: PersonRow): z.output<typeof Person> {
  return {
    id: row.id,
    name: row.name,
    email: row.email,
    role: row.role,
    status: row.status,
    createdAt: asMoment(row.createdAt),
  };
}
