import { beforeAll, describe, expect, it } from 'vitest';
import { type Api, api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { whileHeld } from './fixtures/database';
import { expectProblem } from './fixtures/problems';

describe('projects', () => {
  let organization: Awaited<ReturnType<typeof newOrganization>>;
  let admin: Api;
  beforeAll(async () => {
    organization = await newOrganization();
    admin = api(organization.hub.url, organization.key);
  });

  const create = (name: string, changes: object = {}) =>
    admin.post('/projects', { name, lengthUnit: 'ft', frame: { kind: 'local' }, ...changes });

  it('start with editable classes of common practice', async () => {
    const { body } = await create('Defaults').expect(201);
    const classes = body.toleranceClasses.map(({ citation: _c, ...rest }: { citation: string }) => rest);
    expect(classes).toEqual([
      {
        name: 'earthwork',
        residual: { horizontal: 0.03, vertical: 0.03 },
        work: { radius: 500, horizontal: 0.1, vertical: 0.05 },
        checkRequired: false,
      },
      {
        name: 'fine grade',
        residual: { horizontal: 0.015, vertical: 0.015 },
        work: { radius: 300, horizontal: 0.05, vertical: 0.02 },
        checkRequired: true,
      },
      {
        name: 'structures',
        residual: { horizontal: 0.01, vertical: 0.01 },
        work: { radius: 200, horizontal: 0.02, vertical: 0.01 },
        checkRequired: true,
      },
    ]);
    for (const { citation } of body.toleranceClasses) expect(citation).toMatch(/common practice/);
    expect(body).toMatchObject({
      frame: { kind: 'local' },
      combinedFactor: 1,
      refraction: { coefficient: 0.13, sigma: 0.3 },
      positionSigma: null,
      siteElevation: null,
      units: { length: 'ft' },
    });
    expect((await admin.get(`/projects/${body.id}`).expect(200)).body).toEqual(body);
  });

  it('state the same classes in metres where they are metric', async () => {
    const { body } = await create('Metric', { lengthUnit: 'm' }).expect(201);
    expect(body.toleranceClasses[0].work.radius).toBeCloseTo(152.4, 9);
    expect(body.toleranceClasses[0].residual.horizontal).toBeCloseTo(0.009144, 12);
  });

  it('change what may change, and keep unit and frame', async () => {
    const { body } = await create('Editable').expect(201);
    const own = {
      name: 'ours',
      residual: { horizontal: 0.02, vertical: 0.02 },
      work: { radius: 100, horizontal: 0.05, vertical: 0.05 },
      checkRequired: true,
      citation: 'special provision 7',
    };
    const changes = {
      name: 'Edited',
      combinedFactor: 0.99987,
      siteElevation: 5280,
      refraction: { coefficient: 0.2, sigma: 0.1 },
      controlSigma: { horizontal: 0.01, vertical: 0.02 },
      positionSigma: { horizontal: 0.05, vertical: 0.07 },
      setupValidMinutes: 60,
      displayDecimals: 3,
      toleranceClasses: [own],
    };
    const { body: patched } = await admin.patch(`/projects/${body.id}`, changes).expect(200);
    expect(patched).toMatchObject(changes);
    expect((await admin.get(`/projects/${body.id}`)).body).toEqual(patched);
    const back = await admin.patch(`/projects/${body.id}`, { siteElevation: null, positionSigma: null });
    expect(back.body).toMatchObject({ siteElevation: null, positionSigma: null, combinedFactor: 0.99987 });
    for (const field of ['lengthUnit', 'frame'] as const) {
      const wrong = await admin.patch(`/projects/${body.id}`, { [field]: 'm' });
      expectProblem(wrong, 'invalid', [`/${field} unknown_field`]);
    }
  });

  it('keep both of two changes that are made at the same moment', async () => {
    const { body } = await create('Shared').expect(201);
    const lock = `select 1 from projects where id = '${body.id}' for update`;
    const changes = [{ displayDecimals: 4 }, { combinedFactor: 0.9998 }, { siteElevation: 100 }];
    const answers = await whileHeld(organization.hub.superuserUrl, { lock }, changes.length, () =>
      Promise.all(changes.map((change) => admin.patch(`/projects/${body.id}`, change))),
    );
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200]);
    const { body: now } = await admin.get(`/projects/${body.id}`);
    for (const change of changes) expect(now).toMatchObject(change);
  });

  it('have names of their own', async () => {
    const { body } = await create('Taken').expect(201);
    expectProblem(await create('Taken'), 'name_taken');
    await create('Free').expect(201);
    expectProblem(await admin.patch(`/projects/${body.id}`, { name: 'Free' }), 'name_taken');
  });

  it('refuse frames that are not computed yet', async () => {
    const projected = { frame: { kind: 'projected', crs: 'EPSG:2272' } };
    expectProblem(await create('Projected', projected), 'invalid', ['/frame/kind frame_unsupported']);
  });

  it('say where a body is wrong', async () => {
    expectProblem(await admin.post('/projects', {}), 'invalid', [
      '/name required',
      '/lengthUnit required',
      '/frame required',
    ]);
    const wrong = {
      name: '  ',
      lengthUnit: 'yd',
      frame: { kind: 'local', crs: 'EPSG:1' },
      combinedFactor: 2,
      setupValidMinutes: 1.5,
      toleranceClasses: [],
      colour: 'red',
    };
    expectProblem(await admin.post('/projects', wrong), 'invalid', [
      '/name invalid_value',
      '/lengthUnit invalid_value',
      '/frame/crs unknown_field',
      '/toleranceClasses invalid_value',
      '/combinedFactor invalid_value',
      '/setupValidMinutes wrong_type',
      '/colour unknown_field',
    ]);
    const twice = [1, 2].map(() => ({
      name: 'x',
      residual: { horizontal: 1, vertical: 1 },
      work: { radius: 1, horizontal: 1, vertical: 1 },
      checkRequired: false,
    }));
    expectProblem(await create('Twice', { toleranceClasses: twice }), 'invalid', [
      '/toleranceClasses/1/name name_repeated',
    ]);
  });
});
