import type { Reading } from '@shared/reading/reading';

/** Spread of wrong answers that chance is reckoned with: uniform in the logarithm over two decades, in either sign. */
const spread = 2 * Math.log(100);

/** How precisely an answer was written: the relative half unit of its last figure, from what the read-back prints. */
export function writtenPrecision(reading: Reading): number {
  if (reading.kind !== 'number' && reading.kind !== 'complex') return 0;
  const mantissa = /[\d\u202f]+(?:\.\d+)?/.exec(reading.readAs)?.[0].replace('\u202f', '') ?? '';
  const digits = mantissa.replace('.', '').replace(/^0+/, '');
  const leading = Number(digits.slice(0, 2).padEnd(2, '0')) / 10;
  return digits.length === 0 ? 1 : 0.5 / (leading * 10 ** (digits.length - 1));
}

/** Probability that a wrong answer, drawn at random, stands in one given relation by chance. */
export function chanceOfRelation(deviation: number, precision: number): number {
  const tight = Math.max(1.5 * precision, 1e-6);
  // Beyond its own last figure an answer was rounded on the way: then as wide as it lies off, with room.
  const taken = deviation <= tight ? tight : Math.max(2e-3, 2 * deviation);
  return Math.min(1, (2 * taken) / spread);
}

/** log₁₀ of the binomial coefficient. */
function logChoose(n: number, k: number): number {
  let sum = 0;
  for (let step = 1; step <= k; step += 1) sum += Math.log10((n - k + step) / step);
  return sum;
}

/**
 * Strength of the evidence that a group is no chance, as −log₁₀ of a bound on its probability: that as many of the wrong
 * answers would stand in any one of the relations that are looked for.
 */
export function groupStrength(chances: readonly number[], wrong: number, relations: number): number {
  const product = chances.reduce((sum, chance) => sum - Math.log10(chance), 0);
  return product - logChoose(Math.max(wrong, chances.length), chances.length) - Math.log10(relations);
}

/** The strength in words. */
export function strengthInWords(strength: number): 'weak' | 'fair' | 'strong' | 'beyond doubt' {
  if (strength >= 6) return 'beyond doubt';
  if (strength >= 3) return 'strong';
  return strength >= 1 ? 'fair' : 'weak';
}
