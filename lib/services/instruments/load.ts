import { and, eq, type SQL } from 'drizzle-orm';
import { instrumentCalibrations, instruments } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { InstrumentRow } from './present';

/** Instruments of a project with their present figures. */
export function currentInstruments(tenant: Tenant, organizationId: string, projectId: string, further?: SQL) {
  return tenant.db
    .select({ instrument: instruments, calibration: instrumentCalibrations })
    .from(instruments)
    .innerJoin(
      instrumentCalibrations,
      and(
        eq(instrumentCalibrations.organizationId, instruments.organizationId),
        eq(instrumentCalibrations.instrumentId, instruments.id),
        eq(instrumentCalibrations.version, instruments.calibrationVersion),
      ),
    )
    .where(
      and(eq(instruments.organizationId, organizationId), eq(instruments.projectId, projectId), further),
    );
}

/** @throws Problem where the project has no instrument of that name */
export async function loadInstrument(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  name: string,
): Promise<InstrumentRow> {
  const [row] = await currentInstruments(tenant, organizationId, projectId, eq(instruments.name, name));
  if (!row) throw new Problem('not_found', `There is no instrument ${name} in this project.`);
  return row;
}
