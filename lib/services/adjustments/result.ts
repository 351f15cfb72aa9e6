import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import type { AdjustedPoint, AdjustedSetup, NetworkResult } from '@/lib/compute/survey/networkResult';
import type { Verdict } from '@/lib/compute/survey/verdict';
import type { SetupRow } from '@/lib/services/setups/load';
import type { AdjustmentNote, AdjustmentReason, PointChecks } from './judge';

/** Name and version of the computation; a change of figures raises the version. */
export const METHOD = 'network adjustment, least squares';
export const METHOD_VERSION = '1.0.0';

/** A control point as the adjustment found it. */
export interface UsedControl {
  name: string;
  version: number;
  status: 'trusted' | 'suspect' | 'quarantined';
}

/** A setup as the adjustment found it. */
export interface UsedSetup {
  id: string;
  clientId: string;
  station: string;
  resultVersion: number;
  state: SetupRow['state'];
  verdict: Verdict;
  atmosphereKnown: boolean;
}

/** States of setups that nobody relies on any more. */
export const TAKEN_BACK: ReadonlySet<SetupRow['state']> = new Set(['withdrawn', 'superseded']);

/** A level run as the adjustment found it; its differences carry its id before a stroke. */
export interface UsedRun {
  id: string;
  clientId: string;
}

/** Everything that an adjustment was given. */
export interface AdjustmentInput {
  network: NetworkInput;
  control: UsedControl[];
  setups: UsedSetup[];
  levelRuns: UsedRun[];
  /** Client ids of setups left out: more than one assignment of their targets fits. */
  ambiguous: string[];
  /** Points named for the datum that no observation reaches. */
  unseen: string[];
}

type Plain<T extends { covariance: Float64Array }> = Omit<T, 'covariance'> & { covariance: number[] };

/** A result as it is kept, in SI units; the observations are kept one by one. */
export interface KeptResult extends Omit<NetworkResult, 'observations' | 'points' | 'setups'> {
  points: Plain<AdjustedPoint>[];
  setups: Plain<AdjustedSetup>[];
  observations: number;
  verdict: Verdict;
  reasons: AdjustmentReason[];
  notes: AdjustmentNote[];
  checks: Record<string, PointChecks>;
}

export type KeptPoint = KeptResult['points'][number];

/** Covariances as plain lists: JSON would make objects of typed arrays. */
export function plain<T extends { covariance: Float64Array }>(of: T): Plain<T> {
  return { ...of, covariance: Array.from(of.covariance) };
}
