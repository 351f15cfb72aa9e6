/** Numbers that look drawn by chance and are the same every time. */
export interface Chance {
  /** Uniform between `from` and `to`. */
  between(from: number, to: number): number;
  /** Normal about zero. */
  normal(sigma: number): number;
}

/** @param seed any text; FNV-1a makes the first state of it, mulberry32 runs on from there */
export function chance(seed: string): Chance {
  let state = 0x811c9dc5;
  for (let i = 0; i < seed.length; i++) state = Math.imul(state ^ seed.charCodeAt(i), 0x01000193);
  const uniform = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  return {
    between: (from, to) => from + (to - from) * uniform(),
    // Box and Muller; 1 − u keeps the logarithm finite.
    normal: (sigma) => sigma * Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}
