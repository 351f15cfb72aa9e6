import { document, groundShot, MARKS, newLayer, resection, STAND } from '@/tests/api/fixtures/site';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';

/** A project in metres whose layer has limits and an offset of whole millimetres, with a setup and grade shots. */
export async function metreSite() {
  const organization = await newOrganization();
  const caller = api(organization.hub.url, organization.key);
  const project = await caller.post('/projects', {
    name: 'Wren Fork weir',
    lengthUnit: 'm',
    frame: { kind: 'local' },
  });
  const at = (path: string) => `/projects/${project.body.id}${path}`;
  const points = Object.entries(MARKS).map(([name, place]) => ({ name, ...place, kind: 'target' }));
  await caller.post(at('/control-points'), { units: { length: 'ft' }, points }).expect(201);
  const accuracy = { directionArcsec: 1, zenithArcsec: 1, distanceMm: 0.6, distancePpm: 1 };
  await caller.post(at('/instruments'), { name: 'TS-1', kind: 'totalStation', accuracy }).expect(201);
  await newLayer(caller, at, {
    units: { length: 'm' },
    offset: -0.125,
    tolerance: { below: 0.03, above: 0.015 },
  });
  // The layer lies 0.41 ft under 400 ft: one shot on it, one 0.02 m high.
  const gradeShots = [0, 0.02].map((high, i) => ({
    clientId: `g-${i}`,
    layer: 'subgrade',
    setup: 'ST-1',
    shot: groundShot({ easting: 5120 + 10 * i, northing: 8120, elevation: 400 - (0.125 - high) / 0.3048 }),
    observedAt: new Date(Date.now() - 60 * 60_000).toISOString(),
  }));
  const sent = document('day', { setups: [resection('ST-1', { stand: STAND })], gradeShots });
  const { body } = await caller.post(at('/uploads'), sent).expect(201);
  return { ...organization, caller, at, receipt: body };
}
