import {
  add,
  conjugate,
  divide,
  isFiniteComplex,
  modulus,
  multiply,
  real,
  subtract,
  zero,
  type Complex,
} from '@shared/reading/complex';
import { numberCandidates, type Candidate, type RelationMatch } from './relation';

/** Several values of an answer beside as many of its key: a list, a matrix, a formula at its points. */
export interface Sets {
  readonly answer: readonly Complex[];
  readonly key: readonly Complex[];
  /** Relative width within which a value counts as equal. */
  readonly width: number;
}

function agree(answer: readonly Complex[], expected: readonly Complex[], width: number): boolean {
  if (answer.length !== expected.length || answer.length === 0) return false;
  const largest = Math.max(...expected.map(modulus));
  if (!(largest > 0) || !Number.isFinite(largest)) return false;
  return answer.every((value, index) => {
    const target = expected[index];
    return target !== undefined && modulus(subtract(value, target)) <= width * Math.max(modulus(target), 0.1 * largest);
  });
}

/** The factor that takes the key nearest to the answer, by least squares. */
function factorBetween({ answer, key }: Sets): Complex {
  let above = zero;
  let below = 0;
  for (const [index, value] of key.entries()) {
    above = add(above, multiply(conjugate(value), answer[index] ?? zero));
    below += modulus(value) ** 2;
  }
  return divide(above, real(below));
}

function arrangements(
  key: readonly Complex[],
  answer: readonly Complex[],
): readonly (readonly [string, readonly Complex[], readonly Complex[]])[] {
  const side = Math.round(Math.sqrt(key.length));
  const transposed =
    side * side === key.length
      ? key.map((_, index) => key[(index % side) * side + Math.floor(index / side)] ?? zero)
      : [];
  return [
    ['the key in reverse order', [...key].reverse(), answer],
    ['the key without its first entry', key.slice(1), answer.slice(0, key.length - 1)],
    ['the key after one entry too many', key.slice(0, -1), answer.slice(1, key.length)],
    ['the transpose of the key', transposed, answer],
  ];
}

/** Relations of several values at once: one that holds for every value, an exchange of order, or a constant factor. */
export function relationsBetweenSets(
  sets: Sets,
  candidates: readonly Candidate[] = numberCandidates,
): readonly RelationMatch[] {
  const { answer, key, width } = sets;
  if (answer.length === 0 || key.length === 0) return [];
  const found: RelationMatch[] = [];
  for (const { relation, of } of candidates) {
    const expected = key.map(of);
    if (!expected.every(isFiniteComplex) || agree(expected, key, width)) continue;
    if (agree(answer, expected, width)) found.push({ relation, deviation: 0 });
  }
  for (const [name, expected, compared] of arrangements(key, answer)) {
    if (key.length > 1 && !agree(expected, key, width) && agree(compared, expected, width))
      found.push({ relation: { name }, deviation: 0 });
  }
  if (found.length === 0 && answer.length === key.length && key.length > 1) {
    const factor = factorBetween(sets);
    const constant = isFiniteComplex(factor) && modulus(factor) > 0 && Math.abs(factor.im) <= width * modulus(factor);
    if (
      constant &&
      agree(
        answer,
        key.map((value) => multiply(value, factor)),
        width,
      )
    ) {
      found.push({ relation: { name: 'a constant times the key', factor: factor.re }, deviation: 0 });
    }
  }
  return found;
}
