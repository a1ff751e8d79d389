/**
 * Numbers in [0, 1) that follow from a seed alone, so that an interval can be computed again. A 32-bit mixing generator
 * (from memory): good enough for resampling, not for secrets.
 *
 * @param seed a whole number; only its lowest 32 bits count
 */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}
