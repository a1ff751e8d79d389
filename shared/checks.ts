import * as z from 'zod';
import { identifier } from './primitives';
import { verdict } from './problems';

/** A number, a complex number, or lists of them: what a key or an answer can be. */
export const plainValue = z.union([
  z.number(),
  z.object({ re: z.number(), im: z.number() }),
  z.array(z.unknown()).readonly(),
  z.string(),
]);

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
