import { type Caller, callerId } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import { latestPlaces } from '@/lib/services/events/latest';

/** Between two looks whether anything was committed; one for all streams of the process. */
const LOOK_MS = 500;
/** A client that takes nothing for so long is let go. */
const STALLED_MS = 60_000;
const MAX_EACH = 5;
const MAX_STREAMS = 200;

/** What a stream lets others do with it. */
export interface Stream {
  caller: Caller;
  /** Something has happened in its organization. */
  wake(): void;
  /** Since when it has waited for its client to take what is there; null where it does not. */
  waiting: (() => number) | null;
  end(): void;
  /** The same for a client that takes nothing: what is there for it is lost, and read again when it comes back. */
  drop(): void;
}

/** What is known of an organization that has streams: how often something new was seen, and the last of it. */
interface Followed {
  version: number;
  place: string;
}

/**
 * The streams of this process. One poller looks for all of them, by the database's oldest running transaction; where
 * it has moved, each organization that has streams is asked for its last event, and those with a new one wake theirs.
 * While nothing happens no stream holds a connection.
 */
export class Streams {
  private readonly streams = new Set<Stream>();
  private readonly followed = new Map<string, Followed>();
  private seen = '';
  private timer: NodeJS.Timeout | undefined;
  private ending = false;

  /** @throws Problem where the caller or the process has as many as they may */
  add(stream: Stream): void {
    if (this.ending || this.streams.size >= MAX_STREAMS)
      throw new Problem('unavailable', undefined, { retryAfter: 5 });
    const id = callerId(stream.caller);
    const own = [...this.streams].filter(({ caller }) => callerId(caller) === id).length;
    if (own >= MAX_EACH) throw new Problem('too_many_streams', undefined, { retryAfter: 5 });
    this.streams.add(stream);
    this.timer ??= setTimeout(() => void this.look(), LOOK_MS);
  }

  remove(stream: Stream): void {
    this.streams.delete(stream);
  }

  /** Grows whenever something new was seen in an organization. */
  versionOf(organizationId: string): number {
    return this.followed.get(organizationId)?.version ?? 0;
  }

  /** Ends all of them, and lets no other begin. */
  endAll(): void {
    this.ending = true;
    clearTimeout(this.timer);
    for (const stream of this.streams) stream.end();
  }

  private async look(): Promise<void> {
    for (const stream of this.streams) if ((stream.waiting?.() ?? 0) > STALLED_MS) stream.drop();
    const organizationIds = [...new Set([...this.streams].map(({ caller }) => caller.organizationId))];
    try {
      const { tip, places } = await latestPlaces(organizationIds, this.seen);
      for (const [organizationId, place] of places) this.note(organizationId, place);
      this.seen = tip;
    } catch {
      // The database is away. The streams notice by themselves.
    }
    // Organizations whose last stream has gone are forgotten.
    for (const id of this.followed.keys()) if (!organizationIds.includes(id)) this.followed.delete(id);
    const more = this.streams.size > 0 && !this.ending;
    this.timer = more ? setTimeout(() => void this.look(), LOOK_MS) : undefined;
    if (!more) this.seen = '';
  }

  private note(organizationId: string, place: string): void {
    const known = this.followed.get(organizationId);
    if (known?.place === place) return;
    this.followed.set(organizationId, { version: (known?.version ?? 0) + 1, place });
    for (const stream of this.streams) if (stream.caller.organizationId === organizationId) stream.wake();
  }
}

const holder = globalThis as typeof globalThis & { hubtackStreams?: Streams };

/** Kept on the global object: the server and the framework's bundle have this module once each. */
export function streams(): Streams {
  holder.hubtackStreams ??= new Streams();
  return holder.hubtackStreams;
}
