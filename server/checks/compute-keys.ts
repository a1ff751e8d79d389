import type { ComputedSpecification } from '@shared/answer-forms';
import { KeyError, KeyEvaluator, type GivenValue } from '../keys';
import type { Convention } from '../optics/convention';
import type { PartKeys } from './check-answer';
import { computedKey, type ComputedKey } from './key-value';
import { wantedOf } from './wanted-of';

/** What the expressions of a part may name, and the convention that their figures depend on. */
export interface Surroundings {
  readonly givens: Readonly<Record<string, GivenValue>>;
  readonly convention: Convention;
}

/** An earlier part as the keys of a later one see it. */
export interface EarlierPart {
  /** The value of its key in this variant. */
  readonly key: GivenValue;
  /** The student's own value; undefined where there is none. */
  readonly answer?: GivenValue | undefined;
  /** Whether the student's answer was judged right. */
  readonly right: boolean;
}

const evaluator = new KeyEvaluator();

/**
 * Computes a key or a slip of a part in one variant, in this thread: a number with its unit, a list, a state in a number
 * basis, or a formula's values at the points where it is compared.
 *
 * @throws KeyError where the expression has no value
 */
export function computeKey(part: ComputedSpecification, expression: string, surroundings: Surroundings): ComputedKey {
  const { key, fault } = evaluator.evaluate({ expression, ...surroundings, wanted: wantedOf(part) });
  if (fault) throw new KeyError(fault.message, null);
  if (!('compared' in key)) return computedKey(key);
  if (!key.compared) throw new KeyError('The expression does not come to what the part asks for.', null);
  return { value: key.compared };
}

/** A slip that has no value matches nothing. */
function computeSlip(part: ComputedSpecification, expression: string, surroundings: Surroundings) {
  try {
    return computeKey(part, expression, surroundings);
  } catch (error) {
    if (error instanceof KeyError) return undefined;
    throw error;
  }
}

const nameOfPart = /\bpart_[a-z]+\b/g;

/** The earlier parts that an expression names. */
export function earlierPartsIn(expression: string): readonly string[] {
  return [...new Set(expression.match(nameOfPart) ?? [])];
}

/**
 * Computes all that an answer of a part is compared with in one variant: its key and slips, with the keys of earlier parts
 * and again with the student's own answers to them.
 *
 * @throws KeyError where the key itself has no value
 */
export function computePartKeys(
  part: ComputedSpecification,
  { givens, convention }: Surroundings,
  earlier: Readonly<Record<string, EarlierPart>> = {},
): PartKeys {
  const slips = part.slips ?? [];
  const keysOfEarlier = Object.fromEntries(Object.entries(earlier).map(([name, each]) => [name, each.key]));
  const computed = { givens: { ...givens, ...keysOfEarlier }, convention };
  const ownValues: Record<string, GivenValue> = {};
  for (const [name, { answer }] of Object.entries(earlier)) if (answer !== undefined) ownValues[name] = answer;
  const ownComputed = (expression: string) => {
    const used = earlierPartsIn(expression);
    if (used.length === 0 || !used.every((name) => Object.hasOwn(ownValues, name))) return undefined;
    return computeSlip(part, expression, { givens: { ...givens, ...ownValues }, convention });
  };
  const ownKey = ownComputed(part.key);
  const ownSlips = slips.map(({ expression }) => ownComputed(expression));
  const hasOwn = ownKey !== undefined || ownSlips.some((slip) => slip !== undefined);
  return {
    key: computeKey(part, part.key, computed),
    slips: slips.map(({ expression }) => computeSlip(part, expression, computed)),
    ...(hasOwn
      ? {
          own: {
            key: ownKey,
            slips: ownSlips,
            earlierRight: earlierPartsIn(part.key).every((name) => earlier[name]?.right === true),
          },
        }
      : {}),
  };
}
