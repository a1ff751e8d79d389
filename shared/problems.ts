import * as z from 'zod';
import { answerSpecification } from './answer-forms';
import { convention, identifier, instant, versionNumber } from './primitives';

/** Names that a given can never have: constants of the key language. `part_…` is refused too. */
const reservedNames = new Set(['i', 'e', 'pi']);

/** The name of a given, as keys and `\val{…}` use it. */
export const givenName = z
  .string()
  .regex(/^[A-Za-z][A-Za-z0-9_]*$/, 'A name is letters, digits and _, and begins with a letter.')
  .max(30, 'A name has at most 30 characters.')
  .refine((name) => !reservedNames.has(name) && !name.startsWith('part_'), {
    error: 'i, e, pi and names that begin with part_ have a meaning of their own; choose another name.',
  });

const givenFields = {
  name: givenName,
  /** KaTeX, for example `\bar n`. */
  symbol: z.string().trim().min(1, 'Say how the given is written, for example \\bar n.').max(60),
  /** Spellings that an answer may use for it. */
  spellings: z.array(z.string().trim().min(1).max(30)).max(12).default([]),
  unit: z.string().trim().max(40).optional(),
};

const finite = z.number({ error: 'Give a number.' });

/** A quantity in the statement: fixed, drawn for each student, or derived from others. */
export const given = z.discriminatedUnion('kind', [
  z.object({
    ...givenFields,
    kind: z.literal('fixed'),
    value: finite,
    /** Decimals that are printed; without it the shortest form. */
    decimals: z.number().int().min(0).max(12).optional(),
  }),
  z.object({
    ...givenFields,
    kind: z.literal('uniform'),
    low: finite,
    high: finite,
    step: z.number({ error: 'Give a step.' }).positive('The step must be above 0.'),
  }),
  z.object({
    ...givenFields,
    kind: z.literal('choice'),
    values: z.array(finite).min(1, 'Give at least one value.').max(200, 'At most 200 values.'),
  }),
  z.object({
    ...givenFields,
    kind: z.literal('derived'),
    /** A key expression over the other givens. */
    expression: z.string().trim().min(1, 'Give an expression.').max(2000, 'At most 2,000 characters.'),
    significantFigures: z.number().int().min(1).max(12).default(4),
  }),
]);
export type Given = z.infer<typeof given>;

/** The kinds of criterion: method, accuracy, independent, follow-through. */
export const criterionKinds = ['M', 'A', 'B', 'ft'] as const;
export const criterionKind = z.enum(criterionKinds);
export type CriterionKind = z.infer<typeof criterionKind>;

/** How an answer stands to its key. */
export const verdicts = ['right', 'unit', 'follow-through', 'slip', 'wrong', 'unreadable', 'unanswered'] as const;
export const verdict = z.enum(verdicts);
export type Verdict = z.infer<typeof verdict>;

/** What earns marks in a part. It is awarded or not awarded. */
export const criterion = z.object({
  id: identifier,
  kind: criterionKind,
  /** As it is called on the bench, for example `M1`. */
  name: z.string().trim().min(1, 'Name the criterion, for example M1.').max(8, 'At most 8 characters.'),
  marks: z.number({ error: 'Give the marks.' }).min(0, 'Marks cannot be negative.').max(100, 'At most 100 marks.'),
  /** What must be there, in Markdown with formulas. */
  text: z.string().trim().min(1, 'Say what earns the marks.').max(600),
  /** For markers only. */
  guidance: z.string().max(4000).default(''),
  /** The verdicts of the check for which it is proposed as awarded. */
  awardedBy: z.array(verdict).default([]),
});
export type Criterion = z.infer<typeof criterion>;

/** The smallest thing that has marks. Its label, (a), (b) …, follows from its place. */
export const part = z.object({
  id: identifier,
  /** A few words for lists, for example `mean photons`. */
  heading: z.string().trim().max(60).default(''),
  answer: answerSpecification,
  /** Whether students may add a worked page. */
  workedPage: z.boolean().default(false),
  /** Verdicts that stand without a person. */
  standsAlone: z.array(z.enum(['right', 'unanswered'])).default([]),
  criteria: z.array(criterion).min(1, 'A part needs at least one criterion.').max(12, 'At most 12 criteria.'),
});
export type Part = z.infer<typeof part>;

/** All that a revision freezes. */
export const problemContent = z.object({
  title: z.string().trim().min(1, 'Give the problem a title.').max(120, 'At most 120 characters.'),
  /** Markdown with formulas and `\val{name}`; a line that begins with `(a)`, `(b)` … opens that part. */
  statement: z.string().max(40_000, 'At most 40,000 characters.'),
  tags: z.array(z.string().trim().min(1).max(40)).max(20).default([]),
  /** A safety line for laboratory work; it defers to local rules. */
  safety: z.string().trim().max(600).default(''),
  givens: z.array(given).max(40, 'At most 40 givens.'),
  parts: z.array(part).max(26, 'At most 26 parts.'),
  convention,
});
export type ProblemContent = z.infer<typeof problemContent>;

/** The marks of a part: the sum of its criteria. */
export function partMarks(aPart: Pick<Part, 'criteria'>): number {
  return aPart.criteria.reduce((sum, each) => sum + each.marks, 0);
}

/** The marks of a problem. */
export function problemMarks(content: Pick<ProblemContent, 'parts'>): number {
  return content.parts.reduce((sum, each) => sum + partMarks(each), 0);
}

/** The label of the part at an index: a, b, c … */
export function partLabel(index: number): string {
  return String.fromCharCode(97 + index);
}

/** The states of a problem in the bank. */
export const problemStatuses = ['draft', 'in review', 'ready', 'retired'] as const;
export const problemStatus = z.enum(problemStatuses);
export type ProblemStatus = z.infer<typeof problemStatus>;

/** A revision without its content. */
export const revisionSummary = z.object({
  id: identifier,
  number: z.number().int(),
  author: z.string(),
  reason: z.string(),
  createdAt: instant,
});

/** A problem as its list shows it. */
export const problemSummary = z.object({
  id: identifier,
  title: z.string(),
  status: problemStatus,
  author: z.string(),
  tags: z.array(z.string()),
  parts: z.number().int(),
  marks: z.number(),
  latestRevision: revisionSummary.nullable(),
  /** Whether the draft differs from the latest revision. */
  changed: z.boolean(),
  savedAt: instant,
  version: versionNumber,
});
export type ProblemSummary = z.infer<typeof problemSummary>;
