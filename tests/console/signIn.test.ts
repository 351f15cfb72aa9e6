import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { type Hub, newDatabase, startHub } from '@/tests/setup/hub';
import { newOrganization } from '@/tests/setup/organization';
import { openBrowser, openDesk } from './browser';

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
});
afterAll(() => browser.close());

describe('an empty hub', () => {
  let hub: Hub;
  beforeAll(async () => {
    hub = await startHub(await newDatabase(inject('cluster'), 'hubtack_empty'));
  });
  afterAll(() => hub.stop());

  it('leads its first administrator from the welcome to the first project, once', async () => {
    const { page, context } = await openDesk(browser, hub.url);
    await page.goto('/');
    await page.getByRole('link', { name: 'Begin' }).click();
    await page.getByLabel('Organization').fill('Larkspur Earthworks');
    await page.getByLabel('Your name').fill('Ada Quill');
    await page.getByLabel('E-mail').fill('ada@larkspur.example');
    await page.getByLabel('Password').fill('short');
    await page.getByRole('button', { name: 'Begin' }).click();
    expect(page.url()).toMatch(/\/welcome$/);
    await page.getByLabel('Password').fill('three quiet herons');
    await page.getByRole('button', { name: 'Begin' }).click();
    await page.getByText('No project yet').waitFor();

    await page.getByLabel('Name').fill('Wren Fork pad');
    await page.getByRole('button', { name: 'Open project' }).click();
    await page.getByText('No setup yet').waitFor();
    expect(await page.getByLabel('Project').locator('option:checked').textContent()).toBe('Wren Fork pad');

    await page.goto('/welcome');
    await page.getByText('This hub has its administrator already').waitFor();
    expect(await page.getByText('This hub is empty').count()).toBe(0);
    await context.close();
  });
});

describe('signing in', () => {
  it('says no more than that e-mail or password is wrong, and lets in whoever has both', async () => {
    const { hub, people } = await newOrganization();
    const { page, context } = await openDesk(browser, hub.url);
    await page.goto('/sign-in');
    await page.getByLabel('E-mail').fill(people.surveyor.email);
    await page.getByLabel('Password').fill('three loud herons');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('E-mail or password is wrong.').waitFor();
    await page.getByLabel('Password').fill(people.surveyor.password);
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'Projects', level: 1 }).waitFor();
    await context.close();
  });

  it('sends a stranger to the door and, once in, to the page that was asked for', async () => {
    const { hub, people } = await newOrganization();
    const { page, context } = await openDesk(browser, hub.url);
    await page.goto('/keys');
    await page.waitForURL('**/sign-in?next=%2Fkeys');
    await page.getByLabel('E-mail').fill(people.admin.email);
    await page.getByLabel('Password').fill(people.admin.password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('heading', { name: 'Keys', level: 1 }).waitFor();
    await page.getByRole('button', { name: 'Sign out' }).first().click();
    await page.waitForURL('**/sign-in');
    await page.goto('/projects');
    await page.waitForURL('**/sign-in?next=%2Fprojects');
    await context.close();
  });

  it('is not undone on the screen while the hub does not hear of it', async () => {
    const { hub, people } = await newOrganization();
    const { page, context } = await openDesk(browser, hub.url, people.admin);
    await page.goto('/projects');
    await page.getByText('No project yet').waitFor();
    await page.route('**/sessions/current', (route) => route.abort());
    await page.getByRole('button', { name: 'Sign out' }).first().click();
    await page.getByText('You are still signed in: The hub cannot be reached. Try again.').first().waitFor();
    expect(new URL(page.url()).pathname).toBe('/projects');
    await page.unroute('**/sessions/current');
    await page.getByRole('button', { name: 'Sign out' }).first().click();
    await page.waitForURL('**/sign-in');
    await context.close();
  });

  it('goes to no other site, whatever ?next= says', async () => {
    const { hub, people } = await newOrganization();
    for (const next of [
      '//elsewhere.example/',
      'https://elsewhere.example/',
      '/\\elsewhere.example',
      'javascript:0',
    ]) {
      const { page, context } = await openDesk(browser, hub.url);
      await page.goto(`/sign-in?next=${encodeURIComponent(next)}`);
      await page.getByLabel('E-mail').fill(people.admin.email);
      await page.getByLabel('Password').fill(people.admin.password);
      await page.getByRole('button', { name: 'Sign in' }).click();
      await page.getByRole('heading', { name: 'Projects', level: 1 }).waitFor();
      expect(new URL(page.url()).origin).toBe(hub.url);
      await context.close();
    }
  });
});

describe('by night', () => {
  it('stays as it was switched, from the first paint on', async () => {
    const { hub, people } = await newOrganization();
    const { page, context } = await openDesk(browser, hub.url, people.admin, { colorScheme: 'light' });
    await page.goto('/projects');
    const paper = () => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
    const day = await paper();
    await page.getByLabel('Theme').last().selectOption('night');
    expect(await paper()).not.toBe(day);
    await page.reload({ waitUntil: 'commit' });
    await page.waitForSelector('body', { state: 'attached' });
    expect(await page.evaluate(() => document.documentElement.dataset.theme)).toBe('night');
    await context.close();
  });
});

describe('an invitation', () => {
  it('without its token is called incomplete, and asks for no password', async () => {
    const { hub } = await newOrganization();
    const { page, context } = await openDesk(browser, hub.url);
    await page.goto('/invitation');
    await page.getByRole('heading', { name: 'The link is incomplete' }).waitFor();
    expect(await page.getByLabel('Password').count()).toBe(0);
    await context.close();
  });

  it('lets a person set a password once, and shows them what their role may see', async () => {
    const { hub, people } = await newOrganization();
    const admin = await openDesk(browser, hub.url, people.admin);
    await admin.page.goto('/people');
    await admin.page.getByRole('button', { name: 'Invite a person' }).click();
    await admin.page.getByLabel('Name').fill('Bo Reed');
    const email = `bo-${Date.now()}@larkspur.example`;
    await admin.page.getByLabel('E-mail').fill(email);
    await admin.page.getByLabel('Role').selectOption('analyst');
    await admin.page.getByRole('button', { name: 'Invite', exact: true }).click();
    const link = (await admin.page.locator('[data-secret]').textContent()) ?? '';
    await admin.page.getByRole('button', { name: 'I have kept it' }).click();
    await admin.page
      .getByRole('row', { name: /Bo Reed/ })
      .getByText('invited')
      .waitFor();

    const bo = await openDesk(browser, hub.url);
    await bo.page.goto(new URL(link).pathname + new URL(link).hash);
    await bo.page.getByLabel('Password').fill('three quiet herons');
    await bo.page.getByLabel('Once more').fill('three quiet heron');
    await bo.page.getByRole('button', { name: 'Set the password' }).click();
    await bo.page.getByText('The two differ.').waitFor();
    await bo.page.getByLabel('Once more').fill('three quiet herons');
    await bo.page.getByRole('button', { name: 'Set the password' }).click();
    await bo.page.getByRole('heading', { name: 'Projects', level: 1 }).waitFor();
    await bo.page.getByText('Bo Reed').first().waitFor();
    const sections = bo.page.getByRole('navigation', { name: 'Sections' });
    expect(await sections.getByRole('link').allTextContents()).toEqual(['Reference']);
    await bo.page.goto('/keys');
    await bo.page.getByText('Not allowed for your role').waitFor();

    const again = await openDesk(browser, hub.url);
    await again.page.goto(new URL(link).pathname + new URL(link).hash);
    await again.page.getByLabel('Password').fill('three other herons');
    await again.page.getByLabel('Once more').fill('three other herons');
    await again.page.getByRole('button', { name: 'Set the password' }).click();
    await again.page.getByRole('alert').filter({ hasText: 'invitation_used' }).waitFor();
    for (const { context } of [admin, bo, again]) await context.close();
  });
});
