import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { testCourier } from '@/tests/api/fixtures/courier';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { openBrowser, openDesk } from './browser';

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
});
afterAll(() => browser.close());

it('makes a hook, sends a test, shows what came back, replays, rotates, switches off and deletes', async () => {
  const { hub, people, key } = await newOrganization();
  const host = 'desk.example';
  const hand = testCourier(host);
  const { page, context, complaints } = await openDesk(browser, hub.url, people.admin);
  await page.goto('/hooks');
  await page.getByText('No hook yet').waitFor();
  await page.getByRole('button', { name: 'Make a hook' }).click();
  await page.getByLabel('Address of the receiver').fill('http://desk.example/hooks');
  await page.getByRole('button', { name: 'Make the hook' }).click();
  await page.getByRole('alert').filter({ hasText: 'https' }).waitFor();
  await page.getByLabel('Address of the receiver').fill(`https://${host}/hooks`);
  await page.getByLabel('What it is').fill('Site desk');
  await page.getByRole('button', { name: 'Make the hook' }).click();
  const secret = (await page.locator('[data-secret]').textContent()) ?? '';
  expect(secret).toMatch(/^whsec_/);
  await page.getByRole('button', { name: 'I have kept it' }).click();
  await page.getByRole('link', { name: 'Site desk' }).click();
  await page.getByRole('heading', { name: 'Site desk', level: 1 }).waitFor();
  expect(await page.content()).not.toContain(secret);

  hand.answerWith(() => ({ status: 503, body: 'closed until six' }));
  await page.getByRole('button', { name: 'Send a test' }).click();
  const test = page.getByRole('row', { name: /webhook\.test/ });
  await test.waitFor();
  hand.catchUp();
  await hand.until(1);
  await test.getByText('given up').waitFor();
  await test.getByRole('button', { name: /webhook\.test/ }).click();
  const sheet = page.getByRole('dialog');
  await sheet.getByText('closed until six').waitFor();
  await sheet.getByText('Nothing happened.').waitFor();
  await sheet.getByRole('button', { name: 'Close' }).click();

  hand.answerWith(() => ({ status: 204 }));
  const project = { name: 'Yard', lengthUnit: 'ft', frame: { kind: 'local' } };
  await api(hub.url, key).post('/projects', project).expect(201);
  hand.catchUp();
  while (!hand.got.some(({ type }) => type === 'project.created')) await hand.round();
  const row = page.getByRole('row', { name: /project\.created/ });
  await row.first().getByText('delivered').waitFor();
  await page.getByText('well').first().waitFor();
  await row
    .first()
    .getByRole('button', { name: /^Replay/ })
    .click();
  await page.getByText('sent again').waitFor();

  await page.getByRole('button', { name: 'Rotate' }).click();
  await page.getByRole('button', { name: 'Make the new secret' }).click();
  expect(await page.locator('[data-secret]').textContent()).not.toBe(secret);
  await page.getByRole('button', { name: 'I have kept it' }).click();
  await page.getByText('Old secret signs').waitFor();

  await page.getByRole('button', { name: 'Switch off' }).click();
  await page.getByRole('button', { name: 'Switch it off now' }).click();
  await page.getByText(/^switched off/).waitFor();
  await page.getByRole('button', { name: 'Delete' }).click();
  await page.getByRole('button', { name: 'Delete it' }).click();
  await page.getByText('No hook yet').waitFor();
  expect(complaints).toEqual([]);
  await context.close();
}, 180_000);
