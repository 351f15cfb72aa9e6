import { readFileSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowser, openDesk } from './browser';
import { walkedOrganization } from './site';

let browser: Browser;
let ground: Awaited<ReturnType<typeof walkedOrganization>>;
beforeAll(async () => {
  browser = await openBrowser();
  ground = await walkedOrganization();
}, 60_000);
afterAll(() => browser.close());

const setups = () => `/projects/${ground.site.projectId}/setups`;

describe('the grade of a layer', () => {
  it('shows the worst check first, and any other by its name in the table', async () => {
    const { hub, people, site } = ground;
    const { page, context, complaints } = await openDesk(browser, hub.url, people.foreman);
    await page.goto(`/projects/${site.projectId}/grade`);
    await page.getByRole('link', { name: site.layer }).click();
    await page.getByText('Cut the north-east corner and shoot again. subgrade is not accepted').waitFor();
    await page.getByRole('heading', { name: /^g-36/ }).waitFor();
    await page.getByRole('button', { name: 'g-08' }).click();
    await page.getByRole('heading', { name: /^g-08/ }).waitFor();
    const panel = page.getByRole('region', { name: 'Check g-08' });
    expect(await panel.evaluate((element) => element === document.activeElement)).toBe(true);
    await page.waitForFunction(
      (element) => {
        const { top, bottom } = (element as Element).getBoundingClientRect();
        return top >= 0 && bottom <= window.innerHeight;
      },
      await panel.elementHandle(),
    );
    await panel.getByRole('button', { name: 'Back to the table' }).click();
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('g-08');
    await page.getByRole('button', { name: 'Deviation' }).click();
    const first = page.getByRole('table', { name: 'Grade checks' }).getByRole('row').nth(1);
    expect(await first.textContent()).toContain('F 0.06');
    expect(complaints).toEqual([]);
    await context.close();
  });
});

describe('on a phone', () => {
  it('the list says what to say on the radio, and the sheet which target is a check', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.foreman, {
      viewport: { width: 390, height: 844 },
    });
    await page.goto(setups());
    const radio = page.getByText(/^Stop\. ST-2 is not to be used\./).filter({ visible: true });
    await radio.first().waitFor();
    const sections = page.getByRole('navigation', { name: 'Sections' });
    for (const link of await sections.getByRole('link').all()) {
      const box = await link.boundingBox();
      expect((box?.x ?? 0) + (box?.width ?? 999)).toBeLessThanOrEqual(390);
    }
    await page.goto(`${setups()}/${site.setupId}`);
    const targets = page.getByRole('table', { name: 'Targets with their residuals' });
    await targets.getByRole('cell', { name: /BM-2 ?check/ }).waitFor();
    await context.close();
  });
});

describe('a setup', () => {
  it('is released to a machine with the caution beside the button, and withdrawn with every crew named', async () => {
    const { hub, people, site } = ground;
    const { page, context, complaints } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(`${setups()}/${site.setupId}`);
    await page.getByRole('button', { name: 'Release', exact: true }).click();
    const dialog = page.getByRole('dialog', { name: 'Release ST-1' });
    await dialog.getByText('Before any blade moves').waitFor();
    await dialog.getByLabel('Machine').fill('DZ-9');
    await dialog.getByRole('button', { name: 'Release' }).click();
    expect(await dialog.getByLabel('Layer').evaluate((s: HTMLSelectElement) => s.validity.valid)).toBe(false);
    await dialog.getByLabel('Layer').selectOption({ label: 'subgrade: 0.50 ft below Pad finish' });
    await dialog.getByLabel('Hours').fill('2');
    await dialog.getByRole('button', { name: 'Release' }).click();
    await page.getByText(/to DZ-9, subgrade with −0\.50 ft, until/).waitFor();

    await page.getByRole('button', { name: 'Withdraw' }).click();
    await page.getByLabel('What happened').fill('The tripod was bumped.');
    await page.getByRole('dialog').getByRole('button', { name: 'Withdraw' }).click();
    const told = page.getByRole('dialog');
    await told.getByText('This stops no machine.').waitFor();
    expect(await told.getByRole('listitem').allTextContents()).toEqual(
      expect.arrayContaining([expect.stringContaining('DZ-4'), expect.stringContaining('DZ-9')]),
    );
    await told.getByRole('button', { name: 'Done' }).click();
    await page.getByText('Stop. ST-1 is withdrawn. Do not work from it.').waitFor();
    expect(await page.getByRole('button', { name: 'Release', exact: true }).isDisabled()).toBe(true);
    const head = page.locator('header').filter({ has: page.getByRole('heading', { level: 1 }) });
    await head.getByText(/by .+: The tripod was bumped\./).waitFor();
    expect(await head.textContent()).toMatch(/Withdrawn.*The verdict was pass: for earthwork/);
    await page.getByText('DZ-9: stop. ST-1 is withdrawn: The tripod was bumped.').waitFor();
    expect(await page.getByText(/^Released/).count()).toBe(0);

    await page.goto(setups());
    const row = page.getByRole('row', { name: /ST-1/ });
    await row.getByText('withdrawn', { exact: true }).waitFor();
    await row.getByText('was pass').waitFor();
    expect(complaints).toEqual([]);
    await context.close();
  });

  it('is refitted without the target that it names, and points to the refit', async () => {
    const { hub, people } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(`${setups()}?`);
    await page.getByLabel('Verdict').selectOption('fail');
    await page.getByRole('row', { name: /ST-2/ }).waitFor();
    await page.getByRole('link', { name: 'ST-2' }).click();
    await page.getByRole('button', { name: 'Refit' }).click();
    await page.getByRole('checkbox', { name: /HT-102/ }).check();
    await page.getByLabel('Why').fill('Shot with another prism.');
    await page.getByRole('button', { name: 'Refit without them' }).click();
    await page.getByText('Shot with another prism.').waitFor();
    await page.getByRole('link', { name: 'The setup that this one supersedes' }).click();
    await page.getByText('Stop. ST-2 is superseded. Use the refit.').waitFor();
    await page.getByText('Superseded', { exact: true }).first().waitFor();
    await page.getByRole('link', { name: 'Use the refit' }).waitFor();
    await page.getByRole('link', { name: 'The refit that supersedes this setup' }).waitFor();
    await context.close();
  });

  it('is only read by whoever may not release it, and says so', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.analyst);
    await page.goto(`${setups()}/${site.setupId}`);
    await page.getByText('Your role reads setups').waitFor();
    expect(await page.getByRole('button', { name: 'Withdraw' }).count()).toBe(0);
    await context.close();
  });

  it('gives a figure to be copied by hand where the browser has no clipboard', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.analyst);
    await page.addInitScript(() => Object.defineProperty(navigator, 'clipboard', { value: undefined }));
    await page.goto(`${setups()}/${site.setupId}`);
    await page.getByRole('button', { name: /^Easting:/ }).click();
    await page.getByText('is selected: press Ctrl+C').waitFor();
    expect(await page.evaluate(() => String(getSelection()))).toMatch(/^5140\.6\d\d ft$/);
    await context.close();
  });

  it('gives figures to the clipboard with their unit, and its targets as CSV', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.analyst, {
      permissions: ['clipboard-read', 'clipboard-write'],
    });
    await page.goto(`${setups()}/${site.setupId}`);
    await page.getByRole('button', { name: /^Easting:/ }).click();
    await page.getByText('copied').waitFor();
    expect(await page.evaluate(() => navigator.clipboard.readText())).toMatch(/^5140\.6\d\d ft$/);
    const saving = page.waitForEvent('download');
    await page.getByRole('button', { name: 'Save as CSV' }).first().click();
    const saved = await saving;
    expect(saved.suggestedFilename()).toBe('ST-1-targets.csv');
    const [header, first] = readFileSync(await saved.path(), 'utf8').split('\r\n');
    expect(header).toBe(
      'Target,Easting (ft),Northing (ft),Elevation (ft),Largest w,Without it (ft),Part,Control',
    );
    expect(first).toMatch(/^HT-101,-?0\.00\d+,/);
    await context.close();
  });
});

describe('a refused item', () => {
  it('is marked in the raw text, mended and sent again as an upload of its own', async () => {
    const { hub, people, site, key } = ground;
    const document = {
      clientId: 'morning',
      units: { length: 'ft' },
      gradeShots: [10100, '10110', 10120].map((northing, i) => ({
        clientId: `m-${i}`,
        layer: site.layer,
        position: { easting: 5100, northing, elevation: 1237.2 },
        sigma: { horizontal: 0.02, vertical: 0.02 },
        observedAt: '2026-04-12T08:05:00-06:00',
      })),
    };
    const posted = await fetch(`${hub.url}/api/v1/projects/${site.projectId}/uploads`, {
      method: 'POST',
      headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json' },
      body: JSON.stringify(document, null, 1),
    });
    expect(posted.status).toBe(201);
    const { page, context, complaints } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(`/projects/${site.projectId}/uploads`);
    await page
      .getByRole('row', { name: /morning/ })
      .getByText('1 refused')
      .waitFor();
    await page
      .getByRole('row', { name: /morning/ })
      .getByRole('link')
      .click();
    expect(await page.locator('mark').textContent()).toBe('"northing": "10110"');
    await page.getByText('/gradeShots/1/position/northing').waitFor();
    await page.getByRole('button', { name: 'Mend and send again' }).click();
    const text = page.getByLabel('Mend and send again');
    const left = await text.inputValue();
    expect(JSON.parse(left)).toMatchObject({ clientId: 'morning.2', gradeShots: [{ clientId: 'm-1' }] });
    await text.fill(left.replace('"10110"', '10110'));
    await page.getByRole('button', { name: 'Send' }).click();
    await page.getByRole('heading', { name: 'morning.2', level: 1 }).waitFor();
    await page.getByText('1 grade check on subgrade').waitFor();
    expect(complaints).toEqual([]);
    await context.close();
  });
});

describe('a key that stands twice', () => {
  it('is left to the person: both values are in what is offered, and the hub still refuses it', async () => {
    const { hub, people, site, key } = ground;
    const sent = `{"clientId":"twice","units":{"length":"ft"},"gradeShots":[{"clientId":"t-1","layer":"${site.layer}",
      "position":{"easting":5100,"northing":10100,"northing":10110.50,"elevation":1237.2},
      "sigma":{"horizontal":0.02,"vertical":0.02},"observedAt":"2026-04-12T08:05:00-06:00"}]}`;
    const posted = await fetch(`${hub.url}/api/v1/projects/${site.projectId}/uploads`, {
      method: 'POST',
      headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json' },
      body: sent,
    });
    expect(posted.status).toBe(422);
    const { page, context } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(`/projects/${site.projectId}/uploads`);
    await page.getByRole('row', { name: /twice/ }).getByRole('link').click();
    await page.getByRole('button', { name: 'Mend and send again' }).click();
    await page.getByText('A key stands twice, and only you can tell which value is true').waitFor();
    const text = page.getByLabel('Mend and send again');
    const left = await text.inputValue();
    expect(left).toMatch(/"northing": 10100,\s+"northing": 10110\.50/);
    await page.getByRole('button', { name: 'Send' }).click();
    await page.getByRole('alert').filter({ hasText: 'stands twice' }).waitFor();
    await text.fill(left.replace('"northing": 10110.50,', ''));
    await page.getByRole('button', { name: 'Send' }).click();
    await page.getByRole('heading', { name: 'twice.2', level: 1 }).waitFor();
    await context.close();
  });
});

describe('without a connection', () => {
  it('says that what is shown may be old, and goes on once it is back', async () => {
    const { hub, people } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(setups());
    await page.getByRole('link', { name: 'ST-1' }).waitFor();
    await context.setOffline(true);
    await page.getByText('No connection.').waitFor();
    await context.setOffline(false);
    await page.getByText('No connection.').waitFor({ state: 'detached' });
    await context.close();
  });

  it('offers to try again where a page could not be read, with the request to name', async () => {
    const { hub, people } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(`${setups()}/0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44`);
    const alert = page.getByRole('alert').filter({ hasText: 'There is no such thing here' });
    await alert.waitFor();
    expect(await alert.textContent()).toMatch(/not_found, request [0-9a-f-]{36}/);
    await alert.getByRole('button', { name: 'Try again' }).waitFor();
    await alert.getByRole('link', { name: 'All projects' }).waitFor();
    await alert.getByRole('link', { name: 'All setups of the project' }).click();
    await page.getByRole('heading', { name: 'Setups', level: 1 }).waitFor();
    await context.close();
  });
});
