import { NORMAL_95 } from '@/lib/compute/statistics/distributions';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { type Chance, seededChance } from '@/tests/simulator/chance';
import { type Observed, observe, type Programme } from '@/tests/simulator/observe';
import { type Kind, randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { turn } from '@/tests/simulator/sight';
import { asEngine } from './asEngine';

export interface Coverage {
  /** Shares of the setups, 0–1. */
  ellipse: number;
  height: number;
  orientation: number;
  accepted: number;
  /** √ of the mean of vᵀPv/ν: its expectation is 1 whatever ν is, which the plain mean of σ₀ is not. */
  sigma0: number;
  converged: number;
  /** Setups fitted in a second of processor time, the simulation's own left out. */
  perSecond: number;
}

/** Simulates setups of one kind and counts how often what is stated of them is true. */
export function coverage(
  seed: number,
  setups: number,
  programme: (chance: Chance) => Programme,
  kind: Kind = {},
) {
  const chance = seededChance(seed);
  const counts = { ellipse: 0, height: 0, orientation: 0, accepted: 0, converged: 0 };
  let squares = 0;
  let microseconds = 0;
  for (let i = 0; i < setups; i++) {
    const observed = observe(randomSite(chance, kind), randomInstrument(chance), programme(chance), chance);
    const input = asEngine(observed);
    const before = process.cpuUsage();
    const fit = fitStation(input);
    microseconds += process.cpuUsage(before).user;
    if (withinEllipse(fit, observed)) counts.ellipse++;
    if (within(fit, 2, fit.station.axis - observed.site.station.height)) counts.height++;
    if (within(fit, 3, signed(fit.station.orientation - observed.site.orientation))) counts.orientation++;
    if (fit.test.passed) counts.accepted++;
    if (fit.converged) counts.converged++;
    squares += fit.test.value / fit.test.degreesOfFreedom;
  }
  const shares = Object.fromEntries(
    Object.entries(counts).map(([what, count]) => [what, count / setups]),
  ) as typeof counts;
  const result: Coverage = {
    ...shares,
    sigma0: Math.sqrt(squares / setups),
    perSecond: Math.round((1e6 * setups) / microseconds),
  };
  return result;
}

/** The true station in the axes of the stated 95 % ellipse. */
function withinEllipse({ station, ellipse95 }: StationFit, { site }: Observed): boolean {
  const east = site.station.easting - station.easting;
  const north = site.station.northing - station.northing;
  const [sine, cosine] = [Math.sin(ellipse95.azimuth), Math.cos(ellipse95.azimuth)];
  const along = (east * sine + north * cosine) / ellipse95.semiMajor;
  const across = (east * cosine - north * sine) / ellipse95.semiMinor;
  return along * along + across * across <= 1;
}

/** Whether an error lies within 1.96 stated standard deviations of station unknown i. */
function within({ station }: StationFit, i: number, error: number): boolean {
  return Math.abs(error) <= NORMAL_95 * Math.sqrt(station.covariance[i * 5 + i]);
}

function signed(angle: number): number {
  return turn(angle + Math.PI) - Math.PI;
}
