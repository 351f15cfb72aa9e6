import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { openBrowser, openDesk } from './browser';
import { walkedOrganization } from './site';

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
});
afterAll(() => browser.close());

it('is searched by the act that its own hint names, and leads to what each act was on', async () => {
  const { hub, people, site } = await walkedOrganization();
  const { page, context, complaints } = await openDesk(browser, hub.url, people.admin);
  await page.goto('/audit');
  const act = page.getByLabel(/^Act/);
  const [, hint] = /such as (\S+)$/.exec((await page.getByText(/^Act, in full/).textContent()) ?? '') ?? [];
  const look = async (name: string) => {
    await act.fill(name);
    await page.getByRole('button', { name: 'Look' }).click();
    const cell = page.getByRole('cell', { name, exact: true }).first();
    await cell.waitFor();
    return page.getByRole('row').filter({ has: cell }).first().getByRole('link').getAttribute('href');
  };
  const project = `/projects/${site.projectId}`;
  expect(await look(hint)).toBe(`${project}/setups/${site.setupId}`);
  expect(await look('control.imported')).toBe(`${project}/control`);
  expect(await look('layer.created')).toBe(`${project}/grade/${site.layer}`);
  expect(await look('grade.checked')).toBe(`${project}/grade/${site.layer}`);
  expect(await look('upload.processed')).toMatch(/\/uploads\/[0-9a-f-]{36}$/);
  expect(complaints).toEqual([]);
  await context.close();
});
