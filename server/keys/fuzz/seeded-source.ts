/** A reproducible source of whole numbers. */
export interface RandomSource {
  /** A number from 0 to `count` − 1. */
  below(count: number): number;
}

/** Mulberry32, a small generator good enough to make test inputs (public domain, T. Ettinger; from memory). */
export function seededSource(seed: number): RandomSource {
  let state = seed >>> 0;
  return {
    below(count) {
      state = (state + 0x6d2b79f5) >>> 0;
      let mixed = state;
      mixed = Math.imul(mixed ^ (mixed >>> 15), mixed | 1);
      mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
      return Math.floor((((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32) * count);
    },
  };
}
