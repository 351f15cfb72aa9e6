import type { SetupRow } from './load';
import type { Words } from './words';

/** Device clocks show whole seconds and stray by about as much: a shot so little before a release was taken under it. */
export const CLOCK_SLACK_MS = 2000;

/** Releases and withdrawals of a setup in their order. */
export interface Turn {
  action: 'release' | 'withdraw';
  machine: string | null;
  layerName: string | null;
  effectiveAt: string;
  validUntil: string | null;
}

export type ForceFault = 'setup_not_in_force' | 'setup_superseded' | 'setup_failed_since';

/** What a setup that was not in force says of a check taken from it. */
export const FORCE_WORDS: Record<ForceFault, Words> = {
  setup_not_in_force: {
    code: 'setup_not_in_force',
    text: 'The setup was not in force then: not released, run out or withdrawn.',
    action: 'Have the setup released, then shoot again.',
  },
  setup_superseded: {
    code: 'setup_superseded',
    text: 'The setup was refitted since.',
    action: 'Name the refit, and shoot again.',
  },
  setup_failed_since: {
    code: 'setup_failed_since',
    text: 'The setup fails: its own fit or a later check shows that it is wrong.',
    action: 'Set up anew, then shoot again.',
  },
};

/**
 * Why a setup was not in force at an instant: released, unexpired and not withdrawn then, not superseded, and not
 * found wrong by a check since. Null where it was.
 */
export function forceFault(
  setup: Pick<SetupRow, 'state' | 'verdict'>,
  turns: readonly Turn[],
  at: string,
): ForceFault | null {
  const fault = voidedBy(setup);
  if (fault) return fault;
  const instant = new Date(at);
  const before = turns.filter(({ action, effectiveAt }) => {
    const slack = action === 'release' ? CLOCK_SLACK_MS : 0;
    return new Date(effectiveAt).getTime() <= instant.getTime() + slack;
  });
  // A second release, to another machine or for a shorter time, does not end the first.
  const standing = before.slice(before.map(({ action }) => action).lastIndexOf('withdraw') + 1);
  const inForce = standing.some(({ validUntil }) => validUntil !== null && instant < new Date(validUntil));
  return inForce ? null : 'setup_not_in_force';
}

/** Why all that was ever shot from a setup is void, in force then or not. Null where it stands. */
export function voidedBy({ state, verdict }: Pick<SetupRow, 'state' | 'verdict'>): ForceFault | null {
  if (state === 'superseded') return 'setup_superseded';
  return verdict === 'fail' ? 'setup_failed_since' : null;
}

/** Whether a setup guided a machine on a layer: then it does not check that machine's work independently. */
export function guided(turns: readonly Turn[], layer: string): boolean {
  return turns.some(
    ({ action, machine, layerName }) =>
      action === 'release' && machine !== null && (layerName === null || layerName === layer),
  );
}
