import { type Logger, pino } from 'pino';
import { getConfig } from '@/lib/config';

const holder = globalThis as typeof globalThis & { hubtackLog?: Logger };

/** One line a request, never bodies, headers or query values. */
export function log(): Logger {
  holder.hubtackLog ??= pino(
    {
      level: getConfig().logLevel,
      base: null,
      timestamp: pino.stdTimeFunctions.isoTime,
      formatters: { level: (level) => ({ level }) },
    },
    // Lines are gathered and written a few times a second; pino writes the rest when the process ends.
    pino.destination({ sync: false, minLength: 4096, periodicFlush: 250 }),
  );
  return holder.hubtackLog;
}
