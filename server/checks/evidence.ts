import type { Reading } from '@shared/reading/reading';

/** Spread of wrong answers that chance is reckoned with: uniform in the logarithm over two decades, in either sign. */
const spread = 2 * Math.log(100);

/** The figures of a number as the read-back prints it, without sign, point and leading zeros. */
function writtenFigures(readAs: string): string {
  const mantissa = /[\d\u202f]+(?:\.\d+)?/.exec(readAs)?.[0] ?? '';
  return mantissa.replace(/[.\u202f]/g, '').replace(/^0+/, '');
}

/** How precisely an answer was written: the relative half unit of its last figure, from what the read-back prints. */
export function writtenPrecision(reading: Reading): number {
  if (reading.kind !== 'number' && reading.kind !== 'complex') return 0;
  const digits = writtenFigures(reading.readAs);
  const leading = Number(digits.slice(0, 2).padEnd(2, '0')) / 10;
  return digits.length === 0 ? 1 : 0.5 / (leading * 10 ** (digits.length - 1));
}

/** Whether a number is its key rounded to the figures that were written, and so wrong by rounding alone. */
export function isRounded(reading: Reading, answer: number, key: number): boolean {
  if (reading.kind !== 'number') return false;
  const figures = writtenFigures(reading.readAs).length;
  if (figures < 1 || figures > 15) return false;
  return Math.abs(Number(key.toPrecision(figures)) - answer) <= exactly * Math.abs(answer);
}

/** An answer that holds exactly was not cut short: zeros at its end are left out, as in 0.4 for 0.400. */
const exactly = 1e-9;
/** The relative half unit of the last of three figures, for the middle of a decade. */
const threeFigures = 1.5e-3;

/**
 * Probability that a wrong answer, drawn at random, stands in one given relation by chance.
 *
 * @param deviation relative distance from holding exactly
 * @param precision relative half unit of the last figure that was written
 */
export function chanceOfRelation(deviation: number, precision: number): number {
  const written = deviation <= exactly ? Math.min(precision, threeFigures) : precision;
  const tight = Math.max(1.5 * written, 1e-6);
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
 * answers would stand in this relation, times how many relations are looked for, the usual mistakes counting less.
 *
 * @param chances that each answer of the group stands in the relation by chance
 * @param wrong how many wrong answers there are
 * @param weight the relation's share of the error that all relations together may make, of {@link relationWeight}
 */
export function groupStrength(chances: readonly number[], wrong: number, weight: number): number {
  const product = chances.reduce((sum, chance) => sum - Math.log10(chance), 0);
  return product - logChoose(Math.max(wrong, chances.length), chances.length) + Math.log10(weight);
}

/** The strength in words. */
export function strengthInWords(strength: number): 'weak' | 'fair' | 'strong' | 'beyond doubt' {
  if (strength >= 6) return 'beyond doubt';
  if (strength >= 3) return 'strong';
  return strength >= 1 ? 'fair' : 'weak';
}
