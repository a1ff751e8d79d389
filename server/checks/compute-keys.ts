import type { ComputedSpecification } from '@shared/answer-forms';
import { compileKey, evaluateKey, evaluateState, KeyError, readGivens, type GivenValue } from '../keys';
import { stateComponents } from '../keys/state-components';
import type { Convention } from '../optics/convention';
import type { PartKeys } from './check-answer';
import { comparedPoints, formulaPoints } from './formula-points';
import { asComplex, computedKey, type ComputedKey } from './key-value';

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

/**
 * Computes a key or a slip of a part in one variant: a number with its unit, a list, a state in a number basis, or a
 * formula's values at the points where it is compared.
 *
 * @throws KeyError where the expression has no value
 */
export function computeKey(part: ComputedSpecification, expression: string, { givens, convention }: Surroundings) {
  const values = readGivens(givens);
  if (part.form === 'formula') return formulaKey(part, expression, { givens, convention });
  const compiled = compileKey(expression, { names: [...values.keys()], convention });
  if (part.form === 'state') return { value: stateComponents(evaluateState(compiled, values)) };
  return computedKey(evaluateKey(compiled, values));
}

/** A formula's variables win over givens of the same name. Only as many points are computed as are compared. */
function formulaKey(
  part: Extract<ComputedSpecification, { form: 'formula' }>,
  expression: string,
  { givens, convention }: Surroundings,
): ComputedKey {
  const names = [...new Set([...Object.keys(givens), ...Object.keys(part.variables)])];
  const compiled = compileKey(expression, { names, convention });
  const fixed = readGivens(givens);
  let fault: KeyError | undefined;
  let defined = 0;
  const atPoints = formulaPoints(part.variables).map((point) => {
    if (defined >= comparedPoints) return null;
    try {
      const { value, unit } = evaluateKey(compiled, new Map([...fixed, ...Object.entries(point)]));
      if (unit !== undefined) throw new KeyError('A formula has no unit; divide by it.', null);
      const number = asComplex(computedKey({ value }).value);
      defined += 1;
      return number;
    } catch (error) {
      // Undefined at this point: another stands in for it.
      if (!(error instanceof KeyError)) throw error;
      fault ??= error;
      return null;
    }
  });
  if (defined === 0 && fault) throw fault;
  return { value: { atPoints } };
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
