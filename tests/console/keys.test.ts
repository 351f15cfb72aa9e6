import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { openBrowser, openDesk } from './browser';
import { walkOn } from './site';

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
});
afterAll(() => browser.close());

it('makes a key that posts the example, shows the setup, rotates the key and revokes it at once', async () => {
  const { hub, people } = await newOrganization();
  const { page, context, complaints } = await openDesk(browser, hub.url, people.admin);
  await page.goto('/keys');
  await page.getByRole('button', { name: 'Make a key' }).click();
  await page.getByLabel(/^Name/).fill('truck-2');
  for (const box of await page.getByRole('group', { name: 'It may' }).getByRole('checkbox').all())
    await box.check();
  await page.getByRole('button', { name: 'Make the key' }).click();
  const secret = (await page.locator('[data-secret]').textContent()) ?? '';
  expect(secret).toMatch(/^htk_\w{33}$/);
  await page.getByRole('button', { name: 'I have kept it' }).click();
  const row = page.getByRole('row', { name: /truck-2/ }).first();
  await row.getByText('not used yet').waitFor();
  expect(await page.content()).not.toContain(secret);

  const site = await walkOn(hub.url, secret);
  await page.goto(`/projects/${site.projectId}/setups`);
  await page.getByRole('link', { name: 'ST-1' }).click();
  await page.getByRole('heading', { name: 'ST-1', level: 1 }).waitFor();
  await page.getByText('Go. ST-1 is good for earthwork').waitFor();
  await page.getByText('truck-2').first().waitFor();

  await page.goto('/keys');
  await row.getByRole('button', { name: 'Rotate' }).click();
  await page.getByLabel('The old key still works').selectOption('for an hour');
  await page.getByRole('button', { name: 'Make the new key' }).click();
  const successor = (await page.locator('[data-secret]').textContent()) ?? '';
  // The only copy is on the screen: neither one Escape nor several close it.
  for (let i = 0; i < 3; i++) await page.keyboard.press('Escape');
  expect(await page.locator('[data-secret]').textContent()).toBe(successor);
  await page.getByRole('button', { name: 'I have kept it' }).click();
  await page.getByText(/old key works until/).waitFor();
  const get = (key: string) => api(hub.url, key).get('/whoami');
  await get(secret).expect(200);
  await get(successor).expect(200);

  await page.getByRole('button', { name: 'Revoke truck-2' }).click();
  await page.getByRole('button', { name: 'Revoke it now' }).click();
  await page.getByText(/^revoked/).waitFor();
  const refused = await get(successor).expect(401);
  expect(refused.body.code).toBe('key_revoked');
  await get(secret).expect(200);
  expect(complaints).toEqual([]);
  await context.close();
});

it('marks a key that may do nothing as a mistake of the form, in words', async () => {
  const { hub, people } = await newOrganization();
  const { page, context } = await openDesk(browser, hub.url, people.admin);
  await page.goto('/keys');
  await page.getByRole('button', { name: 'Make a key' }).click();
  await page.getByLabel(/^Name/).fill('idle');
  for (const box of await page.getByRole('group', { name: 'It may' }).getByRole('checkbox').all())
    await box.uncheck();
  await page.getByRole('button', { name: 'Make the key' }).click();
  await page.getByRole('alert').filter({ hasText: '/scopes' }).waitFor();
  await context.close();
});

it('stays open while the key is being made, and selects it where the browser has no clipboard', async () => {
  const { hub, people } = await newOrganization();
  const { page, context } = await openDesk(browser, hub.url, people.admin);
  await page.addInitScript(() => Object.defineProperty(navigator, 'clipboard', { value: undefined }));
  await page.goto('/keys');
  await page.getByRole('button', { name: 'Make a key' }).click();
  await page.getByLabel(/^Name/).fill('rover-1');
  let letOn = () => {};
  const held = new Promise<void>((resolve) => {
    letOn = resolve;
  });
  await page.route('**/api-keys', async (route) => {
    if (route.request().method() === 'POST') await held;
    await route.continue();
  });
  await page.getByRole('button', { name: 'Make the key' }).click();
  for (let i = 0; i < 3; i++) await page.keyboard.press('Escape');
  expect(await page.getByRole('button', { name: 'Not now' }).isDisabled()).toBe(true);
  letOn();
  const secret = (await page.locator('[data-secret]').textContent()) ?? '';
  await page.getByRole('button', { name: 'Copy' }).click();
  await page.getByText('It is selected: press Ctrl+C.').waitFor();
  expect(await page.evaluate(() => String(getSelection()))).toBe(secret);
  await page.getByRole('button', { name: 'I have kept it' }).click();
  await page.getByRole('row', { name: /rover-1/ }).waitFor();
  await context.close();
});
