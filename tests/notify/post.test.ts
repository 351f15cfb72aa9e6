import { createServer, type IncomingMessage, type RequestListener, type Server } from 'node:http';
import { type AddressInfo, createServer as createTcpServer, type Server as TcpServer } from 'node:net';
import { afterEach, describe, expect, it } from 'vitest';
import { reach } from '@/lib/notify/addresses';
import { type PostOptions, post, type Resolve } from '@/lib/notify/post';

const here = reach({ http: true, networks: ['127.0.0.0/8'] });
const servers: (Server | TcpServer)[] = [];
afterEach(() => {
  for (const server of servers.splice(0)) {
    if ('closeAllConnections' in server) server.closeAllConnections();
    server.close();
  }
});

async function listen(server: Server | TcpServer, host = '127.0.0.1'): Promise<number> {
  servers.push(server);
  await new Promise<void>((resolve) => server.listen(0, host, resolve));
  return (server.address() as AddressInfo).port;
}
const serve = (listener: RequestListener, host?: string) => listen(createServer(listener), host);

const send = (url: string, options: Partial<PostOptions> = {}) =>
  post(url, { 'content-type': 'application/json' }, '{"a":1}', {
    reach: here,
    signal: new AbortController().signal,
    ...options,
  });

async function bodyOf(request: IncomingMessage): Promise<string> {
  let text = '';
  for await (const part of request) text += part;
  return text;
}

const leadingTo =
  (...addresses: string[]): Resolve =>
  async () =>
    addresses.map((address) => ({ address, family: address.includes(':') ? 6 : 4 }));

describe('a post', () => {
  it('sends the body and keeps the answer', async () => {
    const got: unknown[] = [];
    const port = await serve(async (request, response) => {
      got.push([request.method, request.url, request.headers.host, await bodyOf(request)]);
      response.writeHead(202, { 'Content-Type': 'text/plain', 'Set-Cookie': 'a=b' }).end('thanks');
    });
    const posted = await send(`http://127.0.0.1:${port}/in?site=7`);
    expect(got).toEqual([['POST', '/in?site=7', `127.0.0.1:${port}`, '{"a":1}']]);
    expect(posted).toMatchObject({ address: '127.0.0.1', failure: null });
    expect(posted.answer).toMatchObject({ status: 202, body: 'thanks', truncated: false });
    expect(posted.answer?.headers).toMatchObject({ 'content-type': 'text/plain' });
    expect(posted.answer?.headers).not.toHaveProperty('set-cookie');
  });

  it('keeps 4,096 bytes of an answer, and reads no endless one to its end', async () => {
    let written = 0;
    const port = await serve((_, response) => {
      response.writeHead(200);
      const more = () => {
        if (response.destroyed) return;
        written += 4096;
        response.write('x'.repeat(4096), () => setImmediate(more));
      };
      more();
    });
    const { answer } = await send(`http://127.0.0.1:${port}/`);
    expect(answer).toMatchObject({ status: 200, truncated: true });
    expect(answer?.body).toHaveLength(4096);
    expect(written).toBeLessThan(16 * 1024 * 1024);
  });

  it('takes the answer’s head for the answer where its body breaks off, and keeps no NUL', async () => {
    const port = await serve((_, response) => {
      response.writeHead(200, { 'Content-Length': '100' });
      response.write('half\0', () => response.destroy());
    });
    const { answer, failure } = await send(`http://127.0.0.1:${port}/`);
    expect([answer?.status, answer?.body, answer?.truncated, failure]).toEqual([
      200,
      'half\uFFFD',
      true,
      null,
    ]);
  });

  it('follows no redirect', async () => {
    let followed = 0;
    const inner = await serve((_, response) => {
      followed++;
      response.end();
    });
    for (const status of [301, 302, 303, 307, 308]) {
      const port = await serve((_, response) => {
        response.writeHead(status, { Location: `http://127.0.0.1:${inner}/` }).end();
      });
      const { answer } = await send(`http://127.0.0.1:${port}/`);
      expect(answer).toMatchObject({ status, headers: { location: `http://127.0.0.1:${inner}/` } });
    }
    expect(followed).toBe(0);
  });

  it('gives up a receiver that does not answer in time, from name to head', async () => {
    const silent = await serve(() => undefined);
    const timeoutMs = 150;
    expect((await send(`http://127.0.0.1:${silent}/`, { timeoutMs })).failure).toBe('timed_out');
    const never: Resolve = () => new Promise(() => undefined);
    expect((await send('http://slow.example/', { timeoutMs, resolve: never })).failure).toBe('timed_out');
  });

  it('takes 101 for an answer like others, and speaks nothing else', async () => {
    let ended = false;
    const port = await listen(
      createTcpServer((socket) => {
        socket
          .on('error', () => undefined)
          .on('close', () => {
            ended = true;
          });
        socket.once('data', () => {
          socket.write(
            'HTTP/1.1 101 Switching Protocols\r\nConnection: Upgrade\r\nUpgrade: x\r\nServer: s\r\n\r\n',
          );
        });
      }),
    );
    const { answer, failure } = await send(`http://127.0.0.1:${port}/`);
    expect([answer?.status, answer?.headers, answer?.body, failure]).toEqual([
      101,
      { server: 's' },
      '',
      null,
    ]);
    while (!ended) await new Promise((resolve) => setTimeout(resolve, 5));
  });

  it('keeps the head of an answer whose body does not end in time', async () => {
    const port = await serve((_, response) => {
      response.writeHead(200).write('half');
    });
    const { answer, failure } = await send(`http://127.0.0.1:${port}/`, { timeoutMs: 150 });
    expect([answer?.status, answer?.body, answer?.truncated, failure]).toEqual([200, 'half', true, null]);
  });

  it('is broken off from outside', async () => {
    const silent = await serve(() => undefined);
    const stop = new AbortController();
    const posting = send(`http://127.0.0.1:${silent}/`, { signal: stop.signal });
    setTimeout(() => stop.abort(), 50);
    expect((await posting).failure).toBe('interrupted');
    const unnamed = new AbortController();
    const never: Resolve = () => new Promise(() => undefined);
    const waiting = send('http://slow.example/', { signal: unnamed.signal, resolve: never });
    unnamed.abort();
    expect((await waiting).failure).toBe('interrupted');
  });

  it('says what stood between', async () => {
    const closed = await serve(() => undefined);
    await new Promise((resolve) => servers.splice(0)[0].close(resolve));
    expect((await send(`http://127.0.0.1:${closed}/`)).failure).toBe('connection_failed');
    const noise = await listen(createTcpServer((socket) => socket.end('SSH-2.0-none\r\n')));
    expect((await send(`http://127.0.0.1:${noise}/`)).failure).toBe('answer_unreadable');
    const unknown: Resolve = async () => Promise.reject(new Error('ENOTFOUND'));
    expect((await send('http://nowhere.example/', { resolve: unknown })).failure).toBe('name_unknown');
    expect((await send('http://nowhere.example/', { resolve: leadingTo() })).failure).toBe('name_unknown');
    const plain = await serve((_, response) => response.end());
    expect((await send(`https://127.0.0.1:${plain}/`)).failure).toMatch(
      /certificate_refused|connection_failed/,
    );
  });
});

describe('what a name leads to', () => {
  const strict = reach({ http: true, networks: [] });

  it.each([
    ['127.0.0.1'],
    ['10.1.2.3'],
    ['169.254.169.254'],
    ['::1'],
    ['::ffff:127.0.0.1'],
    ['fe80::1'],
    ['8.8.8.8', '127.0.0.1'],
    ['2606:4700:4700::1111', 'fd00::1'],
  ])('is refused before anything is sent: %s', async (...addresses) => {
    let reached = 0;
    const port = await serve((_, response) => {
      reached++;
      response.end();
    });
    const posted = await send(`http://trap.example:${port}/`, {
      reach: strict,
      resolve: leadingTo(...addresses),
    });
    expect(posted).toMatchObject({ failure: 'address_refused', answer: null, address: null });
    expect(reached).toBe(0);
  });

  it('is refused where it is written as an address of any form', async () => {
    for (const url of ['http://127.0.0.1/', 'http://2130706433/', 'http://0x7f.1/', 'http://[::1]/'])
      expect((await send(url, { reach: strict })).failure).toBe('target_refused');
  });

  it('is asked for once, and the connection goes to what was checked, though the name moves on', async () => {
    const got: string[] = [];
    const good = await serve((request, response) => {
      got.push(`good ${request.headers.host}`);
      response.end();
    }, '127.0.0.1');
    // The same port on another address of this machine: where the name leads the second time.
    const bad = createServer((_, response) => {
      got.push('bad');
      response.end();
    });
    servers.push(bad);
    await new Promise<void>((resolve) => bad.listen(good, '127.0.0.2', resolve));
    const only = reach({ http: true, networks: ['127.0.0.1/32'] });
    let asked = 0;
    const rebinding: Resolve = async () => [
      { address: asked++ === 0 ? '127.0.0.1' : '127.0.0.2', family: 4 },
    ];
    const posted = await send(`http://moves.example:${good}/`, { reach: only, resolve: rebinding });
    expect(posted).toMatchObject({ address: '127.0.0.1', answer: { status: 200 } });
    expect(got).toEqual([`good moves.example:${good}`]);
    expect(asked).toBe(1);
    const again = await send(`http://moves.example:${good}/`, { reach: only, resolve: rebinding });
    expect(again.failure).toBe('address_refused');
    expect(got).toHaveLength(1);
  });
});
