import type { DistanceReading } from './distance';

export type Face = 'left' | 'right';
export type ShotPurpose = 'orient' | 'check' | 'closing';

/** One pointing as it was read, in SI units; what was not read is null. */
export interface Shot {
  id: string;
  /** Name of the control point. */
  target: string;
  purpose: ShotPurpose;
  face: Face;
  set: number;
  /** Horizontal circle, clockwise, rad. */
  direction: number | null;
  /** Zenith angle: face left 0–π, face right π–2π, rad. */
  zenith: number | null;
  distance: DistanceReading | null;
  /** Reflector above its mark, m. */
  targetHeight: number;
  /** Where this reflector is better or worse than the instrument's default, m. */
  targetCentringSigma: number | null;
  targetHeightSigma: number | null;
}

/** Published coordinates of a control point, m; `elevation` null where it has none. */
export interface ControlMark {
  name: string;
  version: number;
  easting: number;
  northing: number;
  elevation: number | null;
  horizontalSigma: number;
  verticalSigma: number;
  status: 'trusted' | 'suspect' | 'quarantined';
}
