import { mkdirSync } from 'node:fs';
import axe from 'axe-core';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { api } from '@/tests/setup/api';
import { type Desk, openBrowser, openDesk, settled } from './browser';
import { walkedOrganization } from './site';

const SCREENS = 'tests/output/screens';
/** `npm run pictures` makes those of the README anew. */
const TOUR = process.env.HUBTACK_PICTURES ? 'tests/console/tour' : SCREENS;
const ON_TOUR = ['setup', 'layer', 'control'];

let browser: Browser;
let ground: Awaited<ReturnType<typeof walkedOrganization>>;
let uploadId: string;
beforeAll(async () => {
  mkdirSync(SCREENS, { recursive: true });
  browser = await openBrowser();
  ground = await walkedOrganization();
  const { hub, key, site } = ground;
  const bad = {
    clientId: 'bad',
    units: { length: 'ft' },
    gradeShots: [{ clientId: 'b-1', layer: 'subgrade' }],
  };
  await api(hub.url, key).post(`/projects/${site.projectId}/uploads`, bad).expect(422);
  const refused = await api(hub.url, key)
    .get(`/projects/${site.projectId}/uploads?status=refused`)
    .expect(200);
  uploadId = refused.body.data[0].id;
}, 60_000);
afterAll(() => browser.close());

/** Every page, by the name of its picture. */
const PAGES: Record<string, (project: string) => string> = {
  home: () => '/',
  'sign-in': () => '/sign-in',
  welcome: () => '/welcome',
  invitation: () => '/invitation#hti_none',
  projects: () => '/projects',
  setups: (project) => `${project}/setups`,
  setup: (project) => `${project}/setups/${ground.site.setupId}`,
  control: (project) => `${project}/control`,
  'control-point': (project) => `${project}/control/HT-103`,
  grade: (project) => `${project}/grade`,
  layer: (project) => `${project}/grade/subgrade`,
  uploads: (project) => `${project}/uploads`,
  receipt: (project) => `${project}/uploads/${uploadId}`,
  keys: () => '/keys',
  people: () => '/people',
  audit: () => '/audit',
  reference: () => '/reference',
  problems: () => '/reference/problems',
  problem: () => '/reference/problems/face_mismatch',
  conventions: () => '/reference/conventions',
  missing: () => '/no-such-page',
};

/**
 * What axe finds, as lines. Inside the laid-out API document the markup is its library's own: there the colours are
 * ours to answer for, and the landmarks, names and roles are not.
 */
async function violations(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  return page.evaluate(async () => {
    const tool = (window as unknown as { axe: typeof axe }).axe;
    const library = '.scalar-app';
    const ours = await tool.run({ exclude: [library] });
    const theirs = document.querySelector(library)
      ? await tool.run({ include: [library] }, { runOnly: ['color-contrast'] })
      : { violations: [] };
    const found = [...ours.violations, ...theirs.violations];
    return found.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`);
  });
}

describe.each(['light', 'dark'] as const)('by %s', (colorScheme) => {
  describe.each([1440, 390])('at %i px', (width) => {
    let desk: Desk;
    beforeAll(async () => {
      const { hub, people } = ground;
      const viewport = { width, height: 900 };
      desk = await openDesk(browser, hub.url, people.admin, {
        colorScheme,
        viewport,
        reducedMotion: 'reduce',
      });
    });
    afterAll(() => desk.context.close());

    it.each(Object.keys(PAGES))('%s is complete, accessible, and no wider than the screen', async (name) => {
      const { page, complaints } = desk;
      complaints.length = 0;
      await page.goto(PAGES[name](`/projects/${ground.site.projectId}`));
      await settled(page);
      if (name === 'reference') await page.getByText('Download OpenAPI Document').first().waitFor();
      await page.screenshot({ path: `${SCREENS}/${name}-${width}-${colorScheme}.png`, fullPage: true });
      if (ON_TOUR.includes(name) && width === 1440 && colorScheme === 'light')
        await page.screenshot({ path: `${TOUR}/${name}.png` });
      const wider = await page.evaluate(
        () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
      );
      expect({ wider, violations: await violations(page), complaints }).toEqual({
        wider: 0,
        violations: [],
        complaints: [],
      });
    });
  });
});

describe('by keyboard', () => {
  it('the first stop on every page skips to what it shows', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.admin);
    await page.goto(`/projects/${site.projectId}/setups`);
    await settled(page);
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('Skip to the page');
    await page.keyboard.press('Enter');
    expect(await page.evaluate(() => document.activeElement?.id)).toBe('page');
    await context.close();
  });
});

describe('on paper', () => {
  it('a setup leaves out what cannot be pressed there', async () => {
    const { hub, people, site } = ground;
    const { page, context } = await openDesk(browser, hub.url, people.admin);
    await page.goto(`/projects/${site.projectId}/setups/${site.setupId}`);
    await settled(page);
    await page.emulateMedia({ media: 'print' });
    expect(await page.getByRole('button', { name: 'Release', exact: true }).isVisible()).toBe(false);
    expect(await page.getByRole('navigation', { name: 'Sections' }).isVisible()).toBe(false);
    expect(await page.getByText('Before any blade moves').isVisible()).toBe(true);
    await page.pdf({ path: `${SCREENS}/setup.pdf`, preferCSSPageSize: true });
    await context.close();
  });
});
