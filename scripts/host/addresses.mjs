import { appRole, ownerRole } from './roles.mjs';
import { superuser } from './server.mjs';

export const host = '127.0.0.1';

/** The ways into a cluster of ours. */
export function addressesOf({ port, superuserPassword, ownerPassword, appPassword }) {
  const url = (role, password, database) => `postgres://${role}:${password}@${host}:${port}/${database}`;
  return {
    host,
    port,
    superuserUrl: (database) => url(superuser, superuserPassword, database),
    ownerUrl: (database) => url(ownerRole, ownerPassword, database),
    appUrl: (database) => url(appRole, appPassword, database),
  };
}

/** A cluster of ours is addressed in full; what PG… variables say is meant for some other server. */
export function forgetOtherServers() {
  for (const name of Object.keys(process.env)) {
    if (name.startsWith('PG')) delete process.env[name];
  }
}
