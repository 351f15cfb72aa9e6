import { and, asc, eq, type InferSelectModel, inArray } from 'drizzle-orm';
import type * as z from 'zod';
import { toleranceClasses } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { SetupLimits } from '@/lib/compute/survey/verdict';
import type { LengthUnit } from '@/lib/compute/units/table';
import { invalid } from '@/lib/problem';
import { Lengths } from '@/lib/services/lengths';
import type { ToleranceClass } from '@/openapi/schemas/project';

type ClassInput = z.output<typeof ToleranceClass>;

const COMMON = 'common practice';

/** Stand in every new project, in feet, to be edited: common practice, not a rule. */
const DEFAULTS: readonly ClassInput[] = [
  {
    name: 'earthwork',
    residual: { horizontal: 0.03, vertical: 0.03 },
    work: { radius: 500, horizontal: 0.1, vertical: 0.05 },
    checkRequired: false,
    citation: `${COMMON}: the machine's bench check follows`,
  },
  {
    name: 'fine grade',
    residual: { horizontal: 0.015, vertical: 0.015 },
    work: { radius: 300, horizontal: 0.05, vertical: 0.02 },
    checkRequired: true,
    citation: COMMON,
  },
  {
    name: 'structures',
    residual: { horizontal: 0.01, vertical: 0.01 },
    work: { radius: 200, horizontal: 0.02, vertical: 0.01 },
    checkRequired: true,
    citation: COMMON,
  },
];

/** The classes of a project: those given, or the defaults in the project's own foot. */
export function classRows(
  organizationId: string,
  projectId: string,
  given: readonly ClassInput[] | undefined,
  projectUnit: LengthUnit,
) {
  const length = new Lengths(given ? projectUnit : projectUnit === 'm' ? 'ft' : projectUnit);
  const classes = given ?? DEFAULTS;
  const names = new Set<string>();
  return classes.map((c, position) => {
    if (names.has(c.name)) throw invalid(`/toleranceClasses/${position}/name`, 'name_repeated');
    names.add(c.name);
    return {
      organizationId,
      projectId,
      name: c.name,
      position,
      residualHorizontal: length.in(c.residual.horizontal),
      residualVertical: length.in(c.residual.vertical),
      workRadius: length.in(c.work.radius),
      workHorizontal: length.in(c.work.horizontal),
      workVertical: length.in(c.work.vertical),
      checkRequired: c.checkRequired,
      citation: c.citation ?? null,
    };
  });
}

/** What a class asks of a setup, as the engine takes it. */
export function classLimits(
  row: Omit<InferSelectModel<typeof toleranceClasses>, 'organizationId' | 'projectId' | 'name' | 'position'>,
): SetupLimits {
  return {
    residual: { horizontal: row.residualHorizontal, vertical: row.residualVertical },
    work: { radius: row.workRadius, horizontal: row.workHorizontal, vertical: row.workVertical },
    checkRequired: row.checkRequired,
  };
}

/** The classes of several projects, each project's in its own order. */
export async function loadClasses(tenant: Tenant, organizationId: string, projectIds: readonly string[]) {
  if (projectIds.length === 0) return [];
  return tenant.db
    .select()
    .from(toleranceClasses)
    .where(
      and(
        eq(toleranceClasses.organizationId, organizationId),
        inArray(toleranceClasses.projectId, [...projectIds]),
      ),
    )
    .orderBy(asc(toleranceClasses.position));
}
