import type { IncomingMessage } from 'node:http';
import { Problem } from '@/lib/problem';
import { API_BASE } from '@/openapi/base';
import { CONTRACTS } from '@/openapi/contracts';

const MAX_URL = 8192;
const KNOWN = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS']);

const patterns = CONTRACTS.map(({ path, method }) => ({
  pattern: new RegExp(`^${path.replaceAll('.', '\\.').replace(/\{[^}]+\}/g, '[^/]+')}$`),
  method: method.toUpperCase(),
}));

/** Methods that a path of the API takes; the framework itself knows seven and no more. */
export function allowedMethods(pathname: string): string[] {
  const path = pathname.slice(API_BASE.length);
  const methods = patterns.filter(({ pattern }) => pattern.test(path)).map(({ method }) => method);
  return [...methods, ...(methods.includes('GET') ? ['HEAD'] : []), 'OPTIONS'];
}

/**
 * Refuses what the framework would answer with a plain 500 or an empty 405: addresses that cannot be read and
 * methods that it does not know.
 *
 * @throws Problem
 */
export function guardRequest({
  url = '/',
  method = 'GET',
  headers,
  httpVersion,
}: Pick<IncomingMessage, 'url' | 'method' | 'headers' | 'httpVersion'>): void {
  if (headers.host === undefined && httpVersion === '1.1')
    throw new Problem('request_malformed', 'The Host header is missing.');
  if (url.length > MAX_URL) throw new Problem('uri_too_long');
  const [pathname, ...search] = url.split('?');
  if (DEVIOUS.test(pathname) || !isReadable(pathname) || !isReadable(search.join('?')))
    throw new Problem('url_malformed');
  if (isApi(url) ? KNOWN.has(method) : method === 'GET' || method === 'HEAD') return;
  const allow = (isApi(url) ? allowedMethods(pathname) : ['GET', 'HEAD']).join(', ');
  throw new Problem('method_not_allowed', `This path takes ${allow}.`, { allow });
}

export function isApi(url = '/'): boolean {
  return /^\/api(?:[/?]|$)/.test(url);
}

/** A second host, an empty segment, a fragment or a step up: the framework would answer for another path. */
const DEVIOUS = /^[^/]|\/\/|[\\#]|\/(?:\.|%2e){1,2}(?:\/|$)/i;

/** Percent-encoded UTF-8 without control characters. */
function isReadable(part: string): boolean {
  try {
    return !/\p{Cc}/u.test(decodeURIComponent(part));
  } catch {
    return false;
  }
}
