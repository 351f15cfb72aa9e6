import { beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from './fixtures/problems';
import { document, newSite, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

describe('instruments', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const post = (body: object) => site.admin.post(site.at('/instruments'), body);

  it('answer the figures that were stated', async () => {
    const stated = {
      accuracy: { directionArcsec: 3, zenithArcsec: 4, distanceMm: 1.5, distancePpm: 2.5 },
      collimationSigmaArcsec: 6,
      instrumentCentringSigmaMm: 0.7,
      targetCentringSigmaMm: 0.8,
      targetHeightSigmaMm: 0.9,
      carrierWavelengthNm: 850,
      referenceRefractivity: 281.5,
    };
    const { body } = await post({ name: 'TS-7', kind: 'totalStation', serial: '204417', ...stated }).expect(
      201,
    );
    expect(body).toMatchObject({ name: 'TS-7', kind: 'totalStation', serial: '204417' });
    expect(body.calibration).toMatchObject({ version: 1, accuracySource: 'stated', ...stated, note: null });
    expect((await site.admin.get(site.at('/instruments/TS-7')).expect(200)).body).toEqual(body);
  });

  it('take common practice where nothing is stated, say so, and say it in the setups too', async () => {
    const { body } = await post({ name: 'TS-8', kind: 'totalStation' }).expect(201);
    expect(body.calibration).toMatchObject({
      accuracySource: 'default',
      accuracy: { directionArcsec: 5, zenithArcsec: 5, distanceMm: 2, distancePpm: 2 },
    });
    const sent = document('default', { setups: [resection('default', { instrument: 'TS-8' })] });
    const [setup] = (await site.upload(sent).expect(201)).body.setups;
    expect(setup.notes.map((n: { code: string }) => n.code)).toContain('accuracy_default');
  });

  it('get new figures by calibration; earlier setups keep theirs', async () => {
    const before = (await site.upload(document('c1', { setups: [resection('c1')] })).expect(201)).body
      .setups[0];
    const accuracy = { directionArcsec: 20, zenithArcsec: 20, distanceMm: 9, distancePpm: 9 };
    const path = site.at('/instruments/TS-1/calibrations');
    const { body } = await site.admin.post(path, { accuracy, note: 'After the fall.' }).expect(201);
    expect(body.calibration).toMatchObject({ version: 2, accuracy, note: 'After the fall.' });
    const after = (await site.upload(document('c2', { setups: [resection('c2')] })).expect(201)).body
      .setups[0];
    expect(before.provenance.instrument).toEqual({ name: 'TS-1', calibration: 1 });
    expect(after.provenance.instrument).toEqual({ name: 'TS-1', calibration: 2 });
    expect(after.standardDeviations.orientationArcsec).toBeGreaterThan(
      before.standardDeviations.orientationArcsec,
    );
    const again = (await site.admin.get(site.at(`/setups/${before.id}`))).body;
    expect(again.standardDeviations).toEqual(before.standardDeviations);
  });

  it('calibrate one after the other where two come at once', async () => {
    await post({ name: 'TS-5', kind: 'totalStation' }).expect(201);
    const path = site.at('/instruments/TS-5/calibrations');
    const answers = await Promise.all([1, 2, 3].map((n) => site.admin.post(path, { note: `${n}` })));
    const versions = answers.map(({ body }) => body.calibration.version).sort();
    expect(versions).toEqual([2, 3, 4]);
  });

  it('have names of their own within a project', async () => {
    expectProblem(await post({ name: 'TS-1', kind: 'level' }), 'name_taken');
    await newSite(site.admin, 'Another pad');
  });

  it('refuse figures out of range and unknown fields', async () => {
    const accuracy = { directionArcsec: 0, zenithArcsec: 121, distanceMm: -1 };
    expectProblem(await post({ name: 'TS 9/1', kind: 'theodolite', accuracy, colour: 'red' }), 'invalid', [
      '/name name_invalid',
      '/kind invalid_value',
      '/accuracy/directionArcsec invalid_value',
      '/accuracy/zenithArcsec invalid_value',
      '/accuracy/distanceMm invalid_value',
      '/accuracy/distancePpm required',
      '/colour unknown_field',
    ]);
  });

  it('are not found under another name', async () => {
    expectProblem(await site.admin.get(site.at('/instruments/TS-77')), 'not_found');
    expectProblem(await site.admin.post(site.at('/instruments/TS-77/calibrations'), {}), 'not_found');
  });
});
