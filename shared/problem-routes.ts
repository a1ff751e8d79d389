import * as z from 'zod';
import { plainValue } from './checks';
import { identifier, listOf } from './primitives';
import { fieldProblem } from './problem-details';
import { problemDraft } from './problem-draft';
import { problemContent, problemStatus, problemSummary, revisionSummary } from './problems';
import { defineRoute } from './route';
import { givenValues } from './variants';

/** A problem with all that its page needs. */
export const problemDetail = problemSummary.extend({
  draft: problemDraft,
  /** Whether the person who asks wrote it. */
  mine: z.boolean(),
  /** The states that the person who asks can put it in. */
  nextStatuses: z.array(problemStatus),
});
export type ProblemDetail = z.infer<typeof problemDetail>;

/** A revision with its content. */
export const revisionDetail = revisionSummary.extend({ content: problemContent });
export type RevisionDetail = z.infer<typeof revisionDetail>;

/** Why an expression has no value, and at which character. */
export const keyFault = fieldProblem.omit({ path: true });

/** What an expression came to in one variant. */
export const sampledKey = z.union([
  z.object({
    /** Of a state or a formula in words. */
    value: plainValue,
    /** A state or a formula in KaTeX. */
    typeset: z.string().optional(),
    /** A formula's value at one of the points where it is compared, with the point. */
    example: z.string().optional(),
    unit: z.string().optional(),
    method: z.string(),
    dimension: z.number().int().optional(),
    outsideWeight: z.number().optional(),
    second: z.object({ method: z.string(), value: plainValue }).optional(),
    agreesTo: z.number().optional(),
    /** Of a slip: whether it would pass as right; absent where that is not known. */
    passes: z.boolean().optional(),
  }),
  z.object({ fault: keyFault }),
]);
export type SampledKey = z.infer<typeof sampledKey>;

/** One part in one sample variant; the key is null where the part has none, or none is written yet. */
export const sampledPart = z.object({ key: sampledKey.nullable(), slips: z.array(sampledKey) });
export type SampledPart = z.infer<typeof sampledPart>;

/** One sample variant. */
export const sampledVariant = z.object({
  /** From 1; null where the variants are too many to be numbered. */
  number: z.number().int().nullable(),
  givens: givenValues,
  parts: z.array(sampledPart),
});
export type SampledVariant = z.infer<typeof sampledVariant>;

/** Sample variants of a draft. */
export const problemSample = z.object({
  /** How many variants there are; null where they are too many to be numbered. */
  count: z.number().int().nullable(),
  /** In the order of their numbers. */
  variants: z.array(sampledVariant),
  /** What is wrong with the draft, givens that cannot be derived included; keys carry their own faults. */
  faults: z.array(fieldProblem),
});
export type ProblemSample = z.infer<typeof problemSample>;

const problemParams = z.object({ problemId: identifier });
const begun = z.object({
  /** The course whose convention the problem is written under. */
  courseId: identifier,
});

/** Problems on one page of the list. */
export const problemPageSize = 50;

/** Most sample variants at once. */
export const mostSamples = 12;

export const problemRoutes = {
  problems: defineRoute({
    method: 'GET',
    path: '/problems',
    summary: 'The bank, with one’s own drafts; newest change first',
    query: z.object({
      /** Words that must all stand in title, tags, statement or the author’s name. */
      search: z.string().trim().max(100).default(''),
      status: problemStatus.optional(),
      page: z.coerce.number().int().min(1).default(1),
    }),
    response: listOf(problemSummary),
  }),
  beginProblem: defineRoute({
    method: 'POST',
    path: '/problems',
    summary: 'Begin a problem',
    body: begun.extend({
      title: z.string({ error: 'Give the problem a title.' }).trim().min(1, 'Give the problem a title.').max(120),
    }),
    response: problemDetail,
  }),
  importProblem: defineRoute({
    method: 'POST',
    path: '/problems/import',
    summary: 'Begin a problem with the content of a problem file',
    body: z.object({ text: z.string({ error: 'Choose a file.' }).min(1, 'The file is empty.').max(300_000) }),
    response: problemDetail,
  }),
  sampleProblem: defineRoute({
    method: 'POST',
    path: '/problems/sample',
    summary: 'Sample variants of a draft that need not be saved, with their keys and slips, or what is wrong with them',
    body: z.object({
      draft: problemDraft,
      count: z.number().int().min(1).max(mostSamples).default(5),
      /** The number of a variant that is to be among them. */
      shown: z.number().int().min(1).optional(),
      /** Other text, other variants. */
      seed: z.string().max(100).default(''),
    }),
    response: problemSample,
    status: 200,
  }),
  problem: defineRoute({
    method: 'GET',
    path: '/problems/:problemId',
    summary: 'A problem with its draft',
    params: problemParams,
    response: problemDetail,
  }),
  saveDraft: defineRoute({
    method: 'PUT',
    path: '/problems/:problemId/draft',
    summary: 'Save the draft as it is typed',
    params: problemParams,
    body: problemDraft,
    response: problemDetail,
    versioned: true,
  }),
  makeRevision: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/revisions',
    summary: 'Make a revision of the saved draft; refused while anything in it is wrong',
    params: problemParams,
    body: z.object({
      reason: z
        .string({ error: 'Say what is new in a few words.' })
        .trim()
        .min(1, 'Say what is new in a few words.')
        .max(300, 'At most 300 characters.'),
    }),
    response: problemDetail,
    versioned: true,
  }),
  revisions: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/revisions',
    summary: 'The revisions of a problem, newest first',
    params: problemParams,
    response: listOf(revisionSummary),
  }),
  revision: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/revisions/:number',
    summary: 'A revision with its content',
    params: problemParams.extend({ number: z.coerce.number().int().min(1) }),
    response: revisionDetail,
  }),
  setProblemStatus: defineRoute({
    method: 'PUT',
    path: '/problems/:problemId/status',
    summary: 'Hand over for review, mark ready, retire or bring back',
    params: problemParams,
    body: z.object({ status: problemStatus }),
    response: problemDetail,
    versioned: true,
  }),
  copyProblem: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/copies',
    summary: 'Begin a problem with the draft of another',
    params: problemParams,
    response: problemDetail,
  }),
  problemFile: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/file',
    summary: 'The draft, where nothing in it is wrong, or else the latest revision, as a problem file',
    params: problemParams,
    response: z.object({ name: z.string(), text: z.string() }),
  }),
};
