import {
  answerField,
  defaultUnitFraction,
  type AnswerSpecification,
  type ComputedSpecification,
} from '@shared/answer-forms';
import { readAnswer } from '@shared/reading/read-answer';
import type { AnswerField, Reading } from '@shared/reading/reading';
import type { Check } from './check';
import { checkChoice } from './check-choice';
import { compareWithKey, compareWithSlip } from './compare';
import { KeyProblem, type ComputedKey } from './key-value';
import { matched, type Match } from './match';
import { certain, possibleRelations } from './possible-relations';
import { relationOf, type OtherKey } from './relation-of';
import { equalRelation, noRelation, throughRelation, type Relation } from './relation';

/** The key of a part and what belongs to it, computed for one variant. */
export interface PartKeys {
  readonly key: ComputedKey;
  /** In the order of the part's slips; undefined where one could not be computed. */
  readonly slips?: readonly (ComputedKey | undefined)[];
  /** The same recomputed from the student's own earlier answers; absent where the key uses none or one is missing. */
  readonly own?: {
    readonly key?: ComputedKey | undefined;
    readonly slips?: readonly (ComputedKey | undefined)[];
    /** Whether every earlier answer that the key uses was judged right. */
    readonly earlierRight: boolean;
  };
  /** Keys of the problem's other parts, to recognise an answer in the wrong place. */
  readonly others?: readonly OtherKey[];
}

export interface CheckInput<Part extends AnswerSpecification = Exclude<AnswerSpecification, { form: 'worked' }>> {
  readonly part: Part;
  /** Not needed for a choice, whose key is in its specification. */
  readonly keys?: PartKeys;
  readonly text: string;
  /** The printed hint, where it is more than the specification says (symbols of a formula's variables). */
  readonly field?: AnswerField;
}

type Ruling = Pick<Check, 'verdict' | 'fraction'> & { readonly slip?: number; readonly relation?: Relation };

/** Slips in their order against values; undefined where none matches. */
function matchingSlip(
  reading: Reading,
  part: ComputedSpecification,
  values: readonly (ComputedKey | undefined)[] | undefined,
): { readonly index: number; readonly match: Match } | undefined {
  for (const [index, value] of (values ?? []).entries()) {
    if (value === undefined || part.slips?.[index] === undefined) continue;
    const match = quietly(() => compareWithSlip(reading, value, part));
    if (match.same) return { index, match };
  }
  return undefined;
}

/** A slip or a recomputed key of the wrong kind matches nothing; only the key itself must be of the right kind. */
function quietly(compare: () => Match): Match {
  try {
    return compare();
  } catch (error) {
    if (error instanceof KeyProblem) return matched(false);
    throw error;
  }
}

/** The order of trial: right, unit, follow-through, slips with the keys of earlier parts, slips with own answers. */
function rule(reading: Reading, part: ComputedSpecification, keys: PartKeys, match: Match): Ruling {
  const unitFraction = part.form === 'number' ? (part.unitFraction ?? defaultUnitFraction) : defaultUnitFraction;
  const full = (missingUnit: boolean): Ruling =>
    missingUnit ? { verdict: 'unit', fraction: unitFraction } : { verdict: 'right', fraction: 1 };
  // Without its unit an answer never earns more by a mistake than it would by being right.
  const capped = (fraction: number, missingUnit: boolean) =>
    missingUnit ? Math.min(fraction, unitFraction) : fraction;
  if (match.same) return { ...full(match.missingUnit), relation: equalRelation };
  const own = keys.own;
  const ownKey = own?.key;
  const through = ownKey === undefined ? matched(false) : quietly(() => compareWithKey(reading, ownKey, part));
  const relation = throughRelation;
  if (through.same && own?.earlierRight) return { ...full(through.missingUnit), relation };
  if (through.same && part.followThrough !== undefined) {
    return { verdict: 'follow-through', fraction: capped(part.followThrough, through.missingUnit), relation };
  }
  const slip = matchingSlip(reading, part, keys.slips) ?? matchingSlip(reading, part, own?.slips);
  const named = slip && part.slips?.[slip.index];
  if (slip && named) {
    return {
      verdict: 'slip',
      fraction: capped(named.fraction, slip.match.missingUnit),
      slip: slip.index,
      relation: { name: named.name ? `slip: ${named.name}` : `slip ${slip.index + 1}` },
    };
  }
  return { verdict: 'wrong', fraction: 0, ...(through.same ? { relation } : {}) };
}

const nothing = { value: null, keyValue: null, relation: noRelation } as const;

/**
 * Judges an answer against keys that were computed before. Reads it under the printed hint alone, then tries, in this
 * order: right, unit, follow-through, slips. Throws a KeyProblem where the key is not of the part's kind.
 */
export function checkAnswer({ part, keys, text, field = answerField(part) }: CheckInput): Check {
  const reading = readAnswer(text, field);
  if (reading.kind === 'empty') return { verdict: 'unanswered', fraction: 0, readAs: '', reading, ...nothing };
  if (reading.kind === 'question' || reading.kind === 'unreadable') {
    const problem = reading.kind === 'question' ? reading.question : reading.problem;
    return { verdict: 'unreadable', fraction: 0, readAs: '', problem, reading, ...nothing };
  }
  if (part.form === 'choice') return checkChoice(reading, part);
  if (!keys) throw new KeyProblem('The part has no computed key.');
  const match = compareWithKey(reading, keys.key, part);
  const { relation, ...ruling } = rule(reading, part, keys, match);
  const possible = ruling.verdict === 'wrong' ? possibleRelations(reading, part, keys, match) : undefined;
  return {
    ...ruling,
    readAs: reading.readAs,
    reading,
    value: match.answer ?? null,
    keyValue: match.key ?? null,
    relation: relation ?? relationOf(reading, part, keys, match),
    ...(possible ? { possible: relation ? [{ ...relation, chance: certain }] : possible } : {}),
    ...(ruling.verdict === 'wrong' && match.reason !== undefined ? { problem: match.reason } : {}),
    ...(ruling.verdict !== 'right' && match.point ? { point: match.point } : {}),
  };
}
