import { type Logger, pino } from 'pino';
import { getConfig } from '@/lib/config';

const holder = globalThis as typeof globalThis & { hubtackLog?: Logger };

/** One line a request, never bodies, headers or query values. */
export function log(): Logger {
  holder.hubtackLog ??= pino({
    level: getConfig().logLevel,
    base: null,
    timestamp: pino.stdTimeFunctions.isoTime,
    formatters: { level: (level) => ({ level }) },
  });
  return holder.hubtackLog;
}
