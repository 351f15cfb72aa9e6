import type { Ellipse } from '@/lib/compute/adjustment/ellipse';
import type { GlobalTest } from '@/lib/compute/adjustment/globalTest';
import type { BacksightCheck } from '@/lib/compute/survey/backsights';
import type { CheckDifference } from '@/lib/compute/survey/checkShots';
import type { DangerCircle } from '@/lib/compute/survey/dangerCircle';
import type { DirectionSets } from '@/lib/compute/survey/directionSets';
import type { Drift } from '@/lib/compute/survey/drift';
import type { Explanation } from '@/lib/compute/survey/explain';
import type { FaceErrors } from '@/lib/compute/survey/faces';
import type { SightGeometry } from '@/lib/compute/survey/geometry';
import type { Identification, Stray } from '@/lib/compute/survey/identify';
import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { MarkShift } from '@/lib/compute/survey/leaveOneOut';
import type { OtherStation } from '@/lib/compute/survey/otherStations';
import type {
  FittedMark,
  FittedOccupation,
  FittedReading,
  StationFit,
} from '@/lib/compute/survey/stationFit';
import type { Surroundings } from '@/lib/compute/survey/surroundings';
import type { SetupLimits, SetupReason, SetupVerdict } from '@/lib/compute/survey/verdict';
import type { WorkAccuracy } from '@/lib/compute/survey/workAccuracy';

/** Name and version of the computation; a change of figures raises the version. */
export const METHOD = 'free station, least squares';
export const METHOD_IDENTIFIED = 'targets by rigid geometry, free station, least squares';
export const METHOD_OVER_MARK = 'station over a mark by backsights, least squares';
export const METHOD_VERSION = '1.2.0';

/** How a result came about, in words. */
export function methodOf({
  occupied,
  identification,
}: Pick<SetupResult, 'occupied' | 'identification'>): string {
  if (identification) return METHOD_IDENTIFIED;
  return occupied ? METHOD_OVER_MARK : METHOD;
}

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
  | { code: 'distance_unused'; targets: string[] }
  | { code: 'directions_scatter'; value: number; limit: number }
  | { code: 'height_undetermined' }
  | { code: 'check_not_telling'; target: string }
  | { code: 'stray_shots'; shots: string[]; nearest: Stray['nearest'] }
  | { code: 'same_place'; target: string; others: string[] };

/** A mark of the fit as it is kept: undefined statistics are null, covariances plain lists. */
export interface KeptMark extends Omit<FittedMark, 'readings' | 'stationCovariance' | 'without'> {
  without: KeptShift | null;
  readings: (Omit<FittedReading, 'standardised' | 'minimalDetectable'> & {
    standardised: number | null;
    minimalDetectable: number | null;
  })[];
  stationCovariance: number[];
}

/** Version 1.1 kept the length of a shift alone. */
type KeptShift = Pick<MarkShift, 'horizontal' | 'vertical'> & {
  [Part in 'easting' | 'northing' | 'orientation']: number | null;
};

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
  orientationDetermined: boolean;
  occupied: FittedOccupation | null;
  backsights: BacksightCheck[];
  danger: DangerCircle | null;
  others: OtherStation[];
  /** Of unnamed targets; null where the shots named them. */
  identification: Identification | null;
  unusedDistances: string[];
  directionSets: DirectionSets | null;
  converged: boolean;
  iterations: number;
  test: GlobalTest;
  scale: number;
  ellipse95: Ellipse;
  work: WorkAccuracy;
  limits: SetupLimits;
  geometry: SightGeometry;
  faceErrors: FaceErrors | null;
  /** Of the fit itself. */
  explanations: Explanation[];
  /** Of the check that was observed last, where it does not agree; empty where it does, not there in old results. */
  laterExplanations?: Explanation[];
  marks: KeptMark[];
  /** Marks that took no part because they are quarantined. */
  leftOut: Pick<FittedMark, 'name' | 'version' | 'published' | 'shots'>[];
  /** What the computation was given beside the shots. */
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Atmospheric correction wanted; null where the atmosphere is unknown. */
  ppm: number | null;
  /** What the correction was made of; null where the atmosphere is unknown. */
  air: Air | null;
}

/** The air that was measured, and what the distance meter takes for granted of it; SI units. */
export interface Air {
  temperature: number;
  pressure: number;
  humidity: number;
  humiditySource: 'stated' | 'wetBulb' | 'default';
  carrierWavelength: number;
  /** (n−1)·10⁶ that the distance meter is set up for. */
  referenceRefractivity: number;
}

export interface CheckResult {
  targets: CheckDifference[];
  /** Not there in old results; null where no mark of the fit was shot again. */
  drift?: Drift | null;
  tolerance: { horizontal: number; vertical: number };
  /** The setup's verdict with this check. */
  verdict: SetupVerdict['verdict'];
}

/**
 * What would explain what does not fit: the faults of the fit, or, where its own shots agree, those of the last check.
 */
export function explanationsOf({ explanations, laterExplanations = [] }: SetupResult): Explanation[] {
  const [first] = explanations;
  const fits = first?.fault === 'none' && first.weight === 1;
  return fits && laterExplanations.length > 0 ? laterExplanations : explanations;
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

/** What results of version 1.1 did not tell yet. */
const UNTOLD = {
  orientationDetermined: true,
  occupied: null,
  backsights: [],
  danger: null,
  others: [],
  identification: null,
  unusedDistances: [],
  directionSets: null,
  air: null,
} satisfies Partial<SetupResult>;

/** A result as it was kept, in today's form, whichever version computed it. */
export function readResult(kept: unknown): SetupResult {
  const result = { ...UNTOLD, ...(kept as SetupResult) };
  const { faceErrors: faces } = result;
  const noPairs = {
    twoCollimationSigma: null,
    verticalIndexSigma: null,
    twoCollimationSpread: null,
    verticalIndexSpread: null,
    collimationPairs: 0,
    indexPairs: 0,
  };
  return {
    ...result,
    faceErrors: faces && { ...noPairs, ...faces },
    marks: result.marks.map((mark) => ({
      ...mark,
      miss: mark.miss ?? { across: null, along: null, up: null },
      without: mark.without && withParts(mark.without),
    })),
  };
}

function withParts(shift: KeptShift): KeptShift {
  const { easting = null, northing = null, orientation = null } = shift;
  return { ...shift, easting, northing, orientation };
}

/** A kept result in the form that the engine judges again when a check comes in. */
export function fitOf(result: SetupResult): StationFit {
  return {
    ...result,
    marks: result.marks.map((mark) => ({
      ...mark,
      // A free station is judged by the lengths alone, and version 1.1 knew no other.
      without: mark.without as MarkShift | null,
      stationCovariance: Float64Array.from(mark.stationCovariance),
      readings: mark.readings.map((reading) => ({
        ...reading,
        standardised: reading.standardised ?? Number.NaN,
        minimalDetectable: reading.minimalDetectable ?? Number.POSITIVE_INFINITY,
      })),
    })),
  };
}
