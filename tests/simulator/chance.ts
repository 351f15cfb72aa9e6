/** Where a simulation takes its chances from. */
export interface Chance {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
}

/**
 * Repeatable chance: sfc32 (Doty-Humphrey, PractRand, public domain), made normal by Box and Muller (1958).
 * The first draws of such a small state are thrown away.
 */
export function seededChance(seed: number): Chance {
  let [a, b, c, counter] = [0x9e3779b9, 0x243f6a88, seed | 0, 1];
  const uniform = () => {
    const sum = (a + b + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = ((c << 21) | (c >>> 11)) + sum;
    return (sum >>> 0) / 2 ** 32;
  };
  for (let i = 0; i < 20; i++) uniform();
  let spare: number | null = null;
  return {
    uniform,
    normal() {
      if (spare !== null) {
        const value = spare;
        spare = null;
        return value;
      }
      const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
      const angle = 2 * Math.PI * uniform();
      spare = radius * Math.sin(angle);
      return radius * Math.cos(angle);
    },
  };
}

/** No errors at all: every normal draw is its mean. */
export const NO_ERRORS: Chance = { uniform: () => 0.5, normal: () => 0 };

export function between(chance: Chance, lowest: number, highest: number): number {
  return lowest + (highest - lowest) * chance.uniform();
}

/** A whole number from `lowest` to `highest`, both included. */
export function wholeBetween(chance: Chance, lowest: number, highest: number): number {
  return Math.floor(between(chance, lowest, highest + 1));
}
