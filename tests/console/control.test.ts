import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { openBrowser, openDesk } from './browser';
import { walkedOrganization } from './site';

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
});
afterAll(() => browser.close());

const SHEET = [
  'name,easting,northing,elevation,kind',
  'BM-7,5120.5,10044.25,1240.113,benchmark',
  'HT-7,five,10001.0,1239.2,target',
  'HT-8,5333.1,10020.75,1238.9,target',
  'HT-8,5333.2,10020.75,1238.9,target',
].join('\n');

/** Drops a file on the page's drop zone, as a hand with a mouse would. */
async function drop(page: Page, name: string, text: string): Promise<void> {
  const transfer = await page.evaluateHandle(
    ([fileName, content]) => {
      const data = new DataTransfer();
      data.items.add(new File([content], fileName, { type: 'text/csv' }));
      return data;
    },
    [name, text] as const,
  );
  const zone = page.getByText('Drop a CSV file here, or choose one');
  await zone.dispatchEvent('dragover', { dataTransfer: transfer });
  await zone.dispatchEvent('drop', { dataTransfer: transfer });
}

it('previews a dropped sheet, brings in its good rows and says of each bad one what to mend', async () => {
  const { hub, people } = await newOrganization();
  const { page, context, complaints } = await openDesk(browser, hub.url, people.surveyor);
  await page.goto('/projects');
  await page.getByLabel('Name').fill('Drop pad');
  await page.getByLabel('Length unit').selectOption('ftUS');
  await page.getByRole('button', { name: 'Open project' }).click();
  await page.getByRole('link', { name: 'Control' }).click();
  await page.getByText('No control yet').waitFor();

  await drop(page, 'control.csv', SHEET);
  const preview = page.getByRole('table', { name: 'What control.csv holds' });
  await preview.waitFor();
  expect(await preview.getByRole('row').count()).toBe(5);
  await page.getByRole('button', { name: 'Bring in 4 points' }).click();
  expect(
    await page.getByLabel('Unit of the coordinates').evaluate((s: HTMLSelectElement) => s.validity.valid),
  ).toBe(false);
  await page.getByLabel('Unit of the coordinates').selectOption('ftUS');
  await page.getByRole('button', { name: 'Bring in 4 points' }).click();

  await page.getByText('2 new, 0 in a new version, 0 unchanged, 2 refused.').waitFor();
  await preview
    .getByRole('row', { name: /HT-7/ })
    .getByText('Column easting: "five" is no decimal number. Write a plain number')
    .waitFor();
  await preview
    .getByRole('row', { name: /5333\.2/ })
    .getByText('refused')
    .waitFor();
  const registry = page.getByRole('table', { name: 'Control points' });
  await registry.getByText('BM-7').waitFor();
  expect(await registry.getByRole('link').allTextContents()).toEqual(['BM-7', 'HT-8']);
  expect(await page.content()).not.toMatch(/\/rows\/|revise=true/);
  expect(complaints).toEqual([]);
  await context.close();
});

it('asks again before coordinates in the other foot are believed', async () => {
  const { hub, people } = await newOrganization();
  const { page, context } = await openDesk(browser, hub.url, people.surveyor);
  await page.goto('/projects');
  await page.getByLabel('Name').fill('Foot pad');
  await page.getByRole('button', { name: 'Open project' }).click();
  await page.getByRole('link', { name: 'Control' }).click();
  await page.locator('input[type=file]').setInputFiles({
    name: 'feet.csv',
    mimeType: 'text/csv',
    buffer: Buffer.from('name,easting,northing\nHT-1,2100000,700000'),
  });
  await page.getByLabel('Unit of the coordinates').selectOption('ftUS');
  await page.getByRole('button', { name: 'Bring in 1 point' }).click();
  expect(await page.getByRole('table', { name: 'Control points' }).count()).toBe(0);
  await page.getByLabel(/The file really is in US survey feet/).check();
  await page.getByRole('button', { name: 'Bring in 1 point' }).click();
  await page.getByText('1 new, 0 in a new version').waitFor();
  await context.close();
});

it('shows what a bumped point did in every setup, and quarantines it with a reason', async () => {
  const { hub, people, site } = await walkedOrganization();
  const { page, context } = await openDesk(browser, hub.url, people.surveyor);
  await page.goto(`/projects/${site.projectId}/control`);
  await page.getByRole('link', { name: 'HT-103' }).click();
  await page.getByRole('link', { name: 'ST-3' }).first().waitFor();
  await page.getByLabel('State').selectOption('quarantined');
  await page.getByLabel('Why').fill('Hit by the water truck.');
  await page.getByRole('button', { name: 'Change the state' }).click();
  await page.getByText('It is quarantined now.').waitFor();
  await page.getByRole('link', { name: 'Control' }).first().click();
  await page
    .getByRole('row', { name: /HT-103/ })
    .getByText('quarantined')
    .waitFor();
  await page.getByLabel('Show').selectOption('suspect');
  await page.getByText('No point is suspect').waitFor();
  await context.close();
});

it('counts trust over the whole registry, whatever is shown of it', async () => {
  const { hub, people, key } = await newOrganization();
  const caller = api(hub.url, key);
  const project = await caller.post('/projects', {
    name: 'Long dike',
    lengthUnit: 'm',
    frame: { kind: 'local' },
  });
  const at = `/projects/${project.body.id}/control-points`;
  const points = Array.from({ length: 230 }, (_, i) => ({
    name: `P-${1000 + i}`,
    easting: 100 + 10 * (i % 20),
    northing: 100 + 10 * Math.floor(i / 20),
    kind: 'target',
  }));
  await caller.post(at, { units: { length: 'm' }, points }).expect(201);
  await caller.patch(`${at}/P-1229`, { status: 'suspect', note: 'Leans.' }).expect(200);
  const { page, context } = await openDesk(browser, hub.url, people.analyst);
  await page.goto(`/projects/${project.body.id}/control`);
  await page.getByText('230 shown', { exact: true }).waitFor();
  const counts = () => page.locator('dl dd:nth-child(3n)').allTextContents();
  expect(await counts()).toEqual(['229', '1', '0']);
  await page.getByLabel('Show').selectOption('suspect');
  await page.getByText('1 shown', { exact: true }).waitFor();
  expect(await counts()).toEqual(['229', '1', '0']);
  await context.close();
});
