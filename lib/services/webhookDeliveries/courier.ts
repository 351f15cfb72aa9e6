import { eq } from 'drizzle-orm';
import { directory } from '@/db/schema';
import { directoryTransaction } from '@/db/tenant';
import { log } from '@/lib/log/log';
import { loggable } from '@/lib/log/loggable';
import { type Post, post } from '@/lib/notify/post';
import { signedHeaders } from '@/lib/notify/signature';
import type { Runtime } from '@/lib/runtime';
import { oldestTransaction } from '@/lib/services/events/latest';
import { configuredReach } from '@/lib/services/webhookEndpoints/filters';
import { secretsAt } from '@/lib/services/webhookEndpoints/secret';
import { type Claimed, claim } from './claim';
import { fanOut } from './fanOut';
import { type Attempted, handBack, settle, sweepDeliveries } from './settle';

/** Messages under way at once, and of these to one endpoint. */
const PLACES = 16;
const PLACES_EACH = 4;

/** Between two looks whether anything was committed. */
const LOOK_MS = 500;
/** However quiet it is: retries come due, and others' deliveries are left by the dead. */
const LOOK_ANYWAY_MS = 2_000;
const SWEEP_MS = 3_600_000;

const USER_AGENT = 'Hubtack-Webhooks/1';

/**
 * Takes events to the endpoints that want them. Events are the outbox: nothing is added to what commits them. Whether
 * there is anything new is read off the database's oldest running transaction, one number for all organizations; only
 * when it has moved are endpoints looked at. Deliveries are their own queue (see `claim`): no transaction is open
 * while a receiver is waited for, and a slow one holds up no job of another kind.
 */
export class Courier {
  private readonly underWay = new Map<Promise<void>, string>();
  private readonly stopping = new AbortController();
  private seen = '';
  private lookedAt = 0;
  private sweptAt = 0;
  private turn = 0;
  private timer: NodeJS.Timeout | undefined;
  private looking: Promise<void> = Promise.resolve();
  /** Organizations whose turn failed when it last came. */
  private readonly troubled = new Set<string>();
  private away = false;

  constructor(
    private readonly runtime: Runtime,
    private readonly send: Post = post,
  ) {}

  /** Looks again and again until it is stopped. */
  start(): void {
    this.timer = setTimeout(() => {
      this.looking = this.look().finally(() => {
        if (!this.stopping.signal.aborted) this.start();
      });
    }, LOOK_MS);
  }

  /** Takes no further delivery, breaks off those under way and gives them back. */
  async stop(): Promise<void> {
    this.stopping.abort();
    clearTimeout(this.timer);
    await this.looking;
    await Promise.allSettled(this.underWay.keys());
  }

  private async look(): Promise<void> {
    try {
      const now = this.runtime.now().getTime();
      const tip = await oldestTransaction();
      if (tip === this.seen && now - this.lookedAt < LOOK_ANYWAY_MS) return;
      if (await this.round(tip !== this.seen)) this.seen = tip;
      this.lookedAt = now;
      if (now - this.sweptAt > SWEEP_MS) {
        this.sweptAt = now;
        await this.each(await organizationsWithEndpoints(), (organizationId) =>
          sweepDeliveries(organizationId, this.runtime),
        );
      }
      this.away = false;
    } catch (error) {
      // The database is away: what is due stays due. Said once, not twice a second.
      if (!this.away) log().warn({ task: 'webhooks', error: (error as Error).name }, 'webhooks wait');
      this.away = true;
    }
  }

  /**
   * Once through all organizations that have endpoints: what is new becomes deliveries, what is due is sent.
   *
   * @param anythingNew where nothing was committed, no event need be looked for
   * @returns whether every organization had its turn; what was new to one that had not is still to be looked for
   */
  async round(anythingNew = true): Promise<boolean> {
    const organizationIds = await organizationsWithEndpoints();
    // Another one is first each time.
    const first = this.turn++ % Math.max(organizationIds.length, 1);
    const inTurn = [...organizationIds.slice(first), ...organizationIds.slice(0, first)];
    return this.each(inTurn, async (organizationId) => {
      while (anythingNew && (await fanOut(organizationId, this.runtime)));
      await this.takeDue(organizationId);
    });
  }

  /** Gives every organization its turn, and answers whether all went well: the trouble of one is not the others'. */
  private async each(
    organizationIds: readonly string[],
    turn: (organizationId: string) => Promise<void>,
  ): Promise<boolean> {
    let well = true;
    for (const organizationId of organizationIds) {
      if (this.stopping.signal.aborted) return false;
      try {
        await turn(organizationId);
        this.troubled.delete(organizationId);
      } catch (error) {
        well = false;
        // Said once, not at every look.
        if (!this.troubled.has(organizationId))
          log().warn({ task: 'webhooks', organizationId, ...loggable(error) }, 'webhooks of one wait');
        this.troubled.add(organizationId);
      }
    }
    return well;
  }

  /** Waits until nothing is under way. */
  async idle(): Promise<void> {
    while (this.underWay.size > 0) await Promise.allSettled(this.underWay.keys());
  }

  private async takeDue(organizationId: string): Promise<void> {
    if (this.stopping.signal.aborted) return;
    const places = PLACES - this.underWay.size;
    if (places <= 0) return;
    const busy = new Map<string, number>();
    for (const endpointId of this.underWay.values()) busy.set(endpointId, (busy.get(endpointId) ?? 0) + 1);
    const claimed = await claim(organizationId, this.runtime, { places, eachEndpoint: PLACES_EACH, busy });
    for (const one of claimed) this.carry(one);
  }

  /** One message on its way; when it is there, or not, the endpoint's next ones are looked for. */
  private carry(claimed: Claimed): void {
    const carrying = this.attempt(claimed)
      .catch((error: unknown) => {
        // Not settled: its lease runs out and it comes up again.
        log().warn({ task: 'webhooks', error: (error as Error).name }, 'delivery not settled');
      })
      .finally(async () => {
        this.underWay.delete(carrying);
        await this.takeDue(claimed.delivery.organizationId).catch(() => undefined);
      });
    this.underWay.set(carrying, claimed.endpoint.id);
  }

  private async attempt(claimed: Claimed): Promise<void> {
    const { delivery, endpoint, body } = claimed;
    const startedAt = this.runtime.now();
    const id = delivery.eventId ?? delivery.id;
    const plain = { 'content-type': 'application/json', 'user-agent': USER_AGENT };
    let secrets: string[];
    try {
      secrets = secretsAt(endpoint, startedAt);
    } catch {
      const posted = { milliseconds: 0, address: null, answer: null, failure: 'key_changed' };
      return settle(claimed, { startedAt, headers: plain, posted }, this.runtime);
    }
    const headers = { ...plain, ...signedHeaders({ id, at: startedAt, body }, secrets) };
    const options = { reach: configuredReach(), signal: this.stopping.signal };
    const posted: Attempted['posted'] = await this.send(endpoint.url, headers, body, options);
    if (posted.failure === 'interrupted') return handBack(claimed, this.runtime);
    await settle(claimed, { startedAt, headers, posted }, this.runtime);
    const { answer, failure, milliseconds } = posted;
    log().info(
      {
        task: 'webhooks',
        endpoint: endpoint.id,
        type: delivery.eventType,
        attempt: delivery.attempts,
        status: answer?.status,
        failure,
        milliseconds,
      },
      'message sent',
    );
  }
}

function organizationsWithEndpoints(): Promise<string[]> {
  return directoryTransaction(async ({ db }) => {
    const rows = await db
      .selectDistinct({ id: directory.organizationId })
      .from(directory)
      .where(eq(directory.kind, 'webhook'))
      .orderBy(directory.organizationId);
    return rows.map(({ id }) => id);
  });
}
