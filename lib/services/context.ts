import type { Tenant } from '@/db/tenant';
import type { Caller } from '@/lib/access/actor';
import type { Runtime } from '@/lib/runtime';

/** What a request brings to a verb: nobody is known yet. */
export interface PublicContext {
  runtime: Runtime;
  requestId: string;
  /** Address that the request came from. */
  address: string;
}

/** A request of somebody whose scope and projects were checked. */
export interface CallerContext extends PublicContext {
  caller: Caller;
  /** What the Idempotency-Key header said, with a fingerprint of the request. */
  idempotency: { key: string; fingerprint: Buffer } | null;
}

/** The same within the one transaction of a verb. */
export interface VerbContext extends CallerContext {
  tenant: Tenant;
}
