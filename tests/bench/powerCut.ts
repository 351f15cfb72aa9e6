import { setTimeout as pause } from 'node:timers/promises';
import autocannon from 'autocannon';
import { oneSetup } from './documents';
import { Ledger, type Reckoning, reckon } from './ledger';
import { CONNECTIONS } from './load';
import { newSite } from './site';
import type { Stage } from './stage';

const BEFORE_MS = 2_000;
const DARK_MS = 700;
const AFTER_MS = 2_000;

/**
 * Kills every process of PostgreSQL in the middle of a load round, starts it again while the load goes on, and holds
 * what clients were told against what is there.
 */
export async function powerCut(
  stage: Stage,
): Promise<Reckoning & { readyAfterMs: number; unavailable: number }> {
  const { hub, key, cluster } = stage;
  const site = await newSite(hub.url, key, 'Power cut');
  const ledger = new Ledger();
  let unavailable = 0;
  const request: autocannon.Request = {
    method: 'POST',
    headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json' },
    setupRequest: (given) => {
      const id = `cut-${ledger.sent.size}`;
      ledger.send(id);
      return { ...given, body: oneSetup(id) };
    },
    onResponse: (status, body) => {
      ledger.answer(status, body);
      if (status === 503) unavailable++;
    },
  };
  const options = {
    url: `${site.url}/uploads`,
    connections: CONNECTIONS,
    duration: 3600,
    requests: [request],
  };
  let load: autocannon.Instance | undefined;
  const ended = new Promise((resolve) => {
    load = autocannon(options, resolve);
  });
  await pause(BEFORE_MS);
  await cluster.kill('SIGKILL');
  await pause(DARK_MS);
  await cluster.restart();
  const began = performance.now();
  while (!(await isReady(hub.url))) await pause(20);
  const readyAfterMs = performance.now() - began;
  await pause(AFTER_MS);
  load?.stop();
  await ended;
  // What was under way ends before the hub does.
  await hub.stop();
  return { ...(await reckon(ledger, site.projectId, stage.sql)), readyAfterMs, unavailable };
}

async function isReady(url: string): Promise<boolean> {
  return (await fetch(`${url}/api/health/ready`)).ok;
}
