import type { Ellipse } from '@/lib/compute/adjustment/ellipse';
import type { GlobalTest } from '@/lib/compute/adjustment/globalTest';
import type { CheckDifference } from '@/lib/compute/survey/checkShots';
import type { Explanation } from '@/lib/compute/survey/explain';
import type { FaceErrors } from '@/lib/compute/survey/faces';
import type { SightGeometry } from '@/lib/compute/survey/geometry';
import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { FittedMark, FittedReading, StationFit } from '@/lib/compute/survey/stationFit';
import type { Surroundings } from '@/lib/compute/survey/surroundings';
import type { SetupLimits, SetupReason, SetupVerdict } from '@/lib/compute/survey/verdict';
import type { WorkAccuracy } from '@/lib/compute/survey/workAccuracy';

/** Name and version of the computation; a change of figures raises the version. */
export const METHOD = 'free station, least squares';
export const METHOD_VERSION = '1.1.0';

/** What is worth knowing of a setup, though no verdict hangs on it. */
export type SetupNote =
  | { code: 'atmosphere_unknown'; ppm: number }
  | { code: 'accuracy_default' }
  | { code: 'control_sigma_default'; targets: string[]; horizontal: number; vertical: number }
  | { code: 'mark_suspect'; target: string }
  | { code: 'mark_quarantined'; target: string }
  | { code: 'spread_small'; value: number }
  | { code: 'spread_scaled'; value: number }
  | { code: 'outside_control' }
  | { code: 'compensator_off'; shots: number }
  | { code: 'height_undetermined' }
  | { code: 'check_not_telling'; target: string };

/** A mark of the fit as it is kept: undefined statistics are null, covariances plain lists. */
export interface KeptMark extends Omit<FittedMark, 'readings' | 'stationCovariance'> {
  readings: (Omit<FittedReading, 'standardised' | 'minimalDetectable'> & {
    standardised: number | null;
    minimalDetectable: number | null;
  })[];
  stationCovariance: number[];
}

/** A result of a setup as it is kept, in SI units: everything that later shots from it need. */
export interface SetupResult extends SetupVerdict {
  reasons: SetupReason[];
  notes: SetupNote[];
  station: {
    easting: number;
    northing: number;
    axis: number;
    orientation: number;
    refraction: number;
    covariance: number[];
  };
  heightDetermined: boolean;
  converged: boolean;
  iterations: number;
  test: GlobalTest;
  scale: number;
  ellipse95: Ellipse;
  work: WorkAccuracy;
  limits: SetupLimits;
  geometry: SightGeometry;
  faceErrors: FaceErrors | null;
  explanations: Explanation[];
  marks: KeptMark[];
  /** Marks that took no part because they are quarantined. */
  leftOut: Pick<FittedMark, 'name' | 'version' | 'published' | 'shots'>[];
  /** What the computation was given beside the shots. */
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Atmospheric correction wanted; null where the atmosphere is unknown. */
  ppm: number | null;
}

export interface CheckResult {
  targets: CheckDifference[];
  tolerance: { horizontal: number; vertical: number };
  /** The setup's verdict with this check. */
  verdict: SetupVerdict['verdict'];
}

export function keepMark(mark: FittedMark): KeptMark {
  return {
    ...mark,
    stationCovariance: [...mark.stationCovariance],
    readings: mark.readings.map((reading) => ({
      ...reading,
      standardised: Number.isFinite(reading.standardised) ? reading.standardised : null,
      minimalDetectable: Number.isFinite(reading.minimalDetectable) ? reading.minimalDetectable : null,
    })),
  };
}

/** A kept result in the form that the engine judges again when a check comes in. */
export function fitOf(result: SetupResult): StationFit {
  const { station, heightDetermined, converged, iterations, test, scale, ellipse95, geometry } = result;
  const { faceErrors, explanations } = result;
  return {
    station,
    heightDetermined,
    converged,
    iterations,
    test,
    scale,
    ellipse95,
    geometry,
    faceErrors,
    explanations,
    marks: result.marks.map((mark) => ({
      ...mark,
      stationCovariance: Float64Array.from(mark.stationCovariance),
      readings: mark.readings.map((reading) => ({
        ...reading,
        standardised: reading.standardised ?? Number.NaN,
        minimalDetectable: reading.minimalDetectable ?? Number.POSITIVE_INFINITY,
      })),
    })),
  };
}
