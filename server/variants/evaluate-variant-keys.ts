import { isComputed } from '@shared/answer-forms';
import { partLabel, type Part, type ProblemContent } from '@shared/problems';
import type { Convention } from '@shared/primitives';
import type { GivenValues } from '@shared/variants';
import { wantedOf } from '../checks/wanted-of';
import type { Wanted } from '../keys';
import { evaluateOutcomes, type Keys } from './evaluate-outcomes';
import { scopeOf, scopeValueOf, type KeyOutcome, type Scope } from './key-outcome';

/** The expressions of a part; the key is null where a part has none. */
export interface PartExpressions {
  readonly key: string | null;
  readonly slips: readonly string[];
  /** What they are to come to, where that is more than a number or a list. */
  readonly wanted?: Wanted | undefined;
}

/** What a part's expressions came to in one variant; the key is null where a part has none. */
export interface PartKeys {
  readonly key: KeyOutcome | null;
  readonly slips: readonly KeyOutcome[];
}

/** The expressions of a part of a problem. */
export function expressionsOf(part: Pick<Part, 'answer'>): PartExpressions {
  if (!isComputed(part.answer)) return { key: null, slips: [] };
  const { key, slips = [] } = part.answer;
  return { key, slips: slips.map((slip) => slip.expression), wanted: wantedOf(part.answer) };
}

/** The name under which later parts use the value of the part at an index. */
export function partName(index: number): string {
  return `part_${partLabel(index)}`;
}

/**
 * Evaluates the keys and slips of all parts in any number of variants. `part_a`, `part_b` … in a part's expressions are
 * the values of earlier parts' keys; where such a key has no value, neither has what uses it.
 *
 * @param deadline the time by `performance.now()` after which what is left is not evaluated
 * @returns for each variant, in order, what each part's expressions came to
 */
export async function evaluateKeys(
  keys: Keys,
  parts: readonly PartExpressions[],
  itsConvention: Convention,
  variants: readonly GivenValues[],
  deadline = Infinity,
): Promise<readonly (readonly PartKeys[])[]> {
  const scopes: Record<string, Scope[string]>[] = variants.map((givens) => ({ ...scopeOf(givens) }));
  const results: PartKeys[][] = variants.map(() => []);

  for (const [index, part] of parts.entries()) {
    const expressions = [...(part.key === null ? [] : [part.key]), ...part.slips];
    const outcomes = await evaluateOutcomes(
      keys,
      scopes.flatMap((scope) =>
        expressions.map((expression) => ({
          expression,
          givens: { ...scope },
          convention: itsConvention,
          wanted: part.wanted,
        })),
      ),
      deadline,
    );
    for (const [variant, scope] of scopes.entries()) {
      const own = outcomes.slice(variant * expressions.length, (variant + 1) * expressions.length);
      const key = part.key === null ? null : (own[0] ?? null);
      results[variant]?.push({ key, slips: part.key === null ? own : own.slice(1) });
      const value = key?.key && scopeValueOf(key.key);
      if (value !== undefined) scope[partName(index)] = value;
    }
  }
  return results;
}

/** Evaluates the keys and slips of a problem's parts in one variant. */
export async function evaluateVariantKeys(
  keys: Keys,
  content: Pick<ProblemContent, 'parts' | 'convention'>,
  givens: GivenValues,
): Promise<readonly PartKeys[]> {
  const [result] = await evaluateKeys(keys, content.parts.map(expressionsOf), content.convention, [givens]);
  return result ?? [];
}

/**
 * Recomputes one part's key and slips with a student's own values of earlier parts, for follow-through.
 *
 * @param earlier values by name (`part_a`), as the student gave them, with the key's own value where there is none
 */
export async function evaluateWithEarlier(
  keys: Keys,
  content: Pick<ProblemContent, 'parts' | 'convention'>,
  givens: GivenValues,
  partIndex: number,
  earlier: Scope,
): Promise<PartKeys> {
  const part = content.parts[partIndex];
  if (!part) return { key: null, slips: [] };
  const { key, slips, wanted } = expressionsOf(part);
  const outcomes = await evaluateOutcomes(
    keys,
    [...(key === null ? [] : [key]), ...slips].map((expression) => ({
      expression,
      givens: { ...scopeOf(givens), ...earlier },
      convention: content.convention,
      wanted,
    })),
  );
  return key === null ? { key: null, slips: outcomes } : { key: outcomes[0] ?? null, slips: outcomes.slice(1) };
}
