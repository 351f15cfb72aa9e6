import type { Chance } from './chance';
import { wholeBetween } from './chance';
import type { Observed } from './observe';

/** A mistake made in the field or the office, and what it should be called. */
export interface Mistake {
  fault: string;
  subject: string[];
  /** m, signed where it has a sign. */
  size: number | null;
  observed: Observed;
}

type Making = (observed: Observed, chance: Chance) => Mistake;

/** A prism constant wrong by so many metres: every distance too long. */
export const wrongConstant =
  (size: number): Making =>
  (observed) => ({
    fault: 'distanceConstant',
    subject: [],
    size,
    observed: {
      ...observed,
      pointings: observed.pointings.map((p) => ({ ...p, slopeDistance: p.slopeDistance + size })),
    },
  });

/** A mark pushed so far aside, in any direction, after it was published. */
export const movedTarget =
  (size: number): Making =>
  (observed, chance) => {
    const moved = anyOf(observed.published, chance);
    const azimuth = 2 * Math.PI * chance.uniform();
    const published = observed.published.map((mark) =>
      mark.name !== moved.name
        ? mark
        : {
            ...mark,
            easting: mark.easting - size * Math.sin(azimuth),
            northing: mark.northing - size * Math.cos(azimuth),
          },
    );
    return { fault: 'targetMoved', subject: [moved.name], size, observed: { ...observed, published } };
  };

/** A target height sent too small by so much: the mark comes out too high. */
export const wrongHeight =
  (size: number): Making =>
  (observed, chance) => {
    const { name } = anyOf(observed.published, chance);
    const pointings = observed.pointings.map((p) =>
      p.target === name ? { ...p, targetHeight: p.targetHeight - size } : p,
    );
    return { fault: 'heightOfTargetOrMark', subject: [name], size, observed: { ...observed, pointings } };
  };

/** Two targets that carry each other's name. */
export const swappedTargets: Making = (observed, chance) => {
  const [one, other] = observed.published.map(({ name }) => name).sort(() => chance.uniform() - 0.5);
  const nameOf = (target: string) => (target === one ? other : target === other ? one : target);
  const pointings = observed.pointings.map((p) => ({ ...p, target: nameOf(p.target) }));
  return {
    fault: 'targetsSwapped',
    subject: [one, other].sort(),
    size: null,
    observed: { ...observed, pointings },
  };
};

/** Nothing wrong. */
export const noMistake: Making = (observed) => ({ fault: 'none', subject: [], size: null, observed });

function anyOf<T>(list: readonly T[], chance: Chance): T {
  return list[wholeBetween(chance, 0, list.length - 1)];
}
