import * as z from 'zod';
import { answerSpecification } from './answer-forms';
import { job } from './jobs';
import { identifier, instant, setStage, versionNumber } from './primitives';
import { criterion, verdict } from './problems';
import { defineRoute } from './route';

/** How an answer stands before or after a correction. */
export const correctionStep = z.object({
  /** Null where no check could be made. */
  verdict: verdict.nullable(),
  /** For example the name of a slip. */
  relation: z.string(),
  /** The standing mark; null while the answer waits for one. */
  total: z.number().nullable(),
});
export type CorrectionStep = z.infer<typeof correctionStep>;

/** What becomes of an answer's mark. */
export const correctionDeeds = [
  'mark replaced',
  'mark given',
  'returned to the pile',
  'another look',
  'check alone',
] as const;
export const correctionDeed = z.enum(correctionDeeds);
export type CorrectionDeed = z.infer<typeof correctionDeed>;

/** An answer whose verdict or marks change. */
export const correctionChange = z.object({
  answerId: identifier,
  pileId: identifier,
  code: z.string(),
  setNumber: z.number().int(),
  /** `2 (b)`. */
  part: z.string(),
  text: z.string(),
  before: correctionStep,
  after: correctionStep,
  deed: correctionDeed,
  /** Whether a person still has to look at the mark. */
  awaitsLook: z.boolean(),
});
export type CorrectionChange = z.infer<typeof correctionChange>;

/** Changes on one page. */
export const changesPageSize = 50;

export const correctionState = z.enum(['proposed', 'confirmed', 'made', 'withdrawn']);
export type CorrectionState = z.infer<typeof correctionState>;

/** How many answers meet with what. */
export const correctionCounts = z.object({
  changed: z.number().int(),
  replaced: z.number().int(),
  given: z.number().int(),
  returned: z.number().int(),
  look: z.number().int(),
  alone: z.number().int(),
});
export type CorrectionCounts = z.infer<typeof correctionCounts>;

/** A set in which the revision was answered. */
const correctedSet = z.object({ setId: identifier, number: z.number().int(), title: z.string(), stage: setStage });

/** A correction of a revision that was answered. */
export const correction = z.object({
  id: identifier,
  courseId: identifier,
  pileId: identifier,
  /** `Set 4, 2 (b)`. */
  place: z.string(),
  problemTitle: z.string(),
  revision: z.number().int(),
  state: correctionState,
  reason: z.string(),
  note: z.string(),
  by: z.string(),
  createdAt: instant,
  madeAt: instant.nullable(),
  before: answerSpecification,
  after: answerSpecification,
  sets: z.array(correctedSet),
  /** Sets of courses that the person does not lead: nothing changes there. */
  setsElsewhere: z.number().int(),
  /** The job that runs for it, or ran last. */
  job: job.nullable(),
  /** Null until all scripts were looked at. */
  counts: correctionCounts.nullable(),
  version: versionNumber,
});
export type Correction = z.infer<typeof correction>;

/** A pattern of a pile as a slip: what the answers of the group are, written as an expression. */
export const patternSlip = z.object({ name: z.string(), expression: z.string(), answers: z.number().int() });
export type PatternSlip = z.infer<typeof patternSlip>;

/** What a lead begins a correction with: the part as it is checked at present. */
export const correctablePart = z.object({
  courseId: identifier,
  pileId: identifier,
  place: z.string(),
  problemTitle: z.string(),
  revision: z.number().int(),
  /** KaTeX and Markdown. */
  heading: z.string(),
  answer: answerSpecification,
  criteria: z.array(criterion),
  /** The chosen pattern as a slip; null where none was chosen, or it is none of a kind that can be computed. */
  slip: patternSlip.nullable(),
  /** Why the chosen pattern cannot be written as an expression. */
  noSlip: z.string().nullable(),
  /** Corrections of this part, the newest first. */
  corrections: z.array(
    z.object({
      id: identifier,
      state: correctionState,
      reason: z.string(),
      by: z.string(),
      createdAt: instant,
      madeAt: instant.nullable(),
    }),
  ),
});
export type CorrectablePart = z.infer<typeof correctablePart>;

const pileParams = z.object({ pileId: identifier });
const params = z.object({ correctionId: identifier });

export const correctionRoutes = {
  correctablePart: defineRoute({
    method: 'GET',
    path: '/piles/:pileId/correctable-part',
    summary: 'A part as it is checked, to be corrected; with a pattern, that pattern as a slip',
    params: pileParams,
    query: z.object({ pattern: z.string().max(300).optional() }),
    response: correctablePart,
  }),
  proposeCorrection: defineRoute({
    method: 'POST',
    path: '/piles/:pileId/corrections',
    summary: 'Propose a correction of key, tolerance or slips; a job looks what would change',
    params: pileParams,
    body: z.object({
      answer: answerSpecification,
      reason: z
        .string({ error: 'Say why, for the record.' })
        .trim()
        .min(1, 'Say why, for the record.')
        .max(600, 'At most 600 characters.'),
      note: z
        .string({ error: 'Say what students read about it.' })
        .trim()
        .min(1, 'Say what students read about it.')
        .max(600, 'At most 600 characters.'),
    }),
    response: correction,
    idempotent: true,
  }),
  correction: defineRoute({
    method: 'GET',
    path: '/corrections/:correctionId',
    summary: 'A correction, and how far it is',
    params,
    response: correction,
  }),
  correctionChanges: defineRoute({
    method: 'GET',
    path: '/corrections/:correctionId/changes',
    summary: 'The answers that it changes, marks before and after, a page at a time',
    params,
    query: z.object({ page: z.coerce.number().int().min(1).default(1) }),
    response: z.object({ items: z.array(correctionChange), total: z.number().int() }),
  }),
  confirmCorrection: defineRoute({
    method: 'POST',
    path: '/corrections/:correctionId/confirmation',
    summary: 'Confirm a correction after its changes were seen; a job makes it, whole or not at all',
    params,
    response: correction,
    status: 200,
    versioned: true,
  }),
  withdrawCorrection: defineRoute({
    method: 'POST',
    path: '/corrections/:correctionId/withdrawal',
    summary: 'Withdraw a correction that was not confirmed',
    params,
    response: correction,
    status: 200,
    versioned: true,
  }),
  markStands: defineRoute({
    method: 'POST',
    path: '/corrections/:correctionId/answers/:answerId/mark-stands',
    summary: 'Say that a mark which a person gave stands after another look',
    params: params.extend({ answerId: identifier }),
  }),
};
