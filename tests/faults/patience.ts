import { vi } from 'vitest';

/** Here processes start, end and start again, all at the pace of a machine that may have other work. */
vi.setConfig({ testTimeout: 60_000, hookTimeout: 60_000 });
