import { databaseFault } from '@/db/faults';
import { instrumentCalibrations, instruments } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/instruments';
import { calibrationRow } from './calibration';
import { presentInstrument } from './present';

type Create = typeof contract.createInstrument;

export async function createInstrument(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Create>; body: JsonOf<Create> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const createdAt = runtime.now().toISOString();
  const { name, kind, serial, ...stated } = body;
  const instrument = {
    organizationId,
    id: runtime.uuid(),
    projectId: project.id,
    name,
    kind,
    serial: serial ?? null,
    calibrationVersion: 1,
    createdAt,
  };
  const calibration = calibrationRow(stated, {
    organizationId,
    instrumentId: instrument.id,
    version: 1,
    createdAt,
  });
  try {
    await tenant.db.insert(instruments).values(instrument);
  } catch (error) {
    if (databaseFault(error)?.constraint !== 'instruments_name') throw error;
    throw new Problem('name_taken', `An instrument ${name} is registered in this project.`);
  }
  await tenant.db.insert(instrumentCalibrations).values(calibration);
  record(context, caller, {
    type: 'instrument.registered',
    subject: name,
    projectId: project.id,
    data: { kind, serial: instrument.serial },
  });
  return presentInstrument({ instrument, calibration });
}
