import type { ComputedSpecification } from '@shared/answer-forms';
import { modulus, real, type Complex } from '@shared/reading/complex';
import type { Reading } from '@shared/reading/reading';
import { asComplex, KeyProblem, type ComputedKey } from './key-value';
import type { Match } from './match';
import { noRelation, relationsBetween, relationWidth, type Relation } from './relation';
import { allowance } from './tolerance';

/** The key of another part, which an answer may have been put down for. */
export interface OtherKey {
  /** As the part is called: `a`. */
  readonly label: string;
  readonly key: ComputedKey;
}

const isComplex = (value: Match['answer']): value is Complex => value !== undefined && 're' in value;

/** Whether the answer, in SI units, is the key of another part. */
function keyOfAnotherPart(reading: Reading, others: readonly OtherKey[]): Relation | undefined {
  if (reading.kind !== 'number' && reading.kind !== 'complex') return undefined;
  const value = reading.kind === 'number' ? real(reading.value) : reading.value;
  for (const { label, key } of others) {
    try {
      const other = asComplex(key.value);
      const size = modulus(other);
      if (size > 0 && modulus({ re: value.re - other.re, im: value.im - other.im }) <= 2e-3 * size) {
        return { name: `the key of part (${label})` };
      }
    } catch (error) {
      if (!(error instanceof KeyProblem)) throw error;
    }
  }
  return undefined;
}

/** All relations in which a wrong answer stands to its key, best first. */
export function relationsOf(
  reading: Reading,
  part: ComputedSpecification,
  others: readonly OtherKey[],
  match: Match,
): readonly Relation[] {
  const found: Relation[] = [];
  if (isComplex(match.answer) && isComplex(match.key) && 'tolerance' in part && 'relative' in part.tolerance) {
    const allowed = allowance(modulus(match.key), part.tolerance);
    found.push(...relationsBetween(match.answer, match.key, relationWidth(match.key, allowed)));
  }
  const other = keyOfAnotherPart(reading, others);
  return other ? [...found, other] : found;
}

/** The best relation of an answer to its key. */
export function relationOf(
  reading: Reading,
  part: ComputedSpecification,
  _key: ComputedKey,
  others: readonly OtherKey[],
  match: Match,
): Relation {
  return relationsOf(reading, part, others, match)[0] ?? noRelation;
}
