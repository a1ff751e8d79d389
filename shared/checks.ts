import * as z from 'zod';
import { identifier } from './primitives';
import { verdict } from './problems';

const complexValue = z.object({ re: z.number(), im: z.number() });

/** A number, a complex number, or lists of them: what a key or an answer can be. */
export const plainValue = z.union([z.number(), complexValue, z.array(z.unknown()).readonly(), z.string()]);

/** The key of one part in one variant. Never leaves the server for a student before feedback. */
export const variantKey = z.object({
  value: plainValue,
  unit: z.string().optional(),
  method: z.string(),
  dimension: z.number().int().optional(),
  outsideWeight: z.number().optional(),
  second: z.object({ method: z.string(), value: plainValue }).optional(),
  /** Decimal digits to which two methods agree; absent where one method applies. */
  agreesTo: z.number().optional(),
});
export type VariantKey = z.infer<typeof variantKey>;

/** How an answer relates to its key: a plain name ("twice the key") and the factor between them. */
export const relation = z.object({ name: z.string(), factor: z.number().optional() });
export type Relation = z.infer<typeof relation>;

/** A relation that a wrong answer may stand in, with the probability that it does so by chance. */
export const possibleRelation = relation.extend({ chance: z.number() });

/** Where a formula and its key differ: values of the variables, and what both sides come to there. */
export const differingPoint = z.object({
  at: z.record(z.string(), z.number()),
  /** Null where it is undefined. */
  answer: complexValue.nullable(),
  key: complexValue.nullable(),
});
export type DifferingPoint = z.infer<typeof differingPoint>;

/** How the server judged an answer. */
export const checkResult = z.object({
  verdict,
  /** Fraction of the part's marks, 0 to 1. */
  fraction: z.number().min(0).max(1),
  readAs: z.string(),
  /** Why it could not be read, or why it is wrong, in a sentence. */
  problem: z.string().optional(),
  /** Index of the slip that it equals. */
  slip: z.number().int().optional(),
  relation,
  /** Of a wrong answer: all relations that it may stand in; which was meant shows among many answers. */
  possible: z.array(possibleRelation).readonly().optional(),
  /** Of a formula that is not right: the first point where it differs from its key. */
  point: differingPoint.optional(),
  key: variantKey.nullable(),
  /** The answer's value as compared, in the key's unit; null where there is none. */
  value: plainValue.nullable(),
  /** Criteria that the check proposes as awarded. */
  proposed: z.array(identifier),
});
export type CheckResult = z.infer<typeof checkResult>;

/** One answer as a submission fixes it: part, text, and the digests of its worked pages. */
export const answerDigest = z.object({
  setProblemId: identifier,
  partId: identifier,
  text: z.string(),
  pages: z.array(z.object({ id: identifier, sha256: z.string() })),
});
export type AnswerDigest = z.infer<typeof answerDigest>;
