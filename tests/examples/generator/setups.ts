import { type Chance, chance } from './chance';
import { AIR, INSTRUMENT, TARGET_SIGMA_MM, truePlace } from './site';
import { dms, FOOT, observe, type Place, type Standing } from './totalStation';

/** The setups of the scenario: what was observed, as it would come from a data collector. */

const PRISM_MM = -30;
/** Reflector above the mark, ft: posts carry theirs on the mark itself. */
const POLE = 5;

export const UNITS = { length: 'ft', angle: 'dms', temperature: 'F', pressure: 'inHg' };

interface Station {
  station: string;
  clientId: string;
  /** Axis above the ground mark, ft; null where no mark is occupied. */
  instrumentHeight: number | null;
  axis: Place;
  orientation: number;
}

export const GOOD: Station = {
  station: 'ST-1',
  clientId: 'st-1',
  instrumentHeight: 5.28,
  axis: { easting: 5140.624, northing: 10021.357, elevation: 1241.318 },
  orientation: 37.2391,
};
const WRONG_PRISM: Station = {
  station: 'ST-2',
  clientId: 'st-2',
  instrumentHeight: null,
  axis: { easting: 5223.118, northing: 10146.902, elevation: 1243.071 },
  orientation: 211.6052,
};
export const BUMPED_TARGET: Station = {
  station: 'ST-3',
  clientId: 'st-3',
  instrumentHeight: null,
  axis: { easting: 5188.447, northing: 10098.265, elevation: 1243.526 },
  orientation: 118.9474,
};
/** Over the iron pin BM-1: the axis stands where the pin truly is, but for the centring. */
export const OVER_MARK: Station & { stationPoint: string } = {
  station: 'ST-4',
  clientId: 'st-4',
  stationPoint: 'BM-1',
  instrumentHeight: 5.02,
  axis: { ...truePlace('BM-1'), elevation: truePlace('BM-1').elevation + 5.02 },
  orientation: 301.4418,
};
/** Where no prism stands on the posts and only their plates are sighted. */
export const ANGLES_ONLY: Station = {
  station: 'ST-5',
  clientId: 'st-5',
  instrumentHeight: null,
  axis: { easting: 5172.806, northing: 10112.441, elevation: 1243.882 },
  orientation: 84.0273,
};
/** By an operator who named no target. */
export const UNNAMED: Station & { method: 'identify' } = {
  station: 'ST-6',
  clientId: 'st-6',
  method: 'identify',
  instrumentHeight: null,
  axis: { easting: 5149.317, northing: 10150.882, elevation: 1244.106 },
  orientation: 163.5809,
};
/** Another crew's reflector, on a tripod some way from HT-104. */
const OTHERS: Place = { easting: -21.4, northing: 16.85, elevation: 4.3 };
/** A truck has leant the post of HT-103 over: 0.20 ft in plan, and a little down. */
const BUMP: Place = { easting: 0.163, northing: -0.116, elevation: -0.02 };

function standing({ axis, orientation }: Station, seed: string): Standing {
  return { axis, orientation, instrument: INSTRUMENT, air: AIR, chance: chance(seed) };
}

interface Mark {
  target: string;
  purpose?: 'check';
  height: number;
  /** Off its published place beyond what the survey explains. */
  moved?: Place;
}

const post = (target: string): Mark => ({ target, height: 0 });

/** What the operator says of his reflectors, beside what is true of them. */
interface PrismState {
  declaredMm: number;
  appliedMm: number;
}
const RIGHT: PrismState = { declaredMm: PRISM_MM, appliedMm: PRISM_MM };
const FORGOTTEN: PrismState = { declaredMm: 0, appliedMm: 0 };

/** One set in both faces: face left in order, face right on the way back. */
function set(from: Standing, marks: readonly Mark[], prism: PrismState, name: string) {
  const centres = new Map(marks.map((mark) => [mark.target, centreOf(mark, from.chance)]));
  const rounds = [
    ...marks.map((mark) => ({ mark, face: 'left' as const })),
    ...marks.toReversed().map((mark) => ({ mark, face: 'right' as const })),
  ];
  return rounds.map(({ mark, face }, i) => ({
    clientId: `${name}/${i + 1}`,
    target: mark.target,
    ...(mark.purpose && { purpose: mark.purpose }),
    face,
    set: 1,
    ...readings(from, centres.get(mark.target)!, face, prism),
    targetHeight: mark.height,
    ...prismFields(prism),
  }));
}

function centreOf({ target, height, moved }: Mark, drawn: Chance): Place {
  const place = truePlace(target);
  const centring = () => drawn.normal(TARGET_SIGMA_MM.centring / 1000 / FOOT);
  return {
    easting: place.easting + (moved?.easting ?? 0) + centring(),
    northing: place.northing + (moved?.northing ?? 0) + centring(),
    elevation:
      place.elevation + (moved?.elevation ?? 0) + height + drawn.normal(TARGET_SIGMA_MM.height / 1000 / FOOT),
  };
}

function readings(from: Standing, centre: Place, face: 'left' | 'right', { appliedMm }: PrismState) {
  const { horizontal, zenith, slopeDistance } = observe(
    from,
    { centre, constantMm: PRISM_MM, appliedMm },
    face,
  );
  return {
    horizontal: dms(horizontal),
    zenith: dms(zenith),
    slopeDistance: Number(slopeDistance.toFixed(3)),
  };
}

function prismFields({ declaredMm, appliedMm }: PrismState) {
  return { prismConstantMm: declaredMm, prismConstantAppliedMm: appliedMm, appliedPpm: 0 };
}

function setupDocument(
  clientId: string,
  at: Station & { method?: 'identify'; stationPoint?: string },
  shots: object[],
) {
  const { station, instrumentHeight, stationPoint, method = 'resection' } = at;
  return {
    clientId,
    units: UNITS,
    setups: [
      {
        clientId: at.clientId,
        station,
        ...(stationPoint === undefined ? { method } : { method: 'backsight', stationPoint }),
        instrument: 'TS-1',
        instrumentHeight,
        toleranceClass: 'earthwork',
        observedAt: 'NOW',
        atmosphere: { temperature: AIR.fahrenheit, pressure: AIR.inchesOfMercury },
        shots,
      },
    ],
  };
}

const checkOnBenchmark: Mark = { target: 'BM-2', purpose: 'check', height: POLE };

export function goodSetup() {
  const marks = [...['HT-101', 'HT-102', 'HT-104', 'HT-106'].map(post), checkOnBenchmark];
  return setupDocument('setup-good', GOOD, set(standing(GOOD, 'good setup'), marks, RIGHT, 'st-1'));
}

export function wrongPrismSetup() {
  const marks = ['HT-101', 'HT-102', 'HT-104', 'HT-105'].map(post);
  const shots = set(standing(WRONG_PRISM, 'wrong prism'), marks, FORGOTTEN, 'st-2');
  return setupDocument('setup-wrong-prism', WRONG_PRISM, shots);
}

export function bumpedTargetSetup() {
  const marks = ['HT-101', 'HT-102', 'HT-103', 'HT-105', 'HT-106'].map(post);
  const moved = marks.map((mark) => (mark.target === 'HT-103' ? { ...mark, moved: BUMP } : mark));
  const shots = set(standing(BUMPED_TARGET, 'bumped target'), moved, RIGHT, 'st-3');
  return setupDocument('setup-bumped-target', BUMPED_TARGET, shots);
}

/** Two backsights and a check on the other benchmark. */
export function backsightSetup() {
  const marks = [...['HT-104', 'HT-106'].map(post), checkOnBenchmark];
  const shots = set(standing(OVER_MARK, 'over a mark'), marks, RIGHT, 'st-4');
  return setupDocument('setup-backsight', OVER_MARK, shots);
}

export function anglesOnlySetup() {
  const marks = ['HT-101', 'HT-102', 'HT-103', 'HT-105', 'HT-106'].map(post);
  const whole = set(standing(ANGLES_ONLY, 'angles only'), marks, RIGHT, 'st-5');
  const shots = whole.map(({ clientId, target, face, set: round, horizontal, zenith, targetHeight }) => {
    return { clientId, target, face, set: round, horizontal, zenith, targetHeight };
  });
  return setupDocument('setup-angles-only', ANGLES_ONLY, shots);
}

/** Five posts and somebody else's reflector, none of them named. */
export function unnamedSetup() {
  const marks = ['HT-101', 'HT-102', 'HT-103', 'HT-104', 'HT-105', 'HT-106'].map(post);
  const seen = marks.map((mark) => (mark.target === 'HT-104' ? { ...mark, moved: OTHERS } : mark));
  const shots = set(standing(UNNAMED, 'unnamed'), seen, RIGHT, 'st-6').map((shot) => ({
    ...shot,
    target: null,
  }));
  return setupDocument('setup-identify', UNNAMED, shots);
}

/** Hours later, from the good setup: the benchmark again, and a target of the fit to see whether it drifted. */
export function laterCheck() {
  const marks: Mark[] = [{ ...checkOnBenchmark, purpose: undefined }, post('HT-102')];
  const shots = set(standing(GOOD, 'later check'), marks, RIGHT, 'st-1/check');
  return {
    clientId: 'setup-check',
    units: UNITS,
    setupChecks: [
      { clientId: 'st-1-check', setup: GOOD.clientId, purpose: 'check', observedAt: 'NOW', shots },
    ],
  };
}

/** A point of ground in one face, as grade is shot. */
export function groundShot(from: Standing, ground: Place) {
  const centring = () => from.chance.normal(TARGET_SIGMA_MM.centring / 1000 / FOOT);
  const centre = {
    easting: ground.easting + centring(),
    northing: ground.northing + centring(),
    elevation: ground.elevation + POLE + from.chance.normal(TARGET_SIGMA_MM.height / 1000 / FOOT),
  };
  return {
    face: 'left',
    ...readings(from, centre, 'left', RIGHT),
    targetHeight: POLE,
    ...prismFields(RIGHT),
  };
}

export function standingAtGoodSetup(seed: string): Standing {
  return standing(GOOD, seed);
}
