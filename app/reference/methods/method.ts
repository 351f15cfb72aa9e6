import type { ReactNode } from 'react';

/** One method of computation, as its page tells it. */
export interface Method {
  /** In the address of its page; never changed. */
  slug: string;
  title: string;
  /** What it does, in a sentence or two. */
  lead: string;
  group: 'Readings' | 'Setups' | 'Levels and control' | 'Ground and blades';
  /** `provenance.method` and version of the results that it makes, where they carry them. */
  carried?: { method: string; version: string };
  /** Words and formulas. */
  body: ReactNode;
  /** Figures that it uses; from the code, not copied. */
  figures?: ReactNode;
  assumes: readonly ReactNode[];
  limits: readonly ReactNode[];
  units: ReactNode;
  sources: readonly ReactNode[];
}
