import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { document, newLayer, newSiteOrganization, resection } from '@/tests/api/fixtures/site';
import { openBrowser, openDesk } from './browser';

let browser: Browser;
let site: Awaited<ReturnType<typeof newSiteOrganization>>;
beforeAll(async () => {
  browser = await openBrowser();
  site = await newSiteOrganization();
  await newLayer(site.admin, site.at);
}, 60_000);
afterAll(() => browser.close());

async function newSetup(station: string): Promise<string> {
  const { body } = await site.upload(document(station, { setups: [resection(station, { station })] }));
  return body.setups[0].id;
}

/** A setup that was released to a machine and withdrawn, past the console. */
async function withdrawn(station: string, machine: string): Promise<void> {
  const id = await newSetup(station);
  await site.admin.post(site.at(`/setups/${id}/release`), { machine, layer: 'subgrade' }).expect(200);
  await site.admin.post(site.at(`/setups/${id}/withdraw`), { note: 'The post leans.' }).expect(200);
}

describe('a withdrawal', () => {
  it('by the surveyor is seen by the foreman beside the sections, and answered for the crew', async () => {
    const { hub, people } = site;
    const setupId = await newSetup('ST-7');
    const surveyor = await openDesk(browser, hub.url, people.surveyor);
    const foreman = await openDesk(browser, hub.url, people.foreman);
    await foreman.page.goto(site.at('/withdrawals'));
    await foreman.page.getByText('No crew has to answer').waitFor();

    const { page } = surveyor;
    await page.goto(site.at(`/setups/${setupId}`));
    await page.getByRole('button', { name: 'Release', exact: true }).click();
    await page.getByLabel('Machine').fill('DZ-9');
    await page.getByLabel('Layer').selectOption({ index: 1 });
    await page.getByRole('dialog').getByRole('button', { name: 'Release' }).click();
    await page.getByText(/to DZ-9, subgrade/).waitFor();
    await page.getByRole('button', { name: 'Withdraw' }).click();
    await page.getByLabel('What happened').fill('The tripod was bumped.');
    await page.getByRole('dialog').getByRole('button', { name: 'Withdraw' }).click();
    await page.getByRole('dialog').getByRole('link', { name: 'Withdrawals' }).click();
    await page.getByRole('heading', { name: 'Withdrawals', level: 1 }).waitFor();
    await page.getByRole('heading', { name: 'Withdrawals', level: 1 }).waitFor();
    await page.getByText('DZ-9: stop. ST-7 is withdrawn: The tripod was bumped.').waitFor();
    await page.getByRole('link', { name: 'Withdrawals 1 not answered' }).waitFor();

    const desk = foreman.page;
    await desk.goto(site.at('/grade'));
    await desk.getByRole('link', { name: 'Withdrawals 1 not answered' }).click();
    await desk.getByText('DZ-9: stop. ST-7 is withdrawn: The tripod was bumped.').waitFor();
    await desk.getByRole('button', { name: 'DZ-9 has stopped' }).click();
    const dialog = desk.getByRole('dialog', { name: 'Answer for DZ-9' });
    await dialog.getByText('knows that ST-7 is withdrawn').waitFor();
    await dialog.getByLabel('Note').fill('Parked at the north gate.');
    await dialog.getByRole('button', { name: 'It has stopped' }).click();
    await desk.getByText('No crew has to answer').waitFor();
    const row = desk.getByRole('table', { name: 'Answered withdrawals' }).getByRole('row', { name: /DZ-9/ });
    expect(await row.textContent()).toContain('The foremanParked at the north gate.');
    expect(await desk.getByRole('link', { name: 'not answered' }).count()).toBe(0);
    expect([...surveyor.complaints, ...foreman.complaints]).toEqual([]);
    await surveyor.context.close();
    await foreman.context.close();
  });

  it('is only read by whoever may not answer it', async () => {
    await withdrawn('ST-8', 'DZ-3');
    const { page, context } = await openDesk(browser, site.hub.url, site.people.analyst);
    await page.goto(site.at('/withdrawals'));
    await page.getByText('DZ-3: stop. ST-8 is withdrawn: The post leans.').waitFor();
    await page.getByText('Your role reads withdrawals').waitFor();
    expect(await page.getByRole('button', { name: 'has stopped' }).count()).toBe(0);
    await context.close();
  });

  it('that somebody else has answered meanwhile says so, and shows who', async () => {
    await withdrawn('ST-9', 'EX-2');
    const { page, context } = await openDesk(browser, site.hub.url, site.people.foreman);
    await page.goto(site.at('/withdrawals'));
    await page.getByRole('button', { name: 'EX-2 has stopped' }).click();
    const { body } = await site.admin.get(site.at('/acknowledgements?open=true'));
    const open = body.data.find(({ machine }: { machine: string }) => machine === 'EX-2');
    const surveyor = site.as(site.people.surveyor.key);
    await surveyor.post(site.at(`/acknowledgements/${open.id}/acknowledge`)).expect(200);
    const dialog = page.getByRole('dialog');
    await dialog.getByRole('button', { name: 'It has stopped' }).click();
    await dialog.getByRole('alert').filter({ hasText: 'already_answered' }).waitFor();
    await dialog.getByRole('button', { name: 'Not yet' }).click();
    await page
      .getByRole('table', { name: 'Answered withdrawals' })
      .getByRole('row', { name: /EX-2/ })
      .waitFor();
    await context.close();
  });

  it('list that cannot be read says so and offers to try again', async () => {
    await withdrawn('ST-6', 'GR-4');
    const { page, context } = await openDesk(browser, site.hub.url, site.people.foreman);
    await page.route('**/acknowledgements?*', (route) => route.abort());
    await page.goto(site.at('/withdrawals'));
    const alert = page.getByRole('alert').filter({ hasText: 'The hub cannot be reached' });
    await alert.waitFor();
    await page.unroute('**/acknowledgements?*');
    await alert.getByRole('button', { name: 'Try again' }).click();
    await page.getByText('GR-4: stop. ST-6 is withdrawn').waitFor();
    await context.close();
  });
});
