import type { ComputedSpecification } from '@shared/answer-forms';
import { modulus, real, subtract, type Complex } from '@shared/reading/complex';
import { numberKey } from '../compare-number';
import {
  asComplex,
  asFormula,
  asList,
  asMatrix,
  asState,
  KeyProblem,
  type ComputedKey,
  type StateKey,
} from '../key-value';
import { within } from '../tolerance';

/** Two values closer than this, relative to the key, are the same: keys are computed to ten digits at least. */
const same = 1e-9;

/** How a wrong value stands to the key: told apart, taken for right, or the very same. */
export type Passing = 'told apart' | 'passes' | 'the same';

/**
 * Whether a value would be taken for right if it were an answer: the comparisons of answers, made on computed values.
 *
 * @throws KeyProblem where the key is not of the part's kind
 */
export function passing(part: ComputedSpecification, key: ComputedKey, value: ComputedKey): Passing {
  switch (part.form) {
    case 'number': {
      const its = numberKey(key, part.unit).value;
      const other = quietly(() => numberKey(value, part.unit).value);
      return other === undefined ? 'told apart' : entries([real(its)], [real(other)], part.tolerance);
    }
    case 'complex': {
      const [its, other] = [asComplex(key.value), quietly(() => asComplex(value.value))];
      if (!other) return 'told apart';
      return part.upToPhase
        ? entries([real(modulus(its))], [real(modulus(other))], part.tolerance)
        : entries([its], [other], part.tolerance);
    }
    case 'list':
      return entries(
        asList(key.value),
        quietly(() => asList(value.value)),
        part.tolerance,
      );
    case 'matrix':
      return entries(asMatrix(key.value).flat(), quietly(() => asMatrix(value.value))?.flat(), part.tolerance);
    case 'distribution':
      return distribution(
        asList(key.value),
        quietly(() => asList(value.value)),
        part.tolerance.totalVariation,
      );
    case 'formula': {
      const its = asFormula(key.value).atPoints;
      const other = quietly(() => asFormula(value.value).atPoints);
      const defined = its.flatMap((point, index) => (point ? [{ point, index }] : []));
      if (!other) return 'told apart';
      if (defined.some(({ index }) => !other[index])) return 'told apart';
      return entries(
        defined.map(({ point }) => point),
        defined.map(({ index }) => other[index] ?? real(NaN)),
        part.tolerance,
      );
    }
    case 'state': {
      const fidelity = quietly(() => fidelityOf(asState(key.value), asState(value.value)));
      if (fidelity === undefined) return 'told apart';
      if (fidelity >= 1 - same) return 'the same';
      return fidelity >= part.minimumFidelity ? 'passes' : 'told apart';
    }
  }
}

/** A slip of another kind than the key is told apart; only the key itself must be of the right kind. */
function quietly<Value>(read: () => Value): Value | undefined {
  try {
    return read();
  } catch (error) {
    if (error instanceof KeyProblem) return undefined;
    throw error;
  }
}

function entries(
  key: readonly Complex[],
  value: readonly Complex[] | undefined,
  tolerance: Parameters<typeof within>[2],
): Passing {
  if (value?.length !== key.length) return 'told apart';
  const pairs = key.map((its, index) => [its, value[index] ?? real(NaN)] as const);
  const largest = Math.max(...key.map(modulus));
  if (pairs.every(([its, other]) => modulus(subtract(its, other)) <= same * largest)) return 'the same';
  return pairs.every(([its, other]) => within(other, its, tolerance)) ? 'passes' : 'told apart';
}

function distribution(key: readonly Complex[], value: readonly Complex[] | undefined, allowed: number): Passing {
  if (value?.length !== key.length) return 'told apart';
  const distance = key.reduce((sum, { re }, index) => sum + Math.abs(re - (value[index]?.re ?? NaN)), 0) / 2;
  if (distance <= same) return 'the same';
  return distance <= allowed ? 'passes' : 'told apart';
}

/** |⟨a|b⟩|² of two pure states, normalised; undefined where one of them is mixed. */
function fidelityOf(one: StateKey, other: StateKey): number | undefined {
  if (one.modes !== other.modes || !('amplitudes' in one) || !('amplitudes' in other)) return undefined;
  const amplitudes = new Map(other.amplitudes.map((each) => [each.photons.join(), each]));
  let [re, im, ownWeight, otherWeight] = [0, 0, 0, 0];
  for (const a of one.amplitudes) {
    ownWeight += a.re ** 2 + a.im ** 2;
    const b = amplitudes.get(a.photons.join());
    if (!b) continue;
    re += a.re * b.re + a.im * b.im;
    im += a.re * b.im - a.im * b.re;
  }
  for (const b of other.amplitudes) otherWeight += b.re ** 2 + b.im ** 2;
  return (re ** 2 + im ** 2) / (ownWeight * otherWeight);
}
