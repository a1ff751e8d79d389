import type { AuditFinding } from '@shared/audit';
import { isComputed } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import { KeyProblem } from '../key-value';
import { findingsOf, shownVariant, type AuditedVariant, type AuditInput } from './audited';
import { passing, type Passing } from './passes';

/** What an audit finds between the key of a part and its slips, and between the slips. */
export function slipFindings(input: AuditInput, index: number): AuditFinding[] {
  const answer = input.content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return [];
  const { over, of } = findingsOf(input, index);
  const slips = answer.slips ?? [];
  const nameOf = (slip: number) => {
    const name = slips[slip]?.name;
    return name ? `slip “${name}”` : `slip ${String(slip + 1)}`;
  };
  const label = `(${partLabel(index)})`;
  const compare = (variant: AuditedVariant, one: number | 'key', other: number): Passing => {
    const its = variant.parts[index];
    const key = one === 'key' ? its?.key?.key : its?.slips[one]?.key;
    const value = its?.slips[other]?.key;
    if (!key || !value) return 'told apart';
    try {
      return passing(answer, key, value);
    } catch (error) {
      if (error instanceof KeyProblem) return 'told apart';
      throw error;
    }
  };
  const where = (variant: AuditedVariant) => {
    const givens = shownVariant(variant)?.givens ?? '';
    return givens === '' || of === 1 ? '' : `, for example where ${givens}`;
  };

  return slips.flatMap((slip, place) => {
    const own = [
      ...over(
        'slip equals key',
        'stops use',
        (variant) => compare(variant, 'key', place) === 'the same',
        (first, found) =>
          `The ${nameOf(place)} of ${label} equals the key in ${found}${where(first)}. It would pass as right.`,
      ),
      ...over(
        'slip inside tolerance',
        'stops use',
        (variant) => compare(variant, 'key', place) === 'passes',
        (first, found) =>
          `The ${nameOf(place)} of ${label} lies inside the tolerance of the key in ${found}${where(first)}. It would pass as right.`,
      ),
      ...over(
        'slip without value',
        (count) => (count === of ? 'stops use' : 'look at this'),
        (variant) => variant.parts[index]?.slips[place]?.fault !== undefined,
        (first, found) =>
          `The ${nameOf(place)} of ${label} has no value in ${found}, so it is not found there: ${first.parts[index]?.slips[place]?.fault ?? ''}`,
      ),
    ];
    const pairs = slips.slice(0, place).flatMap((_each, earlier) =>
      over(
        'slips coincide',
        'look at this',
        (variant) =>
          compare(variant, earlier, place) !== 'told apart' && compare(variant, 'key', place) === 'told apart',
        (first, found) =>
          `The ${nameOf(place)} of ${label} cannot be told from the ${nameOf(earlier)} in ${found}${where(first)}: the feedback of the first is shown${
            slip.fraction === slips[earlier]?.fraction ? '' : ', and its fraction counts'
          }.`,
      ),
    );
    return [...own, ...pairs];
  });
}
