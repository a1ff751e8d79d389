import { isComputed, type ComputedSpecification } from '@shared/answer-forms';
import type { CheckResult, VariantKey } from '@shared/checks';
import type { Complex } from '@shared/reading/complex';
import { partLabel, type Part, type ProblemContent } from '@shared/problems';
import type { GivenValues } from '@shared/variants';
import { checkAnswer, KeyProblem, type Check, type ComputedKey, type PartKeys as ComparedKeys } from '../checks';
import type { Keys } from '../variants/evaluate-outcomes';
import { evaluateVariantKeys, evaluateWithEarlier, partName, type PartKeys } from '../variants/evaluate-variant-keys';
import type { GivenValue } from '../keys';
import { presentKey, type KeyOutcome, type Scope } from '../variants/key-outcome';

/** What was handed in for a part. */
export interface HandedIn {
  readonly text: string;
  readonly hasPages: boolean;
}

type Content = Pick<ProblemContent, 'parts' | 'convention'>;

/**
 * Judges all that one script handed in for one problem, part by part, since later parts may use the student's own earlier
 * answers.
 *
 * @param handedIn by part, in the order of the problem's parts
 * @returns for each part how it was judged; null where no check can be made: a person looks
 */
export async function checkProblem(
  keys: Keys,
  content: Content,
  givens: GivenValues,
  handedIn: readonly HandedIn[],
): Promise<readonly (CheckResult | null)[]> {
  const computed = await evaluateVariantKeys(keys, content, givens);
  const results: (CheckResult | null)[] = [];
  for (const [index, part] of content.parts.entries()) {
    const answer = handedIn[index] ?? { text: '', hasPages: false };
    const own = await ownKeys(keys, content, givens, index, computed, results);
    results.push(checkPart(part, index, answer.text, computed, own));
  }
  return results;
}

function checkPart(
  part: Part,
  index: number,
  text: string,
  computed: readonly PartKeys[],
  own: ComparedKeys['own'],
): CheckResult | null {
  if (part.answer.form === 'worked') {
    // What was written is for a person; that nothing was written needs none.
    return text.trim() === '' ? present(part, unanswered, null) : null;
  }
  const key = computed[index]?.key?.key;
  try {
    const check = checkAnswer({ part: part.answer, text, ...keysOf(part, index, computed, own) });
    return present(part, check, key ? presentKey(key) : null);
  } catch (error) {
    if (error instanceof KeyProblem) return null;
    throw error;
  }
}

const unanswered: Pick<Check, 'verdict' | 'fraction' | 'readAs' | 'relation' | 'value'> = {
  verdict: 'unanswered',
  fraction: 0,
  readAs: '',
  relation: { name: 'no known relation' },
  value: null,
};

function keysOf(
  part: Part,
  index: number,
  computed: readonly PartKeys[],
  own: ComparedKeys['own'],
): { readonly keys?: ComparedKeys } {
  const key = compared(computed[index]?.key);
  if (!isComputed(part.answer) || !key) return {};
  const others = computed.flatMap((each, other) => {
    const its = other === index ? undefined : compared(each.key);
    return its ? [{ label: partLabel(other), key: its }] : [];
  });
  const slips = (computed[index]?.slips ?? []).map(compared);
  return { keys: { key, slips, others, ...(own ? { own } : {}) } };
}

/** Key and slips recomputed from the student's own earlier answers; undefined where the key uses none or one is missing. */
async function ownKeys(
  keys: Keys,
  content: Content,
  givens: GivenValues,
  index: number,
  computed: readonly PartKeys[],
  earlier: readonly (CheckResult | null)[],
): Promise<ComparedKeys['own']> {
  const answer = content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return undefined;
  const used = earlierUsedBy(answer, index);
  if (used.length === 0) return undefined;
  const scope: Record<string, GivenValue> = {};
  for (const each of used) {
    const value = ownValue(content.parts[each], earlier[each], computed[each]?.key?.key?.unit);
    if (value === undefined) return undefined;
    scope[partName(each)] = value;
  }
  const outcome = await evaluateWithEarlier(keys, content, givens, index, scope satisfies Scope);
  return {
    key: compared(outcome.key),
    slips: outcome.slips.map(compared),
    earlierRight: used.every((each) => earlier[each]?.verdict === 'right'),
  };
}

/** The earlier parts whose values an answer's key or slips name. */
function earlierUsedBy(answer: ComputedSpecification, index: number): number[] {
  const expressions = [answer.key, ...(answer.slips ?? []).map((slip) => slip.expression)].join('\n');
  return Array.from({ length: index }, (_, earlier) => earlier).filter((earlier) =>
    new RegExp(`\\b${partName(earlier)}\\b`).test(expressions),
  );
}

function ownValue(
  part: Part | undefined,
  result: CheckResult | null | undefined,
  unitOfKey: string | undefined,
): GivenValue | undefined {
  const value = result?.value;
  if (value === null || value === undefined) return undefined;
  if (typeof value !== 'number') return value;
  // A value is compared in the part's unit where it names one, otherwise in the key's.
  const unit = part?.answer.form === 'number' ? (part.answer.unit ?? unitOfKey) : unitOfKey;
  return unit === undefined || unitOfKey === undefined ? value : `${String(value)} ${unit}`;
}

function compared(outcome: KeyOutcome | null | undefined): ComputedKey | undefined {
  const key = outcome?.key;
  if (!key) return undefined;
  if (typeof key.value !== 'string') return { value: key.value, unit: key.unit };
  return 'compared' in key && key.compared ? { value: key.compared } : undefined;
}

function present(
  part: Part,
  check: Pick<Check, 'verdict' | 'fraction' | 'readAs' | 'relation' | 'value' | 'problem' | 'slip'> &
    Partial<Pick<Check, 'keyValue' | 'possible' | 'point'>>,
  key: VariantKey | null,
): CheckResult {
  const { verdict, fraction, readAs, problem, slip, relation, value, possible, point } = check;
  return {
    verdict,
    fraction,
    readAs,
    ...(problem === undefined ? {} : { problem }),
    ...(slip === undefined ? {} : { slip }),
    relation: { ...relation },
    ...(possible === undefined ? {} : { possible }),
    ...(point === undefined ? {} : { point: { ...point, at: { ...point.at } } }),
    key: inUnitOfPart(part, key, check.keyValue),
    value: plain(value),
    proposed: part.criteria.filter((criterion) => criterion.awardedBy.includes(verdict)).map(({ id }) => id),
  };
}

/** A key as it was compared: in the part's unit, so that answer and key can be read beside each other. */
function inUnitOfPart(part: Part, key: VariantKey | null, keyValue: Check['keyValue'] | undefined): VariantKey | null {
  if (!key || part.answer.form !== 'number' || part.answer.unit === undefined || key.unit === undefined) return key;
  const value = plain(keyValue ?? null);
  return typeof value === 'number' ? { ...key, value, unit: part.answer.unit } : key;
}

function plain(value: Complex | readonly Complex[] | null): CheckResult['value'] {
  if (value === null) return null;
  if (Array.isArray(value)) return value.map((each: Complex) => simple(each));
  return simple(value as Complex);
}

function simple({ re, im }: Complex): number | { re: number; im: number } {
  return im === 0 ? re : { re, im };
}
