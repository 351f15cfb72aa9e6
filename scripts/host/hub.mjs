import { isIP } from 'node:net';
import { setTimeout as pause } from 'node:timers/promises';
import { launch } from './children.mjs';
import { Failure } from './failure.mjs';
import { get } from './get.mjs';
import { lastLines, openLog } from './logs.mjs';
import { chooseWebPort } from './ports.mjs';

const readyWithinSeconds = 60;

/** Where the web process listens and how it is reached. */
export async function chooseAddress() {
  // Some shells and tools set HOST to the machine's name: only an address is taken as meant for us.
  const host = isIP(process.env.HOST ?? '') ? process.env.HOST : '127.0.0.1';
  const port = await chooseWebPort(host);
  const near =
    host === '0.0.0.0' ? '127.0.0.1' : host === '::' ? '[::1]' : isIP(host) === 6 ? `[${host}]` : host;
  const localUrl = `http://${near}:${port}`;
  return { host, port, localUrl, publicUrl: process.env.HUBTACK_PUBLIC_URL || localUrl };
}

/** What web, worker and the demo's maker are told; nothing of the database's owner. */
export function hubEnvironment({ appUrl, secret, address, mode }) {
  const { DATABASE_APP_URL, DATABASE_OWNER_URL, ...rest } = process.env;
  return {
    ...rest,
    DATABASE_URL: appUrl,
    HUBTACK_SECRET: rest.HUBTACK_SECRET || secret,
    HUBTACK_PUBLIC_URL: address.publicUrl,
    HOST: address.host,
    PORT: String(address.port),
    NODE_ENV: mode,
    NEXT_TELEMETRY_DISABLED: '1',
  };
}

/** Starts web and worker, their words to their logs, or in development to the terminal. */
export function startHub(folder, env, { watch = [], toTerminal = false } = {}) {
  const start = (name, ...nodeOptions) =>
    launch(name, process.execPath, [...nodeOptions, '--import', 'tsx', `scripts/${name}.ts`], {
      kind: 'hub',
      env,
      log: toTerminal ? undefined : openLog(folder, name),
    });
  return [start('web'), start('worker', ...watch)];
}

/** Answers when the web process says that it is ready for work. */
export async function whenReady(address) {
  const deadline = performance.now() + readyWithinSeconds * 1000;
  while (performance.now() < deadline) {
    const answer = await get(`${address.localUrl}/api/health/ready`).catch(() => null);
    if (answer?.status === 200) return;
    await pause(40);
  }
  throw new Failure(`The web process did not become ready within ${readyWithinSeconds} seconds.`);
}

/** Fails as soon as one of the processes ends by itself. */
export function whenOneEnds(servers) {
  return Promise.race(
    servers.map(async ({ name, exited, log }) => {
      const { code, signal } = await exited;
      throw new Failure(`The ${name} process stopped unexpectedly (${signal ?? `exit code ${code}`}).`, {
        remedy: log ? `Everything else is stopped as well. Its log is ${log.path}` : '',
        tail: log && lastLines(log.written()),
      });
    }),
  );
}
