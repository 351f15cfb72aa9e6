import type * as z from 'zod';
import type { Layer } from '@/openapi/schemas/design';
import { fixed, unitSign } from './numbers';

type Shown = z.output<typeof Layer>;

/** How far ground may be off. */
export function allowed({ tolerance, units }: Pick<Shown, 'tolerance' | 'units'>): string {
  return `${fixed(tolerance.below, 2)} low to ${fixed(tolerance.above, 2)} ${unitSign(units.length)} high`;
}

/** What a lot is accepted by, with the clause that says so. */
export function acceptedBy({ acceptance }: Pick<Shown, 'acceptance'>): string {
  if (!acceptance) return 'each point on its own';
  const by = `(${acceptance.citation})`;
  if (acceptance.rule === 'everyPoint') return `every point ${by}`;
  if (acceptance.rule === 'window') return `${acceptance.required} of any ${acceptance.of} in a row ${by}`;
  return `${acceptance.minimum} percent within limits ${by}`;
}
