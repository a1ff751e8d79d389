import * as z from 'zod';
import { identifier, instant, listOf } from './primitives';
import { problemDetail } from './problem-routes';
import { defineRoute } from './route';

/** Whatever else is typed, a comment is words. */
const words = (missing: string) =>
  z.string({ error: missing }).trim().min(1, missing).max(4000, 'At most 4,000 characters.');

/** What a comment is about. */
export const commentAnchor = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('problem') }),
  z.object({
    kind: z.literal('line'),
    /** From 1, in the statement of the draft. */
    line: z.number().int().min(1).max(5000),
    /** The line as it read when the comment was written. */
    text: z.string().max(60_000),
  }),
  z.object({ kind: z.literal('part'), partId: identifier }),
  z.object({ kind: z.literal('key'), partId: identifier }),
  z.object({ kind: z.literal('criterion'), partId: identifier, criterionId: identifier }),
]);
export type CommentAnchor = z.infer<typeof commentAnchor>;

/** A colleague, as review names them. */
export const reviewer = z.object({ id: identifier, name: z.string() });

/** An answer to a comment. */
export const commentReply = z.object({ id: identifier, by: reviewer, at: instant, text: z.string() });

/** Wording that takes the place of the line, or of the part's text, once the author accepts it. */
export const suggestedWording = z.object({
  wording: z.string(),
  /** What it takes the place of; where that reads otherwise by now, the suggestion cannot be accepted. */
  instead: z.string(),
  accepted: z.object({ by: reviewer, at: instant }).nullable(),
});

/** A comment with its replies, oldest first. */
export const problemComment = z.object({
  id: identifier,
  anchor: commentAnchor,
  by: reviewer,
  at: instant,
  text: z.string(),
  suggestion: suggestedWording.nullable(),
  settled: z.object({ by: reviewer, at: instant }).nullable(),
  replies: z.array(commentReply),
});
export type ProblemComment = z.infer<typeof problemComment>;

/** Somebody who was asked to review, and what they decided since. */
export const reviewRequest = z.object({
  id: identifier,
  colleague: reviewer,
  askedBy: reviewer,
  at: instant,
  dueAt: instant,
  note: z.string(),
  answeredAt: instant.nullable(),
});
export type ReviewRequest = z.infer<typeof reviewRequest>;

/** What can be decided about a revision. */
export const reviewDecisionKinds = ['signed off', 'changes asked', 'overruled'] as const;

/** A decision about a revision; it stays for ever. */
export const reviewDecision = z.object({
  id: identifier,
  revision: z.number().int(),
  kind: z.enum(reviewDecisionKinds),
  by: reviewer,
  at: instant,
  words: z.string(),
});
export type ReviewDecision = z.infer<typeof reviewDecision>;

/** Whether the latest revision may be used, as far as colleagues are concerned. */
export const signOffStanding = z.object({
  state: z.enum(['no revision', 'needed', 'changes asked', 'void', 'signed off', 'overruled']),
  sentence: z.string(),
  /** The revision that was signed off or overruled last; null where none was. */
  lastRevision: z.number().int().nullable(),
  /** What has changed since then that needs a fresh sign-off, for example `the key of (b)`. */
  changed: z.array(z.string()),
});
export type SignOffStanding = z.infer<typeof signOffStanding>;

/** All that colleagues have said about a problem. */
export const problemReview = z.object({
  /** The statement of the saved draft: numbers of lines are of it. */
  statement: z.string(),
  comments: z.array(problemComment),
  requests: z.array(reviewRequest),
  /** Newest first. */
  decisions: z.array(reviewDecision),
  standing: signOffStanding,
  /** Whether the person who asks may decide about the latest revision; otherwise `whyNot` says why. */
  mayDecide: z.boolean(),
  whyNot: z.string(),
});
export type ProblemReview = z.infer<typeof problemReview>;

const problemParams = z.object({ problemId: identifier });
const commentParams = problemParams.extend({ commentId: identifier });
const aRevision = z.number().int().min(1);

export const reviewRoutes = {
  review: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/review',
    summary: 'Comments, who was asked, decisions, and whether the latest revision is signed off',
    params: problemParams,
    response: problemReview,
  }),
  colleagues: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/colleagues',
    summary: 'Who can be asked to review: leads, and markers of one’s own courses; never a student who may meet it',
    params: problemParams,
    response: listOf(reviewer.extend({ role: z.enum(['lead', 'marker']) })),
  }),
  comment: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/comments',
    summary: 'Comment on a line, a part, a key or a criterion, with suggested wording where that is wanted',
    params: problemParams,
    body: z.object({
      anchor: commentAnchor,
      text: z.string().trim().max(4000, 'At most 4,000 characters.').default(''),
      /** Instead of the line, or of the text of the part. */
      wording: z.string().max(10_000, 'At most 10,000 characters.').optional(),
    }),
    response: problemComment,
    idempotent: true,
  }),
  reply: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/comments/:commentId/replies',
    summary: 'Answer a comment',
    params: commentParams,
    body: z.object({ text: words('Write an answer.') }),
    response: commentReply,
    idempotent: true,
  }),
  settleComment: defineRoute({
    method: 'PUT',
    path: '/problems/:problemId/comments/:commentId/settled',
    summary: 'Settle a comment, or open it again',
    params: commentParams,
    body: z.object({ settled: z.boolean() }),
    response: problemComment,
  }),
  acceptWording: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/comments/:commentId/acceptance',
    summary: 'Put suggested wording into the draft, and settle the comment',
    params: commentParams,
    body: z.object({}),
    response: problemDetail,
    status: 200,
    versioned: true,
  }),
  askForReview: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/review-requests',
    summary: 'Ask colleagues to review the latest revision by a date; a draft becomes visible to the team',
    params: problemParams,
    body: z.object({
      colleagueIds: z.array(identifier).min(1, 'Choose at least one colleague.').max(20, 'At most 20 colleagues.'),
      dueAt: z.number({ error: 'Give a date.' }).int(),
      note: z.string().trim().max(1000, 'At most 1,000 characters.').default(''),
    }),
    response: problemReview,
  }),
  decide: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/decisions',
    summary: 'Sign off the latest revision, or ask for changes',
    params: problemParams,
    body: z
      .object({
        /** The revision that was read; refused when there is a later one. */
        revision: aRevision,
        kind: z.enum(['signed off', 'changes asked']),
        words: z.string().trim().max(4000, 'At most 4,000 characters.').default(''),
      })
      .refine(({ kind, words: said }) => kind === 'signed off' || said !== '', {
        path: ['words'],
        error: 'Say what should change.',
      }),
    response: problemReview,
  }),
  overrule: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/overruling',
    summary: 'Let the latest revision be used without a sign-off, with a reason that enters the record',
    params: problemParams,
    body: z.object({
      revision: aRevision,
      reason: words('Give the reason.'),
      /** The course that goes on without a sign-off, and in whose record the reason stands. */
      courseId: identifier,
    }),
    response: problemReview,
  }),
};
