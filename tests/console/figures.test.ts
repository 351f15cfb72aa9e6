import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { worstOutcome } from '@/app/ui/checkOutcome';
import { allowed, liesAt, signedOffset } from '@/app/ui/layerWords';
import { openBrowser, openDesk } from './browser';
import { metreSite } from './metreSite';

describe('a stated length', () => {
  const layer = (unit: 'm' | 'ft', below: number, above: number) =>
    allowed({ units: { length: unit }, tolerance: { below, above, citation: null } });

  it('has the decimals of its unit, and more where it would read as another', () => {
    expect(layer('m', 0.03, 0.015)).toBe('0.030 low to 0.015 m high');
    expect(layer('ft', 0.1, 0.05)).toBe('0.10 low to 0.05 ft high');
    expect(layer('ft', 0.1, 0.125)).toBe('0.100 low to 0.125 ft high');
    // 30 mm as a project in feet reads them, and what a conversion leaves over.
    expect(layer('ft', 0.03 / 0.3048, 0.1 + 1e-12)).toBe('0.0984 low to 0.1000 ft high');
    expect(signedOffset(-0.125, 'm')).toBe('−0.125 m');
    expect(signedOffset(-0.125, 'ftUS')).toBe('−0.125 ft');
    expect(signedOffset(-0.5, 'ft')).toBe('−0.50 ft');
    const units = { length: 'ft' } as const;
    expect(liesAt({ offset: -0.125, surfaceName: 'Pad', units })).toBe('0.125 ft below Pad');
  });
});

describe('an outcome', () => {
  it('of nothing is no agreement', () => {
    expect(worstOutcome([])).toEqual({ tone: 'plain', word: 'nothing checked' });
    expect(worstOutcome([null, null]).tone).toBe('plain');
    expect(worstOutcome(['agreed', null]).tone).toBe('pass');
    expect(worstOutcome(['agreed', 'notCapable']).tone).toBe('hold');
  });
});

describe('a project in metres', () => {
  let browser: Browser;
  let site: Awaited<ReturnType<typeof metreSite>>;
  beforeAll(async () => {
    browser = await openBrowser();
    site = await metreSite();
  }, 60_000);
  afterAll(() => browser.close());

  it('shows limits and offsets to the millimetre, with their unit in the drawings too', async () => {
    const { hub, people, at, receipt } = site;
    expect(receipt.refused).toEqual([]);
    const { page, context, complaints } = await openDesk(browser, hub.url, people.surveyor);
    await page.goto(at('/grade'));
    const row = page.getByRole('row', { name: /subgrade/ });
    await row.getByText('0.030 low to 0.015 m high').waitFor();
    await row.getByText('−0.125 m', { exact: true }).waitFor();
    await row.getByText('0.125 m below Pad').waitFor();

    await row.getByRole('link').click();
    await page.getByRole('img', { name: /^Distribution of 2 deviations/ }).waitFor();
    for (const label of ['F 0.030 m', 'C 0.015 m'])
      await page.locator('svg text').filter({ hasText: label }).waitFor();
    await page
      .getByRole('img', { name: /^From the side: .* m, subgrade at .* m, ground at .* m\.$/ })
      .waitFor();
    await page
      .locator('svg text')
      .filter({ hasText: /^ground [\d.]+ m$/ })
      .waitFor();

    await page.goto(at(`/setups/${receipt.setups[0].id}`));
    await page.getByRole('button', { name: 'Release', exact: true }).click();
    await page.getByLabel('Machine').fill('DZ-9');
    await page.getByLabel('Layer').selectOption({ label: 'subgrade: 0.125 m below Pad' });
    await page.getByLabel(/^(Note|Why it may be used)/).fill('Seen.');
    await page.getByRole('dialog').getByRole('button', { name: 'Release' }).click();
    await page.getByText(/to DZ-9, subgrade with −0\.125 m, until/).waitFor();
    expect(complaints).toEqual([]);
    await context.close();
  });
});
