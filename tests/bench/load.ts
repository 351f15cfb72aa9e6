import autocannon from 'autocannon';
import type { Site } from './site';

export const CONNECTIONS = 16;

interface Asked {
  url: string;
  method?: 'GET' | 'POST';
  headers?: Record<string, string>;
  /** The next request's body. */
  body?: () => Buffer;
}

/** So many requests over 16 connections, each sent when the one before is answered; answers a second. */
async function requestsPerSecond(amount: number, { url, method = 'GET', headers, body }: Asked) {
  const request: autocannon.Request = { method, headers };
  if (body) request.setupRequest = (given) => ({ ...given, body: body() });
  let last = 0;
  const began = performance.now();
  const { errors, non2xx } = await new Promise<autocannon.Result>((resolve, reject) => {
    const options = { url, amount, connections: CONNECTIONS, timeout: 30, requests: [request] };
    const run = autocannon(options, (error, result) => (error ? reject(error) : resolve(result)));
    // It looks once a second whether all is done: the last answer tells.
    run.on('response', () => {
      last = performance.now();
    });
  });
  if (errors + non2xx > 0)
    throw new Error(`${errors} requests broke off and ${non2xx} were refused at ${url}.`);
  return amount / ((last - began) / 1000);
}

export function live(hubUrl: string, amount: number) {
  return requestsPerSecond(amount, { url: `${hubUrl}/api/health/live` });
}

export function uploads(site: Site, amount: number, body: () => Buffer) {
  const headers = { Authorization: `Bearer ${site.key}`, 'Content-Type': 'application/json' };
  return requestsPerSecond(amount, { url: `${site.url}/uploads`, method: 'POST', headers, body });
}
