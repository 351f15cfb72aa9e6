import { mkdirSync } from 'node:fs';
import axe from 'axe-core';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { METHODS } from '@/app/reference/methods/methods';
import { api } from '@/tests/setup/api';
import { type Desk, openBrowser, openDesk, settled } from './browser';
import { hookedUp } from './hooked';
import { walkedOrganization } from './site';

const SCREENS = 'tests/output/screens';
/** `npm run pictures` makes those of the README anew. */
const TOUR = process.env.HUBTACK_PICTURES ? 'tests/console/tour' : SCREENS;
const ON_TOUR = ['setup', 'layer', 'control'];

let browser: Browser;
let ground: Awaited<ReturnType<typeof walkedOrganization>>;
let uploadId: string;
let hookId: string;
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
  await withdrawOne();
  hookId = await hookedUp(ground.hub.url, ground.key);
}, 60_000);
afterAll(() => browser.close());

/** Withdraws the refit from two machines; a crew has answered, the other has not. */
async function withdrawOne(): Promise<void> {
  const { hub, key, site } = ground;
  const caller = api(hub.url, key);
  const at = (path: string) => `/projects/${site.projectId}${path}`;
  const { body: passed } = await caller.get(at('/setups?verdict=pass')).expect(200);
  const { id } = passed.data.find((setup: { id: string }) => setup.id !== site.setupId);
  for (const machine of ['DZ-3', 'EX-2'])
    await caller.post(at(`/setups/${id}/release`), { machine, layer: site.layer }).expect(200);
  const note = 'The tripod was bumped by the water truck.';
  const { body } = await caller.post(at(`/setups/${id}/withdraw`), { note }).expect(200);
  const [answered] = body.acknowledgements;
  await caller
    .post(at(`/acknowledgements/${answered.id}/acknowledge`), { note: 'Parked at the north gate.' })
    .expect(200);
}

/** Every page, by the name of its picture. */
const PAGES: Record<string, (project: string) => string> = {
  home: () => '/',
  'sign-in': () => '/sign-in',
  welcome: () => '/welcome',
  invitation: () => '/invitation#hti_none',
  projects: () => '/projects',
  setups: (project) => `${project}/setups`,
  setup: (project) => `${project}/setups/${ground.site.setupId}`,
  withdrawals: (project) => `${project}/withdrawals`,
  control: (project) => `${project}/control`,
  'control-point': (project) => `${project}/control/HT-103`,
  grade: (project) => `${project}/grade`,
  layer: (project) => `${project}/grade/subgrade`,
  uploads: (project) => `${project}/uploads`,
  receipt: (project) => `${project}/uploads/${uploadId}`,
  keys: () => '/keys',
  hooks: () => '/hooks',
  hook: () => `/hooks/${hookId}`,
  people: () => '/people',
  audit: () => '/audit',
  reference: () => '/reference',
  problems: () => '/reference/problems',
  problem: () => '/reference/problems/face_mismatch',
  conventions: () => '/reference/conventions',
  methods: () => '/reference/methods',
  ...Object.fromEntries(METHODS.map(({ slug }) => [`method-${slug}`, () => `/reference/methods/${slug}`])),
  missing: () => '/no-such-page',
};
/** Pages of one layout: every other is looked at wide by light, the rest narrow by dark, the longest like any page. */
const alike = (name: string) => name.startsWith('method-') && name !== 'method-free-station';
const pagesAt = (colorScheme: string, width: number) =>
  Object.keys(PAGES).filter((name, i) => {
    if (!alike(name)) return true;
    return i % 2 === 0 ? colorScheme === 'light' && width > 1000 : colorScheme === 'dark' && width < 1000;
  });

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
    const names = pagesAt(colorScheme, width);
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

    it.each(names)('%s is complete, accessible, and no wider than the screen', async (name) => {
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

  it.each([
    ['A4', 688, false],
    ['A4', 1016, true],
    ['Letter', 710, false],
    ['Letter', 950, true],
  ] as const)(
    'a setup on %s, %i px between the margins, is one column with everything in it',
    async (format, width, landscape) => {
      const { hub, people, site } = ground;
      const viewport = { width, height: 900 };
      const { page, context } = await openDesk(browser, hub.url, people.admin, { viewport });
      await page.goto(`/projects/${site.projectId}/setups/${site.setupId}`);
      await settled(page);
      const way = landscape ? 'landscape' : 'portrait';
      await page.pdf({ path: `${SCREENS}/setup-${format}-${way}.pdf`, format, landscape });
      await page.emulateMedia({ media: 'print' });
      const targets = page.getByRole('table', { name: 'Targets with their residuals' });
      expect(await targets.getByRole('columnheader').allInnerTexts()).toHaveLength(8);
      for (const head of await targets.getByRole('columnheader').all())
        expect(await head.isVisible()).toBe(true);
      const table = (await targets.boundingBox())!;
      expect(table.x).toBe(0);
      expect(table.x + table.width).toBeLessThanOrEqual(width);
      const names = targets.getByRole('row').locator('td:first-child');
      for (const name of await names.all()) expect((await name.boundingBox())!.height).toBeLessThan(45);
      expect(await page.getByText(/^printed \d+ \w+ \d{4}/).isVisible()).toBe(true);
      expect(
        await page
          .locator('main')
          .getByText(/^Thistledown Yard/)
          .isVisible(),
      ).toBe(true);
      await context.close();
    },
  );
});
