import type { AnswerSpecification } from '@shared/answer-forms';
import { isFiniteComplex, modulus, real, subtract, type Complex } from '@shared/reading/complex';
import { printComplex, printNumber } from '@shared/reading/print';
import { evaluateNumber } from '@shared/reading/quantity';
import type { ReadingOf } from '@shared/reading/reading';
import { comparedPoints, formulaPoints } from './formula-points';
import { asFormula, KeyProblem, type ComputedKey } from './key-value';
import { matched, type Match } from './match';
import { allowance } from './tolerance';

export type FormulaSpecification = Extract<AnswerSpecification, { form: 'formula' }>;

/** A formula and its key at one point. */
export interface FormulaPoint {
  readonly at: Readonly<Record<string, number>>;
  readonly answer: Complex | null;
  readonly key: Complex;
}

/** The formula and its key at the points where the key is defined, 40 of them where so many are. */
export function formulaAtPoints(
  reading: ReadingOf<'formula'>,
  key: ComputedKey,
  part: FormulaSpecification,
): readonly FormulaPoint[] {
  const values = asFormula(key.value).atPoints;
  const result: FormulaPoint[] = [];
  for (const [index, at] of formulaPoints(part.variables).entries()) {
    const expected = values[index];
    if (!expected) continue;
    const scope = new Map(Object.entries(at).map(([name, value]) => [name, real(value)]));
    const value = evaluateNumber(reading.expression, scope);
    result.push({ at, answer: isFiniteComplex(value) ? value : null, key: expected });
    if (result.length === comparedPoints) break;
  }
  if (result.length === 0) throw new KeyProblem('The key is undefined everywhere in the ranges of its variables.');
  return result;
}

/** Rounding relative to the largest value: where a key passes through 0 a relative tolerance alone would refuse 1e-17. */
const roundingFloor = 1e-13;

/** Compares a formula with its key, complex-valued, within the tolerance at every point. */
export function compareFormula(reading: ReadingOf<'formula'>, key: ComputedKey, part: FormulaSpecification): Match {
  const points = formulaAtPoints(reading, key, part);
  const largest = Math.max(...points.map((point) => modulus(point.key)));
  const floor = roundingFloor * Math.max(largest, Number.MIN_VALUE);
  const differing = points.find(
    ({ answer, key: expected }) =>
      answer === null ||
      !(
        modulus(subtract(answer, expected)) <=
        Math.max(allowance(modulus(expected), part.tolerance), floor, largest === 0 ? 1e-13 : 0)
      ),
  );
  if (!differing) return matched(true);
  return matched(false, { point: differing, reason: inWords(differing) });
}

/** Where and how they differ, in a sentence. */
function inWords({ at, answer, key }: FormulaPoint): string {
  const place = Object.entries(at)
    .map(([name, value]) => `${name} = ${printNumber(value, 4)}`)
    .join(', ');
  if (!answer) return `The formula is undefined where the key is not: at ${place} the key is ${printComplex(key, 5)}.`;
  return `At ${place} the formula is ${printComplex(answer, 5)} and the key ${printComplex(key, 5)}.`;
}
