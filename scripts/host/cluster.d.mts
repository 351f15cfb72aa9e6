export interface ThrowawayCluster {
  host: string;
  port: number;
  ownerPassword: string;
  appPassword: string;
  /** The folder of psql, pg_dump and the other programs of this server's version. */
  binDirectory: string;
  superuserUrl(database: string): string;
  ownerUrl(database: string): string;
  appUrl(database: string): string;
  /** Ends the server as asked and waits; SIGKILL, the default, takes all its processes at once. */
  kill(signal?: NodeJS.Signals): Promise<void>;
  /** Starts it again (after a fast stop, where it still runs) on the same port and data. */
  restart(): Promise<void>;
  /** Ends the server and removes its data. */
  stop(): Promise<void>;
}

export function startThrowawayCluster(): Promise<ThrowawayCluster>;
