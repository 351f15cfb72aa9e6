import type * as z from 'zod';
import { mmPerRootKm, perRootMetre } from '@/lib/compute/survey/levelling/accuracy';
import { type LevelLimit, ofRootMile, perRootMile, THIRD_ORDER } from '@/lib/compute/survey/levelling/limit';
import { fromMetres, toMetres } from '@/lib/compute/units/convert';
import { MILLIMETRE } from '@/lib/compute/units/table';
import type * as schemas from '@/openapi/schemas/levelLimit';

/** A limit with where it comes from. */
export interface CitedLimit extends LevelLimit {
  citation: string | null;
  source: 'run' | 'project' | 'default';
}

const DEFAULT: CitedLimit = {
  ...THIRD_ORDER,
  citation: 'common practice: third order, Standards and Specifications for Geodetic Control Networks (1984)',
  source: 'default',
};

/** A limit as it was sent, in SI units. */
export function limitOf(sent: z.output<typeof schemas.LevelLimit>, source: 'run' | 'project'): CitedLimit {
  const citation = sent.citation ?? null;
  if (sent.mmPerRootSetup !== undefined)
    return { per: 'setup', factor: sent.mmPerRootSetup * MILLIMETRE, citation, source };
  const factor =
    sent.mmPerRootKm === undefined
      ? perRootMile(toMetres(sent.ftPerRootMile ?? 0, 'ft'))
      : perRootMetre(sent.mmPerRootKm);
  return { per: 'length', factor, citation, source };
}

/** What a project's row says of its limit. */
export interface LimitColumns {
  levelLimitPer: 'length' | 'setup' | null;
  levelLimitFactor: number | null;
  levelLimitCitation: string | null;
}

export function limitColumns(sent: z.output<typeof schemas.LevelLimit> | null): LimitColumns {
  if (sent === null) return { levelLimitPer: null, levelLimitFactor: null, levelLimitCitation: null };
  const { per, factor, citation } = limitOf(sent, 'project');
  return { levelLimitPer: per, levelLimitFactor: factor, levelLimitCitation: citation };
}

/** The limit that stands in a project. */
export function projectLimit(row: LimitColumns): CitedLimit {
  const { levelLimitPer: per, levelLimitFactor: factor, levelLimitCitation: citation } = row;
  return per === null || factor === null ? DEFAULT : { per, factor, citation, source: 'project' };
}

const clean = (value: number) => Number(value.toPrecision(12));

export function presentLimit({
  per,
  factor,
  citation,
  source,
}: CitedLimit): z.output<typeof schemas.StatedLevelLimit> {
  const byLength = per === 'length';
  return {
    mmPerRootKm: byLength ? clean(mmPerRootKm(factor)) : null,
    ftPerRootMile: byLength ? clean(fromMetres(ofRootMile(factor), 'ft')) : null,
    mmPerRootSetup: byLength ? null : clean(factor / MILLIMETRE),
    citation,
    source,
  };
}
