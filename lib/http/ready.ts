import { databaseReady } from '@/db/ready';

/** Whether the hub can take requests: its database answers, is migrated, and keeps what it acknowledges. */
export function isReady(): Promise<boolean> {
  return databaseReady().catch(() => false);
}
