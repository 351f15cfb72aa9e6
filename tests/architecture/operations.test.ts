import { readdirSync, readFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { describe, expect, it } from 'vitest';
import { API_BASE } from '@/openapi/base';
import { CONTRACTS } from '@/openapi/contracts';
import { buildDocument, problemsOf } from '@/openapi/document';
import { SCOPES } from '@/openapi/scopes';
import { api } from '@/tests/setup/api';
import { ownHub } from '@/tests/setup/organization';

const root = 'app/api/v1';
const METHODS = ['get', 'post', 'put', 'patch', 'delete'] as const;

function routeFiles(folder: string): string[] {
  return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const path = join(folder, entry.name);
    if (entry.isDirectory()) return routeFiles(path);
    return entry.name === 'route.ts' ? [path] : [];
  });
}

/** `projects/[projectId]/route.ts` → `/projects/{projectId}`; null for the path that is none. */
function pathOf(file: string): string | null {
  const folder = relative(root, file).replace(/\/?route\.ts$/, '');
  return folder.includes('[...') ? null : `/${folder.replaceAll('[', '{').replaceAll(']', '}')}`;
}

/** Methods and contracts that a route file binds, read as text: `get: endpoint(contracts.listProjects, …`. */
function boundIn(file: string): string[] {
  const text = readFileSync(file, 'utf8');
  const path = pathOf(file);
  const bindings = text.matchAll(/^ {2}(\w+): \w*[Ee]ndpoint\(contracts\.(\w+),/gm);
  return [...bindings].map(([, method, id]) => `${method.toUpperCase()} ${path} ${id}`);
}

const contracted = CONTRACTS.map(({ method, path, id }) => `${method.toUpperCase()} ${path} ${id}`).sort();

describe('the operations', () => {
  it('are the same on disk as in the contracts', () => {
    const onDisk = routeFiles(root)
      .filter((file) => pathOf(file) !== null)
      .flatMap(boundIn);
    expect(onDisk.sort()).toEqual(contracted);
  });

  it('have no route file that binds no contract', () => {
    const empty = routeFiles(root).filter((file) => pathOf(file) !== null && boundIn(file).length === 0);
    expect(empty).toEqual([]);
  });

  it('stand once each', () => {
    expect(new Set(CONTRACTS.map(({ id }) => id)).size).toBe(CONTRACTS.length);
    expect(new Set(CONTRACTS.map(({ method, path }) => `${method} ${path}`)).size).toBe(CONTRACTS.length);
  });

  it('are what the document says', () => {
    const { paths = {} } = buildDocument();
    const documented = Object.entries(paths).flatMap(([path, item]) =>
      METHODS.filter((method) => item?.[method]).map(
        (method) => `${method.toUpperCase()} ${path} ${item?.[method]?.operationId}`,
      ),
    );
    expect(documented.sort()).toEqual(contracted);
  });

  it('say their parameters, scope, answers and problems in the document', () => {
    const { paths = {} } = buildDocument();
    for (const operation of CONTRACTS) {
      const documented = paths[operation.path]?.[operation.method];
      const names = [...operation.path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name);
      const parameters = (documented?.parameters ?? []) as { name: string; in: string }[];
      const inPath = parameters.filter((parameter) => parameter.in === 'path').map(({ name }) => name);
      expect([operation.id, inPath]).toEqual([operation.id, names]);
      if (operation.access in SCOPES) expect(documented?.description).toContain(`\`${operation.access}\``);
      expect(documented?.security).toHaveLength(operation.access === 'public' ? 0 : 2);
      const responses = JSON.stringify(documented?.responses);
      for (const code of problemsOf(operation)) expect(responses).toContain(`\`${code}\``);
      for (const status of Object.keys(operation.answers))
        expect(documented?.responses).toHaveProperty(status);
    }
  });

  it('are documented by the committed file, to the letter', () => {
    const committed = JSON.parse(readFileSync('openapi/openapi.json', 'utf8')) as unknown;
    expect(committed).toEqual(JSON.parse(JSON.stringify(buildDocument())));
  });

  it('are documented by the running hub, to the letter', async () => {
    const { body } = await api(ownHub().url).get('/openapi.json').expect(200);
    expect(body).toEqual(JSON.parse(readFileSync('openapi/openapi.json', 'utf8')));
  });

  it('are served by the running hub: OPTIONS tells for each path the methods of its contracts', async () => {
    const { url } = ownHub();
    for (const path of new Set(CONTRACTS.map((operation) => operation.path))) {
      const own = CONTRACTS.filter((operation) => operation.path === path).map(({ method }) =>
        method.toUpperCase(),
      );
      const answer = await fetch(`${url}${API_BASE}${path.replace(/\{\w+\}/g, 'x')}`, { method: 'OPTIONS' });
      const expected = [...own, ...(own.includes('GET') ? ['HEAD'] : []), 'OPTIONS'].sort();
      expect([path, answer.status, answer.headers.get('allow')?.split(', ').sort()]).toEqual([
        path,
        204,
        expected,
      ]);
    }
  });
});
