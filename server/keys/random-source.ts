import { createHash } from 'node:crypto';

/** A reproducible source of whole numbers. */
export interface RandomSource {
  /** The next 32 bits, as a number from 0 to 2³² − 1. */
  next(): number;
  /** A number from 0 to `count` − 1, each equally likely; `count` from 1 to 2³². */
  below(count: number): number;
}

/**
 * xoshiro128** 1.1 with the state given as four 32-bit words, not all zero.
 *
 * Source: D. Blackman and S. Vigna, "Scrambled linear pseudorandom number generators", ACM Trans. Math. Softw. 47
 * (2021) 36.
 */
export function xoshiro(state: readonly [number, number, number, number]): RandomSource {
  let [a, b, c, d] = state;
  const rotated = (word: number, by: number) => ((word << by) | (word >>> (32 - by))) >>> 0;
  const next = (): number => {
    const result = Math.imul(rotated(Math.imul(b, 5), 7), 9) >>> 0;
    const shifted = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= shifted;
    d = rotated(d, 11);
    return result;
  };
  const below = (count: number): number => {
    // Taking the remainder alone would favour small numbers; what lies past the last whole multiple is drawn again.
    const limit = 2 ** 32 - (2 ** 32 % count);
    let drawn = next();
    while (drawn >= limit) drawn = next();
    return drawn % count;
  };
  return { next, below };
}

/**
 * A source that is fixed by a text: the first 16 bytes of its SHA-256, read as four little-endian words, are the
 * state of `xoshiro`.
 */
export function seededSource(seed: string): RandomSource {
  const digest = createHash('sha256').update(seed, 'utf8').digest();
  const word = (index: number) => digest.readUInt32LE(4 * index);
  return xoshiro([word(0), word(1), word(2), word(3)]);
}
