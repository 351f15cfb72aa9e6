import { existsSync } from 'node:fs';
import {
  type Browser,
  type BrowserContext,
  type BrowserContextOptions,
  chromium,
  type Page,
} from 'playwright-core';

const PROGRAM = '/usr/bin/chromium';

/** Debian's Chromium; no address but this machine's can be reached from it. */
export function openBrowser(): Promise<Browser> {
  if (!existsSync(PROGRAM)) throw new Error(`${PROGRAM} is missing: apt-get install chromium`);
  const args = ['--no-sandbox', '--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1'];
  return chromium.launch({ executablePath: PROGRAM, args });
}

export interface Desk {
  context: BrowserContext;
  page: Page;
  /** What the browser complained of: scripts that broke, content that the policy refused. */
  complaints: string[];
}

/** A browser window of its own; with a person it is signed in as them. */
export async function openDesk(
  browser: Browser,
  url: string,
  person?: { email: string; password: string },
  options: BrowserContextOptions = {},
): Promise<Desk> {
  const context = await browser.newContext({
    baseURL: url,
    viewport: { width: 1440, height: 900 },
    ...options,
  });
  if (person) {
    const { email, password } = person;
    const answer = await context.request.post('/api/v1/sessions', { data: { email, password } });
    if (!answer.ok()) throw new Error(await answer.text());
  }
  const page = await context.newPage();
  page.setDefaultTimeout(20_000);
  const complaints: string[] = [];
  page.on('pageerror', (error) => complaints.push(`${page.url()}: ${error.message}`));
  page.on('console', (message) => {
    // Refusals of the API are shown by the page itself.
    if (message.type() === 'error' && !message.text().startsWith('Failed to load resource'))
      complaints.push(`${page.url()}: ${message.text()}`);
  });
  return { context, page, complaints };
}

/** Waits until a page has read what it shows. */
export async function settled(page: Page): Promise<void> {
  await page.locator('h1').first().waitFor({ state: 'attached' });
  await page.waitForFunction(() => !document.querySelector('[aria-label="Reading"]'));
}
