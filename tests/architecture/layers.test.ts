import { extname } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { lintTree } from './lintTree';

const use = (module: string) => `import { thing } from '${module}';\n\nexport const used = thing;\n`;

/** An import, the room it is planted in, and the words with which it is refused. */
const IMPORTS: [string, string, RegExp][] = [
  ['lib/compute/planted.ts', '@/db/tenant', /compute is pure/],
  ['lib/compute/survey/planted.ts', '@/lib/services/record', /compute is pure/],
  ['lib/compute/planted.ts', 'pg', /compute does no I\/O/],
  ['lib/compute/planted.ts', 'node:fs', /compute does no I\/O/],
  ['lib/compute/planted.ts', 'zod', /knows no framework/],
  ['lib/compute/planted.ts', '../formats/table', /Import across folders by @/],
  ['lib/formats/planted.ts', '@/lib/services/record', /formats are pure/],
  ['lib/formats/planted.ts', 'node:fs', /formats do no I\/O/],
  ['lib/services/setups/planted.ts', '@/lib/http/answer', /Services know nothing of HTTP/],
  ['lib/services/setups/planted.ts', '@/app/ui/Field', /Services know nothing of HTTP/],
  ['lib/services/setups/planted.ts', 'next/headers', /know the framework/],
  ['lib/services/setups/planted.ts', '@/db/client', /takes connections from the pool/],
  ['lib/services/setups/planted.ts', '../record', /Import across folders by @/],
  ['lib/access/planted.ts', '@/lib/services/record', /used by services/],
  ['lib/jobs/planted.ts', '@/db/client', /takes connections from the pool/],
  ['lib/http/planted.ts', '@/app/ui/Field', /Arrows point down only/],
  ['lib/http/planted.ts', '@/db/client', /takes connections from the pool/],
  ['db/planted.ts', '@/lib/services/record', /db knows no room above it/],
  ['db/planted.ts', '@/db/client', /takes connections from the pool/],
  ['openapi/planted.ts', '@/lib/problem', /openapi\/ is a leaf/],
  ['app/api/v1/planted/route.ts', '@/db/tenant', /A route binds a contract/],
  ['app/api/v1/planted/route.ts', '@/lib/compute/units/convert', /A route binds a contract/],
  ['app/planted/page.tsx', '@/db/tenant', /Pages fetch through the public API/],
  ['app/planted/page.tsx', '@/lib/services/projects/list', /Pages fetch through the public API/],
  ['app/planted/page.tsx', '../ui/Field', /Import across folders by @/],
  ['app/planted/page.tsx', '@/lib/compute/units/table', /Pages fetch through the public API/],
  ['app/reference/methods/planted.tsx', '@/db/tenant', /Pages on methods quote/],
  ['app/reference/methods/planted.tsx', '@/lib/services/setups/compute', /Pages on methods quote/],
];

/** Imports that the plan of the house has: down, or within a room. */
const ALLOWED: [string, string][] = [
  ['lib/compute/planted.ts', '@/lib/compute/units/convert'],
  ['lib/formats/planted.ts', '@/openapi/problemItem'],
  ['lib/services/setups/planted.ts', '@/db/tenant'],
  ['lib/services/setups/planted.ts', '@/lib/compute/units/convert'],
  ['lib/http/planted.ts', '@/lib/services/record'],
  ['db/tenant.ts', '@/db/client'],
  ['app/api/v1/planted/route.ts', '@/lib/services/projects/list'],
  ['app/planted/page.tsx', '@/openapi/schemas/project'],
  ['app/reference/methods/planted.tsx', '@/lib/compute/units/table'],
  ['app/reference/methods/planted.tsx', '@/lib/services/setups/result'],
];

/** What must be passed in, or read in one place. */
const GLOBALS: [string, string, RegExp, string][] = [
  ['lib/services/planted.ts', 'Date.now()', /Use the Runtime that is passed in/, 'lib/runtime.ts'],
  ['lib/compute/planted.ts', 'new Date()', /Use the Runtime that is passed in/, 'lib/runtime.ts'],
  ['lib/access/planted.ts', 'Math.random()', /Use the Runtime that is passed in/, 'lib/runtime.ts'],
  ['openapi/planted.ts', 'crypto.randomUUID()', /Use the Runtime that is passed in/, 'lib/runtime.ts'],
  ['db/planted.ts', 'performance.now()', /Use the Runtime that is passed in/, 'lib/runtime.ts'],
  ['lib/services/planted.ts', 'process.env.HOME', /noProcessEnv/, 'lib/config.ts'],
  ['app/planted/page.tsx', 'process.env.HOME', /noProcessEnv/, 'lib/config.ts'],
];

/** The same room, under a name of its own. */
function inRoom(path: string, name: string): string {
  const extension = extname(path);
  return `${path.slice(0, -extension.length)}-${name}${extension}`;
}

describe('the layers', () => {
  let found: Record<string, string[]>;
  const planted = (i: number) => inRoom(IMPORTS[i][0], `import${i}`);
  const sound = (i: number) => inRoom(IMPORTS[i][0], `sound${i}`);
  const allowed = (i: number) =>
    ALLOWED[i][0].includes('planted') ? inRoom(ALLOWED[i][0], `ok${i}`) : ALLOWED[i][0];
  const global = (i: number) => inRoom(GLOBALS[i][0], `global${i}`);
  beforeAll(() => {
    const sources: Record<string, string> = {};
    IMPORTS.forEach(([, module], i) => {
      sources[planted(i)] = use(module);
      sources[sound(i)] = 'export const used = 1;\n';
    });
    ALLOWED.forEach(([, module], i) => {
      sources[allowed(i)] = use(module);
    });
    GLOBALS.forEach(([, expression, , place], i) => {
      sources[global(i)] = `export const used = ${expression};\n`;
      sources[place] = `${sources[place] ?? ''}export const used${i} = ${expression};\n`;
    });
    found = lintTree(sources);
  });

  it.each(IMPORTS.map(([path, module, words], i) => [path, module, words, i] as const))(
    'of %s refuse %s',
    (_path, _module, words, i) => {
      expect(found[planted(i)]).toHaveLength(1);
      expect(found[planted(i)][0]).toMatch(words);
      expect(found[sound(i)]).toEqual([]);
    },
  );

  it.each(ALLOWED.map(([path, module], i) => [path, module, i] as const))(
    'of %s take %s',
    (_path, _module, i) => {
      expect(found[allowed(i)]).toEqual([]);
    },
  );

  it.each(GLOBALS.map(([path, expression, words, place], i) => [path, expression, place, words, i] as const))(
    'of %s refuse %s, which belongs in %s',
    (_path, _expression, place, words, i) => {
      expect(found[global(i)]).toHaveLength(1);
      expect(found[global(i)][0]).toMatch(words);
      expect(found[place]).toEqual([]);
    },
  );
});
