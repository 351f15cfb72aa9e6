import { type Erection, meanFaces, type Reading } from './faces';
import type { NetworkSetup } from './networkInput';

/** A setup's shots after faces and repeats were meaned within sets. */
export interface SetupReadings {
  setup: NetworkSetup;
  erections: readonly Erection[];
  readings: readonly Reading[];
  /** Ids of the shots that each reading was meaned from. */
  shots: readonly (readonly string[])[];
}

export function setupReadings(setup: NetworkSetup): SetupReadings {
  const { erections, readings } = meanFaces(setup.shots, setup.accuracy, setup.ppm);
  const idsOf = new Map<string, string[]>();
  for (const shot of setup.shots) {
    for (const kind of ['direction', 'zenith', 'distance'] as const) {
      if (shot[kind] === null) continue;
      const key = `${kind}/${shot.set}/${shot.targetHeight}/${shot.target}`;
      const ids = idsOf.get(key);
      if (ids) ids.push(shot.id);
      else idsOf.set(key, [shot.id]);
    }
  }
  const shots = readings.map(({ kind, set, erection }) => {
    const { target, targetHeight } = erections[erection];
    return idsOf.get(`${kind}/${set}/${targetHeight}/${target}`) ?? [];
  });
  return { setup, erections, readings, shots };
}
