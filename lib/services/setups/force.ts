import type { SetupRow } from './load';

/** Releases and withdrawals of a setup in their order. */
export interface Turn {
  action: 'release' | 'withdraw';
  machine: string | null;
  layerName: string | null;
  effectiveAt: string;
  validUntil: string | null;
}

export type ForceFault = 'setup_not_in_force' | 'setup_superseded' | 'setup_failed_since';

/**
 * Why a setup was not in force at an instant: released, unexpired and not withdrawn then, not superseded, and not
 * found wrong by a check since. Null where it was.
 */
export function forceFault(
  setup: Pick<SetupRow, 'state' | 'verdict'>,
  turns: readonly Turn[],
  at: string,
): ForceFault | null {
  if (setup.state === 'superseded') return 'setup_superseded';
  if (setup.verdict === 'fail') return 'setup_failed_since';
  const instant = new Date(at);
  const before = turns.filter((turn) => new Date(turn.effectiveAt) <= instant);
  const last = before.at(-1);
  const inForce =
    last?.action === 'release' && last.validUntil !== null && instant < new Date(last.validUntil);
  return inForce ? null : 'setup_not_in_force';
}

/** Whether a setup guided a machine on a layer: then it does not check that machine's work independently. */
export function guided(turns: readonly Turn[], layer: string): boolean {
  return turns.some(
    ({ action, machine, layerName }) =>
      action === 'release' && machine !== null && (layerName === null || layerName === layer),
  );
}
