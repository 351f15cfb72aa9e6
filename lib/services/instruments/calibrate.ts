import { and, eq } from 'drizzle-orm';
import { instrumentCalibrations, instruments } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/instruments';
import { calibrationRow } from './calibration';
import { loadInstrument } from './load';
import { presentInstrument } from './present';

type Create = typeof contract.createCalibration;

/** New stated figures: setups from now on use them, earlier ones keep theirs. */
export async function createCalibration(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Create>; body: JsonOf<Create> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { instrument } = await loadInstrument(tenant, organizationId, project.id, params.instrumentName);
  const version = instrument.calibrationVersion + 1;
  const createdAt = runtime.now().toISOString();
  const calibration = calibrationRow(body, {
    organizationId,
    instrumentId: instrument.id,
    version,
    createdAt,
  });
  await tenant.db.insert(instrumentCalibrations).values(calibration);
  await tenant.db
    .update(instruments)
    .set({ calibrationVersion: version })
    .where(and(eq(instruments.organizationId, organizationId), eq(instruments.id, instrument.id)));
  record(context, caller, {
    type: 'instrument.calibrated',
    subject: instrument.name,
    projectId: project.id,
    data: { version, note: body.note },
  });
  return presentInstrument({ instrument: { ...instrument, calibrationVersion: version }, calibration });
}
