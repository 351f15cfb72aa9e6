import { randomInt } from 'node:crypto';
import { createServer } from 'node:net';
import { Failure } from './failure.mjs';

export function isFree(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen({ port, host, exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/** A free port below the range from which the system takes the near ends of outgoing connections. */
export async function choosePort() {
  for (let attempt = 0; attempt < 100; attempt += 1) {
    const port = randomInt(20_000, 32_000);
    if (await isFree(port)) return port;
  }
  throw new Failure('No free port was found between 20000 and 32000.');
}

/** PORT where it is set, or else 3000 or the first free port above it. */
export async function chooseWebPort(host) {
  const wish = process.env.PORT;
  if (wish) {
    if (!/^\d{1,5}$/.test(wish) || Number(wish) < 1 || Number(wish) > 65_535) {
      throw new Failure(`PORT is ${wish}, which is no port number.`, {
        remedy: 'Set it to 1 to 65535, or not at all.',
      });
    }
    if (await isFree(Number(wish), host)) return Number(wish);
    throw new Failure(`Port ${wish} is taken, or not allowed to this user.`, {
      remedy: 'Set PORT to another one, or leave it out to have a free one chosen.',
    });
  }
  for (let port = 3000; port < 3100; port += 1) {
    if (await isFree(port, host)) return port;
  }
  throw new Failure('No free port was found between 3000 and 3099.', {
    remedy: 'Set PORT to one that is free.',
  });
}
