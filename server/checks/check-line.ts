import { answerSpecification, isComputed } from '@shared/answer-forms';
import * as z from 'zod';
import { KeyError, type GivenValue } from '../keys';
import { defaultConvention, type Convention } from '../optics/convention';
import type { Check } from './check';
import { checkAnswer } from './check-answer';
import { computePartKeys, type EarlierPart } from './compute-keys';
import { KeyProblem } from './key-value';

const complexNumber = z.object({ re: z.number(), im: z.number() });
const givenValue: z.ZodType<GivenValue> = z.union([z.number(), z.string(), complexNumber, z.array(z.unknown())]);

/** A slip in a line may leave its feedback out: nobody reads it here. */
const lenientPart = z.preprocess((part) => {
  if (typeof part !== 'object' || part === null || !('slips' in part) || !Array.isArray(part.slips)) return part;
  const slips: readonly unknown[] = part.slips;
  return {
    ...part,
    slips: slips.map((slip) => (typeof slip === 'object' && slip !== null ? { feedback: '', ...slip } : slip)),
  };
}, answerSpecification);

const checkedLine = z.object({
  part: lenientPart,
  givens: z.record(z.string(), givenValue).default({}),
  answer: z.string({ error: 'The answer is a text.' }),
  earlier: z
    .record(
      z.string().regex(/^part_[a-z]+$/, 'Earlier parts are named part_a, part_b …'),
      z.object({ key: givenValue, answer: givenValue.nullish(), right: z.boolean().default(false) }),
    )
    .default({}),
  convention: z
    .object({
      vacuumVariance: z.number().positive(),
      squeezingSign: z.union([z.literal(1), z.literal(-1)]),
      splitterPhase: z.number(),
    })
    .partial()
    .default({}),
});

/** What the check tool answers to a line. */
export type CheckedLine =
  | (Pick<Check, 'verdict' | 'fraction' | 'readAs' | 'problem' | 'slip' | 'value' | 'keyValue' | 'point'> & {
      readonly relation: string;
    })
  | { readonly error: string };

/**
 * Judges the answer in one line of the check tool; needs no database. A line that cannot be used gives an error and a
 * sentence, never an exception.
 */
export function checkLine(text: string): CheckedLine {
  let parsed: unknown;
  try {
    parsed = JSON.parse(text);
  } catch {
    // Whatever is no JSON is said to be none.
    return { error: 'This line is not JSON.' };
  }
  const line = checkedLine.safeParse(parsed);
  if (!line.success) {
    const [issue] = line.error.issues;
    const place = issue?.path.join('.') ?? '';
    return { error: `${place === '' ? '' : `${place}: `}${issue?.message ?? 'This line cannot be read.'}` };
  }
  try {
    return judge(line.data);
  } catch (error) {
    // A key that has no value, or is not of the part's kind, is the author's mistake.
    if (error instanceof KeyError || error instanceof KeyProblem) return { error: error.message };
    throw error;
  }
}

function judge({ part, givens, answer, earlier, convention }: z.infer<typeof checkedLine>): CheckedLine {
  if (part.form === 'worked') return { error: 'Worked answers are marked by people.' };
  const keys = isComputed(part)
    ? computePartKeys(part, { givens, convention: chosen(convention) }, readEarlier(earlier))
    : undefined;
  const { reading: _reading, relation, ...check } = checkAnswer({ part, text: answer, ...(keys ? { keys } : {}) });
  return { ...check, relation: relation.name };
}

function chosen(convention: { readonly [K in keyof Convention]?: Convention[K] | undefined }): Convention {
  return {
    vacuumVariance: convention.vacuumVariance ?? defaultConvention.vacuumVariance,
    squeezingSign: convention.squeezingSign ?? defaultConvention.squeezingSign,
    splitterPhase: convention.splitterPhase ?? defaultConvention.splitterPhase,
  };
}

function readEarlier(earlier: z.infer<typeof checkedLine>['earlier']): Record<string, EarlierPart> {
  return Object.fromEntries(
    Object.entries(earlier).map(([name, { key, answer, right }]) => [
      name,
      { key, right, answer: answer === null || answer === undefined ? undefined : inUnitOf(key, answer) },
    ]),
  );
}

/** An own value without a unit is one in the unit of the key, as it would be read. */
function inUnitOf(key: GivenValue, answer: GivenValue): GivenValue {
  if (typeof key !== 'string' || typeof answer !== 'number') return answer;
  const unit = key.replace(/^[\s\d.eE+-]+/, '');
  return unit === '' ? answer : `${String(answer)} ${unit}`;
}
