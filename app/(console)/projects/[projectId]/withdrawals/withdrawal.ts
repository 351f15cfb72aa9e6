import type * as z from 'zod';
import type { Acknowledgement } from '@/openapi/schemas/setup';

export type Withdrawal = z.output<typeof Acknowledgement>;

export interface Listed {
  projectId: string;
  rows: readonly Withdrawal[];
  more: { has: boolean; busy: boolean; read: () => void };
}
