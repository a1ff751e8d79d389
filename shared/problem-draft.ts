import * as z from 'zod';
import { AnswerForm } from './answer-forms';
import { convention, identifier, type Convention } from './primitives';
import { criterionKind, verdict } from './problems';

/*
 * A draft is what an author is typing: any text in any field, so that nothing typed is ever lost. Its shape follows
 * `problemContent` name by name, so that a fault of the one is at the same path in the other; numbers are texts, and
 * fields of kinds and forms that are not chosen at the moment are kept. `read-draft.ts` makes content of it.
 */

const typed = (most: number) =>
  z
    .string()
    .max(most, `At most ${most.toLocaleString('en')} characters.`)
    .default('');
const short = typed(400);
const long = typed(8000);

/** A given as it is typed. */
export const draftGiven = z.object({
  name: short,
  symbol: short,
  /** Separated by commas. */
  spellings: short,
  unit: short,
  kind: z.enum(['fixed', 'uniform', 'choice', 'derived']),
  value: short,
  low: short,
  high: short,
  step: short,
  /** Separated by semicolons or commas. */
  values: long,
  expression: long,
  significantFigures: short,
});
export type DraftGiven = z.infer<typeof draftGiven>;

/** A slip as it is typed. */
export const draftSlip = z.object({ name: short, expression: long, feedback: long, fraction: short });
export type DraftSlip = z.infer<typeof draftSlip>;

/** A formula's variable as it is typed. */
export const draftVariable = z.object({
  name: short,
  low: short,
  high: short,
  integers: z.boolean(),
  /** KaTeX; empty where the given of that name, or the name itself, says it. */
  symbol: short,
  /** Separated by commas. */
  spellings: short,
});
export type DraftVariable = z.infer<typeof draftVariable>;

/** An option of a choice as it is typed. */
export const draftOption = z.object({ label: short, text: long, correct: z.boolean() });
export type DraftOption = z.infer<typeof draftOption>;

/** What a part expects, as it is typed. */
export const draftAnswer = z.object({
  form: z.enum(AnswerForm),
  key: long,
  unit: short,
  unitFraction: short,
  tolerance: z.object({ relative: short, absolute: short, significantFigures: short, totalVariation: short }),
  minimumFidelity: short,
  upToPhase: z.boolean().default(false),
  variables: z.array(draftVariable).max(40),
  options: z.array(draftOption).max(60),
  several: z.boolean().default(false),
  slips: z.array(draftSlip).max(40),
  followThrough: short,
});
export type DraftAnswer = z.infer<typeof draftAnswer>;

/** A criterion as it is typed. */
export const draftCriterion = z.object({
  id: identifier,
  kind: criterionKind,
  name: short,
  marks: short,
  text: long,
  guidance: long,
  awardedBy: z.array(verdict),
});
export type DraftCriterion = z.infer<typeof draftCriterion>;

/** A part as it is typed. */
export const draftPart = z.object({
  id: identifier,
  heading: short,
  answer: draftAnswer,
  workedPage: z.boolean(),
  standsAlone: z.array(z.enum(['right', 'unanswered'])),
  criteria: z.array(draftCriterion).max(30, 'At most 30 criteria.'),
});
export type DraftPart = z.infer<typeof draftPart>;

/** A problem as it is typed. */
export const problemDraft = z.object({
  title: short,
  statement: typed(60_000),
  /** Separated by commas. */
  tags: typed(1000),
  safety: long,
  givens: z.array(draftGiven).max(60, 'At most 60 givens.'),
  parts: z.array(draftPart).max(26, 'At most 26 parts: there are no letters for more.'),
  convention,
});
export type ProblemDraft = z.infer<typeof problemDraft>;

/** A given of which nothing has been typed but, perhaps, the name. */
export function emptyGiven(name = ''): DraftGiven {
  return {
    name,
    symbol: name,
    spellings: '',
    unit: '',
    kind: 'uniform',
    value: '',
    low: '',
    high: '',
    step: '',
    values: '',
    expression: '',
    significantFigures: '4',
  };
}

/** A slip of which nothing has been typed. */
export function emptySlip(): DraftSlip {
  return { name: '', expression: '', feedback: '', fraction: '0' };
}

/** A variable of a formula of which nothing has been typed. */
export function emptyVariable(): DraftVariable {
  return { name: '', low: '', high: '', integers: false, symbol: '', spellings: '' };
}

/** An option of a choice of which only the label is there. */
export function emptyOption(label: string): DraftOption {
  return { label, text: '', correct: false };
}

/** A criterion of which only kind and name are there; for accuracy marks the check's `right` is proposed. */
export function emptyCriterion(id: string, kind: DraftCriterion['kind'], name: string): DraftCriterion {
  const awardedBy: DraftCriterion['awardedBy'] =
    kind === 'A' ? ['right', 'follow-through'] : kind === 'ft' ? ['follow-through'] : [];
  return { id, kind, name, marks: '1', text: '', guidance: '', awardedBy };
}

/** What a new part expects: a number, right within one per cent. */
export function emptyAnswer(): DraftAnswer {
  return {
    form: AnswerForm.number,
    key: '',
    unit: '',
    unitFraction: '',
    tolerance: { relative: '1%', absolute: '', significantFigures: '', totalVariation: '' },
    minimumFidelity: '',
    upToPhase: false,
    variables: [],
    options: [],
    several: false,
    slips: [],
    followThrough: '',
  };
}

/** A new part with one accuracy mark. */
export function emptyPart(id: string, criterionId: string): DraftPart {
  return {
    id,
    heading: '',
    answer: emptyAnswer(),
    workedPage: false,
    standsAlone: ['right', 'unanswered'],
    criteria: [{ ...emptyCriterion(criterionId, 'A', 'A1'), text: 'The right value.' }],
  };
}

/** A new problem: nothing but the convention of the course in which it is begun. */
export function emptyDraft(title: string, itsConvention: Convention): ProblemDraft {
  return { title, statement: '', tags: '', safety: '', givens: [], parts: [], convention: itsConvention };
}
