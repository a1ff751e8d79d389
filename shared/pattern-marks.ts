import * as z from 'zod';
import { held, longestRemark, markedCriterion } from './marking';
import { identifier, versionNumber } from './primitives';
import { defineRoute } from './route';

const named = z.object({ answerId: identifier, code: z.string() });

/** What applying a mark to the pattern of an answer in hand would do. */
export const patternPreview = z.object({
  /** The pattern's name. */
  name: z.string(),
  /** Why nothing can be applied, in a sentence; null where it can. */
  refused: z.string().nullable(),
  /** The free, unmarked answers that it would mark, in pattern order. */
  marks: z.array(named.extend({ version: versionNumber })),
  /** Those that somebody must look at: they have worked pages, and a method that the check does not decide. */
  needPerson: z.array(named),
  /** The names of the criteria for which they must. */
  openCriteria: z.array(z.string()),
  /** Those that colleagues hold. */
  held: z.array(named),
});
export type PatternPreview = z.infer<typeof patternPreview>;

/** What became of it. */
export const patternOutcome = z.object({
  applicationId: identifier,
  marked: z.array(named),
  /** Those of the preview that changed, or were taken by colleagues, meanwhile. */
  skipped: z.array(named),
  /** What the bench holds now. */
  held,
  sequence: z.number().int(),
});
export type PatternOutcome = z.infer<typeof patternOutcome>;

/** What taking it back came to. */
export const patternUndone = z.object({
  /** Those that wait again, as before. */
  restored: z.array(named),
  /** Those that somebody changed, or holds, since: they are left as they are. */
  kept: z.array(named),
  sequence: z.number().int(),
});
export type PatternUndone = z.infer<typeof patternUndone>;

/** Most answers that one application marks. */
export const mostApplied = 2000;

const answerParams = z.object({ answerId: identifier });

export const patternMarkRoutes = {
  preview: defineRoute({
    method: 'GET',
    path: '/answers/:answerId/pattern',
    summary: 'The answers that a mark applied to the pattern of this answer would reach, and those it would not',
    params: answerParams,
    response: patternPreview,
  }),
  apply: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/pattern-marks',
    summary:
      'Mark free answers of the pattern of an answer in hand alike, as the preview named them; method marks stay as the check proposes them',
    params: answerParams,
    body: z.object({
      benchId: identifier,
      criteria: z.array(markedCriterion).max(12),
      remark: z.string().trim().max(longestRemark, 'A remark has at most 4,000 characters.').default(''),
      answers: z
        .array(z.object({ answerId: identifier, version: versionNumber }))
        .min(1, 'Name the answers that are to be marked.')
        .max(mostApplied),
    }),
    response: patternOutcome,
    idempotent: true,
  }),
  undo: defineRoute({
    method: 'POST',
    path: '/pattern-applications/:applicationId/undo',
    summary: 'Take back every mark of an application that still stands as it was given; its answers wait again',
    params: z.object({ applicationId: identifier }),
    body: z.object({ benchId: identifier }),
    response: patternUndone,
    status: 200,
  }),
};
