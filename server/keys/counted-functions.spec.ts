import { describe, expect, it } from 'vitest';
import { defaultConvention } from '../optics/convention';
import { KeyEvaluator } from './key-task';
import type { GivenValue } from './value';

const evaluator = new KeyEvaluator();

function evaluate(
  expression: string,
  { seed, givens = {} }: { seed?: string; givens?: Record<string, GivenValue> } = {},
) {
  const { key, fault } = evaluator.evaluate({ expression, givens, convention: defaultConvention, seed });
  return fault ? fault.message : key.value;
}

const countsOf = (expression: string, seed = 'a seed') => evaluate(expression, { seed }) as number[];
const meanOf = (list: readonly number[]) => list.reduce((sum, each) => sum + each, 0) / list.length;

describe('sampleCounts', () => {
  it('draws the same counts for the same seed, others for another', () => {
    const expression = 'sampleCounts(coherent(2), 400, 0.6, 0.02)';
    const counts = countsOf(expression);
    expect(counts).toHaveLength(400);
    expect(counts.every((each) => Number.isInteger(each) && each >= 0)).toBe(true);
    expect(countsOf(expression)).toEqual(counts);
    expect(countsOf(expression, 'another')).not.toEqual(counts);
  });

  it.each([
    // Mean and variance of the law that is drawn from: η⟨n⟩ + d, and η²Var n + η(1 − η)⟨n⟩ + d.
    ['sampleCounts(coherent(2), 10000, 0.6, 0.5)', 2.9, 2.9],
    ['sampleCounts(thermal(3), 10000, 0.5)', 1.5, 3.75],
    ['sampleCounts(fock(4), 10000, 0.25)', 1, 0.75],
    ['sampleCounts(fock(4), 10000)', 4, 0],
    ['sampleCounts(vacuum(), 10000, 1, 2)', 2, 2],
  ])('has the moments of its law: %s', (expression, mean, variance) => {
    const counts = countsOf(expression);
    const own = meanOf(counts);
    // Five standard errors: 1 in 1.7 million seeds lies outside, and the seed is fixed.
    expect(Math.abs(own - mean)).toBeLessThanOrEqual(5 * Math.sqrt(variance / counts.length));
    const spread = counts.reduce((sum, each) => sum + (each - own) ** 2, 0) / (counts.length - 1);
    const fourth = counts.reduce((sum, each) => sum + (each - own) ** 4, 0) / counts.length;
    expect(Math.abs(spread - variance)).toBeLessThanOrEqual(5 * Math.sqrt(fourth / counts.length) + 1e-12);
  });

  it('follows its law count by count', () => {
    const counts = countsOf('sampleCounts(squeezed(1), 10000, 0.7, 0.1)');
    for (let m = 0; m <= 6; m += 1) {
      const expected = evaluate(`countProbability(squeezed(1), ${String(m)}, 0.7, 0.1)`) as number;
      const found = counts.filter((each) => each === m).length / counts.length;
      expect(Math.abs(found - expected)).toBeLessThan(5 * Math.sqrt((expected * (1 - expected)) / counts.length));
    }
  });

  it.each([
    ['sampleCounts(coherent(2), 0)', 'shots must be a whole number from 1 to 10,000, got 0'],
    ['sampleCounts(coherent(2), 10001)', 'shots'],
    ['sampleCounts(coherent(2), 10, 1.2)', 'efficiency must lie between 0 and 1, got 1.2'],
    ['sampleCounts(coherent(2), 10, 1, -1)', 'dark counts'],
    ['sampleCounts(coherent(2))', 'takes a state'],
    ['sampleCounts(3, 10)', ''],
    ['sampleCounts(product(vacuum(), vacuum()), 10)', ''],
  ])('refuses %s', (expression, words) => {
    expect(evaluate(expression, { seed: 'a seed' })).toEqual(expect.stringContaining(words) as string);
  });

  it('draws nothing where a key is evaluated', () => {
    expect(evaluate('sampleCounts(coherent(2), 10)')).toContain('only stand in a derived given');
  });
});

describe('estimates from a student’s own counts', () => {
  const givens = { counts: [0, 2, 1, 3, 0, 2] };

  it.each([
    ['mean(counts)', 8 / 6],
    ['variance(counts)', (18 - 64 / 6) / 5],
    ['variance([1, 2, 3])', 1],
    ['g2(counts)', 10 / 6 / (8 / 6) ** 2],
    ['g2([0, 2, 0, 2])', 1],
    ['variance(counts)/mean(counts)', (18 - 64 / 6) / 5 / (8 / 6)],
  ])('%s', (expression, value) => {
    expect(evaluate(expression, { givens })).toBeCloseTo(value, 12);
  });

  it('tend to the figures of the state, whatever the efficiency', () => {
    for (const [state, g2] of [
      ['thermal(2)', 2],
      ['coherent(2)', 1],
      ['fock(4)', 0.75],
    ] as const) {
      const counts = countsOf(`sampleCounts(${state}, 10000, 0.4)`);
      // The estimate of thermal light scatters most: by 0.08 for so many counts.
      expect(Math.abs((evaluate('g2(counts)', { givens: { counts } }) as number) - g2)).toBeLessThan(0.25);
    }
    expect(evaluate('g2(thermal(2))')).toBeCloseTo(2, 10);
  });

  it.each([
    ['variance([1])', 'at least two'],
    ['variance(3)', 'takes a list of numbers'],
    ['g2([0, 0])', 'not defined'],
    ['g2([0.5, 1])', 'whole numbers from 0'],
    ['g2([-1, 1])', 'whole numbers from 0'],
    ['variance([i, 1])', 'real numbers'],
  ])('refuse %s', (expression, words) => {
    expect(evaluate(expression)).toEqual(expect.stringContaining(words) as string);
  });
});
