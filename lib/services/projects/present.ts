import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { toleranceClasses } from '@/db/schema';
import { Lengths } from '@/lib/services/lengths';
import { presentLimit, projectLimit } from '@/lib/services/levelRuns/limit';
import { asMoment } from '@/lib/services/moments';
import type { Project } from '@/openapi/schemas/project';
import type { ProjectRow } from './load';

type ClassRow = InferSelectModel<typeof toleranceClasses>;

/** @param classes of this project, in their order */
export function presentProject(row: ProjectRow, classes: readonly ClassRow[]): z.output<typeof Project> {
  const length = new Lengths(row.lengthUnit);
  const { positionSigmaHorizontal, positionSigmaVertical } = row;
  return {
    id: row.id,
    name: row.name,
    lengthUnit: row.lengthUnit,
    frame: row.frame,
    toleranceClasses: classes.map((c) => ({
      name: c.name,
      residual: { horizontal: length.out(c.residualHorizontal), vertical: length.out(c.residualVertical) },
      work: {
        radius: length.out(c.workRadius),
        horizontal: length.out(c.workHorizontal),
        vertical: length.out(c.workVertical),
      },
      checkRequired: c.checkRequired,
      ...(c.citation === null ? {} : { citation: c.citation }),
    })),
    combinedFactor: row.combinedFactor,
    siteElevation: length.outOrNull(row.siteElevation),
    refraction: { coefficient: row.refraction, sigma: row.refractionSigma },
    controlSigma: {
      horizontal: length.out(row.controlSigmaHorizontal),
      vertical: length.out(row.controlSigmaVertical),
    },
    positionSigma:
      positionSigmaHorizontal === null || positionSigmaVertical === null
        ? null
        : { horizontal: length.out(positionSigmaHorizontal), vertical: length.out(positionSigmaVertical) },
    levelLimit: presentLimit(projectLimit(row)),
    setupValidMinutes: row.setupValidMinutes,
    displayDecimals: row.displayDecimals,
    units: { length: row.lengthUnit },
    createdAt: asMoment(row.createdAt),
    updatedAt: asMoment(row.updatedAt),
  };
}
