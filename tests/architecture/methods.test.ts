import { request } from 'node:http';
import { describe, expect, it } from 'vitest';
import { API_BASE } from '@/openapi/base';
import { CONTRACTS } from '@/openapi/contracts';
import { Problem } from '@/openapi/schemas/problem';
import { ownHub } from '@/tests/setup/organization';

interface Answer {
  status: number;
  headers: Record<string, string | string[] | undefined>;
  text: string;
}

/** A request by any method that a client can write, which fetch would not send. */
function ask(path: string, method: string): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const sent = request(`${ownHub().url}${path}`, { method }, (response) => {
      const chunks: Buffer[] = [];
      response.on('data', (chunk: Buffer) => chunks.push(chunk));
      response.on('end', () =>
        resolve({
          status: response.statusCode ?? 0,
          headers: response.headers,
          text: Buffer.concat(chunks).toString(),
        }),
      );
    });
    sent.on('error', reject);
    sent.end();
  });
}

const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'TRACE', 'PROPFIND', 'LOCK', 'SEARCH', 'QUERY'];
// Methods that this version of Node.js can write at all.
const WRITABLE = METHODS.filter((method) => {
  try {
    request('http://127.0.0.1', { method })
      .on('error', () => undefined)
      .destroy();
    return true;
  } catch {
    return false;
  }
});

function expectRefusal({ status, headers, text }: Answer, allow: string[]): void {
  expect(status).toBe(405);
  expect(headers['content-type']).toBe('application/problem+json');
  expect(String(headers.allow).split(', ').sort()).toEqual(allow.sort());
  expect(Problem.strict().parse(JSON.parse(text))).toMatchObject({ code: 'method_not_allowed', status: 405 });
}

describe('a path', () => {
  const paths = [...new Set(CONTRACTS.map(({ path }) => path))];

  it.each(paths)('%s refuses the methods it does not take, and says which it does', async (path) => {
    const own = CONTRACTS.filter((c) => c.path === path).map(({ method }) => method.toUpperCase());
    const allow = [...own, ...(own.includes('GET') ? ['HEAD'] : []), 'OPTIONS'];
    const address = `${API_BASE}${path.replace(/\{\w+\}/g, '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44')}`;
    for (const method of WRITABLE.filter((m) => !own.includes(m)))
      expectRefusal(await ask(address, method), allow);
    if (!allow.includes('HEAD')) expect((await ask(address, 'HEAD')).status).toBe(405);
  });

  it('of no operation is not found, by whatever method of the API', async () => {
    for (const path of ['/api', '/api/v1', '/api/v1/nothing', '/api/v2/projects', '/api/v1/projects/x/y/z']) {
      for (const method of ['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS']) {
        const { status, headers, text } = await ask(path, method);
        expect([path, method, status]).toEqual([path, method, 404]);
        expect(headers['content-type']).toBe('application/problem+json');
        expect(Problem.strict().parse(JSON.parse(text)).code).toBe('not_found');
      }
    }
  });

  it('of a page takes reading only', async () => {
    for (const path of ['/', '/sign-in', '/reference', '/nothing'])
      for (const method of ['POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'])
        expectRefusal(await ask(path, method), ['GET', 'HEAD']);
  });
});
