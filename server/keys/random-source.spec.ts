import { describe, expect, it } from 'vitest';
import { seededSource, xoshiro } from './random-source';

describe('xoshiro', () => {
  it('gives the first outputs of the reference implementation for the state 1, 2, 3, 4', () => {
    // Reference values of the xoshiro128** 1.1 code at https://prng.di.unimi.it, quoted from memory and, for the first
    // two, by hand: rotl(2·5, 7)·9 = 11520, and the second word is 0 after one step.
    const source = xoshiro([1, 2, 3, 4]);
    const outputs = Array.from({ length: 4 }, () => source.next());
    expect(outputs).toEqual([11520, 0, 5927040, 70819200]);
  });

  it('draws every number below a bound about equally often', () => {
    const source = seededSource('uniformity');
    const counts = new Array<number>(7).fill(0);
    for (let index = 0; index < 70_000; index++) counts[source.below(7)]! += 1;
    // Pearson's chi-squared with 6 degrees of freedom stays below 22.46 in all but a thousandth of cases.
    const chiSquared = counts.reduce((sum, count) => sum + (count - 10_000) ** 2 / 10_000, 0);
    expect(chiSquared).toBeLessThan(22.46);
  });

  it('depends on every character of the seed and on nothing else', () => {
    expect(seededSource('set 1').next()).toBe(seededSource('set 1').next());
    expect(seededSource('set 1').next()).not.toBe(seededSource('set 2').next());
  });
});
