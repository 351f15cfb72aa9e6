import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { METHODS } from '@/app/reference/methods/methods';
import { ENOUGH } from '@/lib/compute/grade/conformance';
import { CRITICAL_W, DELTA_0 } from '@/lib/compute/statistics/distributions';
import { DEFAULT_WAVELENGTH } from '@/lib/compute/survey/atmosphere';
import { ODDS } from '@/lib/compute/survey/explain';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import { DEFAULT_SURROUNDINGS, MEAN_EARTH_RADIUS } from '@/lib/compute/survey/surroundings';
import { MARKS_WANTED } from '@/lib/compute/survey/verdict';
import { ARCSECOND, LENGTH } from '@/lib/compute/units/table';
import { ownHub } from '@/tests/setup/organization';

/** Names of methods that results can carry: every constant of the services that is called so. */
function methodsOfResults(): string[] {
  const files = readdirSync('lib/services', { recursive: true, encoding: 'utf8' });
  const texts = files
    .filter((name) => name.endsWith('.ts'))
    .map((name) => readFileSync(`lib/services/${name}`, 'utf8'));
  const constants = texts.flatMap((text) => [
    ...text.matchAll(/export const (?!\w*VERSION)\w*METHOD\w* = '([^']+)'/g),
  ]);
  return constants.map(([, name]) => name);
}

async function read(address: string): Promise<{ status: number; url: string; text: string }> {
  const response = await fetch(`${ownHub().url}${address}`);
  const html = await response.text();
  const text = html
    .replace(/<(script|style)\b[\s\S]*?<\/\1>/g, '')
    .replace(/<[^>]+>/g, ' ')
    .replaceAll('&#x27;', '’')
    .replaceAll('&quot;', '"')
    .replace(/\s+/g, ' ');
  return { status: response.status, url: response.url, text };
}

describe('the reference of methods', () => {
  it('finds the methods of setups, levelling and forecasts among the results', () => {
    expect(methodsOfResults().length).toBeGreaterThanOrEqual(3);
  });

  it.each(methodsOfResults())('has a page for the method that results carry as “%s”', async (name) => {
    const method = METHODS.find(({ carried }) => carried?.method === name);
    expect(method).toBeDefined();
    const { status, text } = await read(`/reference/methods/${encodeURIComponent(name)}`);
    expect(status).toBe(200);
    expect(text).toContain(method!.title);
    expect(text).toContain(`version ${method!.carried!.version}`);
  });

  it.each(METHODS.map(({ slug }) => slug))(
    '%s says its source, what it assumes and where it ends',
    async (slug) => {
      const { status, text } = await read(`/reference/methods/${slug}`);
      expect(status).toBe(200);
      for (const part of ['What it assumes', 'Where it ends', 'Units', 'Sources'])
        expect(text).toContain(part);
      const { assumes, limits, sources } = METHODS.find((method) => method.slug === slug)!;
      for (const list of [assumes, limits, sources]) expect(list.length).toBeGreaterThan(0);
    },
  );

  it('has every page on its index, each once', async () => {
    const { text } = await read('/reference/methods');
    expect(new Set(METHODS.map(({ slug }) => slug)).size).toBe(METHODS.length);
    for (const { title } of METHODS) expect(text).toContain(title);
  });

  it('answers 404 for a method that is none', async () => {
    expect((await read('/reference/methods/dead-reckoning')).status).toBe(404);
  });

  const number = (value: number) => String(Number(value.toPrecision(6)));
  it.each([
    ['units', [number(LENGTH.ft), '0.304800609601']],
    [
      'distances',
      [`${number(DEFAULT_WAVELENGTH * 1e9)} nm`, `${DEFAULT_SURROUNDINGS.unknownAtmospherePpm} ppm`],
    ],
    ['curvature-and-refraction', [number(DEFAULT_SURROUNDINGS.refraction), `${number(MEAN_EARTH_RADIUS)} m`]],
    [
      'faces-and-sets',
      [
        `${number(DEFAULT_ACCURACY.direction / ARCSECOND)}″`,
        `${number(DEFAULT_ACCURACY.distance * 1000)} mm`,
      ],
    ],
    ['statistics', [number(CRITICAL_W), number(DELTA_0)]],
    ['setup-verdict', [`${MARKS_WANTED.horizontal} distinct trusted marks`, number(CRITICAL_W)]],
    ['explanations', Object.values(ODDS).map(number)],
    ['grade-check', [number(ENOUGH), number(1 - ENOUGH)]],
  ] as const)('%s quotes the figures that the hub computes with', async (slug, figures) => {
    const { text } = await read(`/reference/methods/${slug}`);
    const words = text.replaceAll(' ″', '″');
    for (const figure of figures) expect(words).toContain(figure);
  });

  it('sets formulas without a script: as MathML in the page itself', async () => {
    const html = await (await fetch(`${ownHub().url}/reference/methods/statistics`)).text();
    expect(html.match(/<math[ >]/g)!.length).toBeGreaterThan(10);
    expect(html).not.toContain('merror');
  });
});
