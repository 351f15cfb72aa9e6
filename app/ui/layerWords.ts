import type * as z from 'zod';
import type { Layer } from '@/openapi/schemas/design';
import { decimalsOf, fixed, type LengthUnit, signed, stated, unitSign } from './numbers';

type Shown = z.output<typeof Layer>;

/** How far ground may be off. */
export function allowed({ tolerance, units }: Pick<Shown, 'tolerance' | 'units'>): string {
  const { below, above } = tolerance;
  const decimals = Math.max(decimalsOf(below, units.length), decimalsOf(above, units.length));
  return `${fixed(below, decimals)} low to ${fixed(above, decimals)} ${unitSign(units.length)} high`;
}

/** Where a layer lies from its surface, with the sign in words. */
export function liesAt({
  offset,
  surfaceName,
  units,
}: Pick<Shown, 'offset' | 'surfaceName' | 'units'>): string {
  if (offset === 0) return `on ${surfaceName}`;
  const distance = `${stated(Math.abs(offset), units.length)} ${unitSign(units.length)}`;
  return `${distance} ${offset < 0 ? 'below' : 'above'} ${surfaceName}`;
}

/** An offset as a machine is told it. */
export function signedOffset(offset: number, unit: LengthUnit): string {
  return `${signed(offset, decimalsOf(offset, unit))} ${unitSign(unit)}`;
}

/** What a lot is accepted by, with the clause that says so. */
export function acceptedBy({ acceptance }: Pick<Shown, 'acceptance'>): string {
  if (!acceptance) return 'each point on its own';
  const by = `(${acceptance.citation})`;
  if (acceptance.rule === 'everyPoint') return `every point ${by}`;
  if (acceptance.rule === 'window') return `${acceptance.required} of any ${acceptance.of} in a row ${by}`;
  return `${acceptance.minimum} percent within limits ${by}`;
}
