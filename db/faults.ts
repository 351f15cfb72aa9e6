/** What a failed statement means for a request; the driver's own words never leave the hub. */
export interface DatabaseFault {
  kind: 'unavailable' | 'unique' | 'other';
  sqlstate: string | null;
  constraint: string | null;
}

/** Connection trouble, shutdown, time-outs, deadlocks: repeating later is safe and may help. */
const UNAVAILABLE = /^(08|53|57P|40|55P03|57014|25P03)/;
const NETWORK = new Set([
  ...['ECONNREFUSED', 'ECONNRESET', 'ECONNABORTED', 'EPIPE', 'ETIMEDOUT', 'ENOENT'],
  ...['ENOTFOUND', 'EAI_AGAIN', 'EHOSTUNREACH', 'ENETUNREACH'],
]);
/** No class of SQLSTATE begins with E, as the system's own codes do. */
const SQLSTATE = /^(?!E)[0-9A-Z]{5}$/;
const DRIVER_TROUBLE =
  /timeout exceeded when trying to connect|Connection terminated|not queryable|Client was closed|after calling end/;

/** Reads SQLSTATE and constraint from an error or its cause; null where it is not the database's. */
export function databaseFault(error: unknown): DatabaseFault | null {
  for (let e = error, depth = 0; e instanceof Error && depth < 5; e = e.cause, depth++) {
    const { code, constraint } = e as Error & { code?: unknown; constraint?: unknown };
    if (typeof code === 'string' && SQLSTATE.test(code)) {
      const kind = code === '23505' ? 'unique' : UNAVAILABLE.test(code) ? 'unavailable' : 'other';
      return { kind, sqlstate: code, constraint: typeof constraint === 'string' ? constraint : null };
    }
    if ((typeof code === 'string' && NETWORK.has(code)) || DRIVER_TROUBLE.test(e.message)) {
      return { kind: 'unavailable', sqlstate: null, constraint: null };
    }
  }
  return null;
}
