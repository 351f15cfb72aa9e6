import { isWithin } from '@/lib/compute/grade/acceptance';
import type { GradeTolerance } from '@/lib/compute/grade/conformance';
import type { PlanPlace } from '@/lib/compute/grade/whereabouts';

/** A check that counts for its lot; metres. */
export interface LotCheck extends PlanPlace {
  name: string;
  deviation: number;
  verdict: 'pass' | 'hold' | 'fail';
}

/** The checks outside the tolerance, by their index in the lot. */
export interface Outside {
  high: number[];
  low: number[];
  /** The one that is furthest beyond its limit. */
  worst: LotCheck | null;
}

export function outsideOf(checks: readonly LotCheck[], tolerance: GradeTolerance): Outside {
  const outside: Outside = { high: [], low: [], worst: null };
  let most = 0;
  checks.forEach((check, index) => {
    const { deviation } = check;
    if (isWithin(deviation, tolerance)) return;
    outside[deviation > 0 ? 'high' : 'low'].push(index);
    const beyond = Math.max(deviation - tolerance.above, -tolerance.below - deviation);
    if (beyond <= most) return;
    most = beyond;
    outside.worst = check;
  });
  return outside;
}
