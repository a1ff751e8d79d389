import * as z from 'zod';
import type { AnswerField, FieldVariable } from './reading/reading';

/** The forms an answer can take; all but `choice` and `worked` are compared with a computed key. */
export const AnswerForm = {
  number: 'number',
  complex: 'complex',
  list: 'list',
  distribution: 'distribution',
  matrix: 'matrix',
  state: 'state',
  formula: 'formula',
  choice: 'choice',
  worked: 'worked',
} as const;
export type AnswerForm = (typeof AnswerForm)[keyof typeof AnswerForm];

/** Longest key or slip expression, in characters. */
export const longestExpression = 2000;

const expression = (what: string) =>
  z
    .string({ error: `Write the ${what} as an expression.` })
    .trim()
    .min(1, `Write the ${what}.`)
    .max(longestExpression, `The ${what} is longer than ${longestExpression} characters.`);

const fraction = (what: string) =>
  z
    .number({ error: `${what} must be a number between 0 and 1.` })
    .min(0, `${what} must not be below 0.`)
    .max(1, `${what} must not be above 1.`);

const amount = (what: string) => z.number({ error: `${what} must be a number.` }).positive(`${what} must be above 0.`);

/** How far from the key a value may lie; where several are given the widest holds. */
export const toleranceSchema = z
  .strictObject(
    {
      relative: amount('The relative tolerance')
        .max(1, 'A relative tolerance above 1 accepts almost anything.')
        .optional(),
      absolute: amount('The absolute tolerance').optional(),
      significantFigures: z
        .int('Significant figures must be a whole number.')
        .min(1, 'Significant figures must be at least 1.')
        .max(15, 'Significant figures must be at most 15.')
        .optional(),
    },
    { error: 'Give a tolerance: relative, absolute or significantFigures.' },
  )
  .refine(
    (tolerance) =>
      tolerance.relative !== undefined ||
      tolerance.absolute !== undefined ||
      tolerance.significantFigures !== undefined,
    'Give a tolerance: relative, absolute or significant figures.',
  );
export type Tolerance = z.infer<typeof toleranceSchema>;

/** An anticipated wrong answer, computed like a key. */
export const slipSchema = z.strictObject({
  name: z.string().trim().max(120, 'The name of a slip is at most 120 characters.').optional(),
  expression: expression('slip'),
  feedback: z
    .string({ error: 'Say what the student reads when this slip is found.' })
    .max(2000, 'The feedback of a slip is at most 2000 characters.'),
  fraction: fraction('The fraction of a slip'),
});
export type Slip = z.infer<typeof slipSchema>;

/** Most slips that one part may name. */
export const mostSlips = 20;

const computed = {
  key: expression('key'),
  slips: z.array(slipSchema).max(mostSlips, `A part has at most ${mostSlips} slips.`).optional(),
  followThrough: fraction('The follow-through fraction').optional(),
};

const refusedNames = new Set(['i', 'e', 'pi']);
/** The name of a formula's variable. */
export const variableName = z
  .string()
  .regex(/^[A-Za-z][A-Za-z0-9_]*$/, 'A variable is named by a letter, then letters, digits or _.')
  .max(40, 'The name of a variable is at most 40 characters.')
  .refine(
    (name) => !refusedNames.has(name) && !name.startsWith('part_'),
    'i, e, pi and part_… cannot name a variable.',
  );

const bound = z.number({ error: 'A bound of a range must be a number.' });

/** The range a formula's variable is drawn from: an open interval of reals, or whole numbers from low to high. */
export const variableRangeSchema = z.union(
  [
    z.tuple([bound, bound]).refine(([low, high]) => low < high, 'The low end of a range must lie below its high end.'),
    z
      .strictObject({ integers: z.tuple([z.int(), z.int()]) })
      .refine(({ integers: [low, high] }) => low <= high, 'The low end of a range must not lie above its high end.'),
  ],
  { error: 'A range is [low, high] or { "integers": [low, high] }, low before high.' },
);
export type VariableRange = z.infer<typeof variableRangeSchema>;

/** How a formula's variable is printed and what else stands for it, where no given of its name says so. */
const variableWritingSchema = z.strictObject({
  /** KaTeX, for example `\\bar n`. */
  symbol: z.string().trim().min(1).max(60, 'A symbol is at most 60 characters.').optional(),
  spellings: z
    .array(z.string().trim().min(1).max(30, 'A spelling is at most 30 characters.'))
    .max(12, 'A variable has at most 12 spellings.')
    .optional(),
});

const label = z
  .string()
  .trim()
  .min(1, 'Every option needs a label.')
  .max(40, 'The label of an option is at most 40 characters.')
  .regex(/^[^,;\s]+$/, 'The label of an option has no spaces, commas or semicolons.');

/** An option of a choice: its label alone, or the label with what it says. */
export const choiceOptionSchema = z.union([
  label,
  z.strictObject({ label, text: z.string().max(1000, 'The text of an option is at most 1000 characters.') }),
]);
export type ChoiceOption = z.infer<typeof choiceOptionSchema>;

const minimumFidelity = fraction('The minimum fidelity').gt(0, 'The minimum fidelity must be above 0.');

const numberAnswer = z.strictObject({
  form: z.literal('number'),
  ...computed,
  unit: z
    .string()
    .trim()
    .min(1, 'Name the unit, or leave it out.')
    .max(60, 'The unit is at most 60 characters.')
    .optional(),
  unitFraction: fraction('The fraction without unit').optional(),
  tolerance: toleranceSchema,
});

const complexAnswer = z.strictObject({
  form: z.literal('complex'),
  ...computed,
  tolerance: toleranceSchema,
  upToPhase: z.boolean({ error: 'upToPhase is true or false.' }).optional(),
});

const listAnswer = z.strictObject({ form: z.literal('list'), ...computed, tolerance: toleranceSchema });

const distributionAnswer = z.strictObject({
  form: z.literal('distribution'),
  ...computed,
  tolerance: z.strictObject(
    { totalVariation: amount('The total variation').max(1, 'A total variation is at most 1.') },
    { error: 'Give the tolerance of a distribution as totalVariation.' },
  ),
});

const matrixAnswer = z.strictObject({ form: z.literal('matrix'), ...computed, tolerance: toleranceSchema });

const stateAnswer = z.strictObject({ form: z.literal('state'), ...computed, minimumFidelity });

const formulaAnswer = z.strictObject({
  form: z.literal('formula'),
  ...computed,
  variables: z
    .record(variableName, variableRangeSchema)
    .refine((variables) => Object.keys(variables).length > 0, 'A formula needs at least one variable.')
    .refine((variables) => Object.keys(variables).length <= 12, 'A formula has at most 12 variables.'),
  symbols: z.record(variableName, variableWritingSchema).optional(),
  tolerance: toleranceSchema,
});

const choiceAnswer = z.strictObject({
  form: z.literal('choice'),
  options: z
    .array(choiceOptionSchema)
    .min(2, 'A choice needs at least two options.')
    .max(26, 'A choice has at most 26 options.'),
  correct: z.array(label, { error: 'Name the correct option.' }).min(1, 'Name the correct option.'),
  several: z.boolean({ error: 'several is true or false.' }).optional(),
});

const workedAnswer = z.strictObject({ form: z.literal('worked') });

/** The label of an option. */
export function optionLabel(option: ChoiceOption): string {
  return typeof option === 'string' ? option : option.label;
}

/** What a part expects as its answer, with key, tolerance and slips: never sent to a student. */
export const answerSpecification = z
  .discriminatedUnion(
    'form',
    [
      numberAnswer,
      complexAnswer,
      listAnswer,
      distributionAnswer,
      matrixAnswer,
      stateAnswer,
      formulaAnswer,
      choiceAnswer,
      workedAnswer,
    ],
    { error: `The form of an answer is one of ${Object.keys(AnswerForm).join(', ')}.` },
  )
  .superRefine((specification, context) => {
    if (specification.form !== 'choice') return;
    const labels = specification.options.map((option) => optionLabel(option).toLowerCase());
    if (new Set(labels).size < labels.length) {
      context.addIssue({ code: 'custom', path: ['options'], message: 'Two options have the same label.' });
    }
    for (const [index, correct] of specification.correct.entries()) {
      if (!labels.includes(correct.toLowerCase())) {
        context.addIssue({ code: 'custom', path: ['correct', index], message: `No option is labelled ${correct}.` });
      }
    }
    if (!specification.several && specification.correct.length > 1) {
      context.addIssue({
        code: 'custom',
        path: ['correct'],
        message: 'Only a choice of several has several correct options.',
      });
    }
  });
export type AnswerSpecification = z.infer<typeof answerSpecification>;

/** The specifications that carry a key. */
export type ComputedSpecification = Exclude<AnswerSpecification, { form: 'choice' | 'worked' }>;

/** Whether the part has a key that is computed. */
export function isComputed(specification: AnswerSpecification): specification is ComputedSpecification {
  return specification.form !== 'choice' && specification.form !== 'worked';
}

/** The fraction of the marks for a right value without its unit, where a part names none. */
export const defaultUnitFraction = 0.5;

/**
 * What is printed beside the answer field of a part, and with it all that the reader may know: no key, tolerance or
 * slip. Symbols and spellings of a formula's variables are its own, or else those of the problem's givens of that name.
 */
export function answerField(
  specification: AnswerSpecification,
  variables: ReadonlyMap<string, Omit<FieldVariable, 'name'>> = new Map(),
): AnswerField {
  switch (specification.form) {
    case 'number':
      return specification.unit === undefined
        ? { form: 'number', hint: 'pure number' }
        : { form: 'number', hint: 'with a unit', unit: specification.unit };
    case 'formula':
      return {
        form: 'formula',
        variables: Object.keys(specification.variables).map((name) => ({
          name,
          ...variables.get(name),
          ...specification.symbols?.[name],
        })),
      };
    case 'choice':
      return {
        form: 'choice',
        labels: specification.options.map(optionLabel),
        several: specification.several ?? false,
      };
    default:
      return { form: specification.form };
  }
}
