import type { LastPegTest } from '@/lib/services/levelRuns/compute';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Site, SiteInstrument } from './site';

/** What keeps an instrument from levelling. */
export function levelFault(
  instrument: SiteInstrument | undefined,
  name: string,
  pointer: string,
): ProblemItem | null {
  if (!instrument) {
    const detail = `There is no instrument ${name} in this project.`;
    return problemItem(pointer, 'instrument_unknown', detail);
  }
  if (instrument.kind !== 'level') {
    return problemItem(pointer, 'instrument_not_level', `${name} is registered as a ${instrument.kind}.`);
  }
  return null;
}

/** The last test of a level up to a moment, the newest of the upload itself included. */
export function lastPegTest(site: Site, instrumentId: string, observedAt: string): LastPegTest | null {
  const until = Date.parse(observedAt);
  let last: LastPegTest | null = null;
  for (const test of site.pegTests) {
    const at = Date.parse(test.observedAt);
    if (test.instrumentId === instrumentId && at <= until && (!last || at >= Date.parse(last.observedAt)))
      last = test;
  }
  return last;
}
