import * as z from 'zod';
import { plainValue } from './checks';
import { deduction } from './late-rule';
import { printedGiven, workedPage } from './marking';
import { identifier, instant, setStage, versionNumber } from './primitives';
import { criterionKind, verdict } from './problems';
import { defineRoute } from './route';

/** How long a release can be taken back, and its letters wait, in milliseconds. */
export const releaseCanBeTakenBack = 10 * 60_000;

/** One thing to be looked at before a release. */
export const readinessItem = z.object({
  name: z.enum(['closed', 'still open', 'handed in', 'marked', 'set aside', 'another look']),
  ready: z.boolean(),
  /** What is so, or what is to be done. */
  sentence: z.string(),
  /** Piles that hold what is missing. */
  piles: z.array(z.object({ id: identifier, name: z.string(), missing: z.number().int() })),
});
export type ReadinessItem = z.infer<typeof readinessItem>;

/** The release of a set: what it would do, or what it did. */
export const release = z.object({
  setId: identifier,
  courseId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  stages: z.array(z.object({ stage: setStage, at: instant })),
  version: versionNumber,
  /** Students who get marks. */
  students: z.number().int(),
  parts: z.number().int(),
  answers: z.number().int(),
  readiness: z.array(readinessItem),
  ready: z.boolean(),
  /** Students who still have time; null where there are none. A release waits for the last, or leaves them out. */
  stillOpen: z
    .object({
      students: z.number().int(),
      /** When the last of them closes. */
      until: instant,
      /** Whether all else is in order, so that it can be released to the others. */
      othersReady: z.boolean(),
    })
    .nullable(),
  /** Students who have their marks already, since others still had time. */
  releasedBefore: z.number().int(),
  showKeys: z.boolean(),
  /** The totals that go out, the lowest first. */
  totals: z.array(z.number()),
  outOf: z.number(),
  /** The letter as it goes out, or as it would. */
  letter: z.object({ subject: z.string(), text: z.string() }),
  releasedAt: instant.nullable(),
  /** Until when a release can be taken back; null where there is nothing to take back. */
  takeBackUntil: instant.nullable(),
});
export type Release = z.infer<typeof release>;

/** A set with feedback, as a student's list shows it. */
export const feedbackSummary = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  releasedAt: instant,
  total: z.number(),
  outOf: z.number(),
});
export type FeedbackSummary = z.infer<typeof feedbackSummary>;

/** A criterion as the student reads it. */
export const feedbackCriterion = z.object({
  id: identifier,
  kind: criterionKind,
  name: z.string(),
  text: z.string(),
  marks: z.number(),
  awarded: z.boolean(),
});

/** One part of a student's feedback. */
export const feedbackPart = z.object({
  partId: identifier,
  label: z.string(),
  /** The part's own text, Markdown. */
  text: z.string(),
  answer: z.string(),
  readAs: z.string(),
  verdict: verdict.nullable(),
  /** How the answer stands to the key; only where keys are shown. */
  relation: z.string().nullable(),
  /** Why it could not be read, or is wrong. */
  problem: z.string().nullable(),
  /** Only where keys are shown. */
  key: z
    .object({
      value: plainValue,
      unit: z.string().nullable(),
      band: z.object({ low: z.number(), high: z.number() }).nullable(),
      /** The answer as compared. */
      answer: plainValue.nullable(),
    })
    .nullable(),
  /** The slip that the answer equals. */
  slip: z.object({ name: z.string().nullable(), feedback: z.string() }).nullable(),
  criteria: z.array(feedbackCriterion),
  remark: z.string(),
  /** What was corrected in how the part is checked after it was handed in, and what that did to its marks. */
  corrections: z.array(z.object({ at: instant, sentence: z.string() })),
  total: z.number(),
  outOf: z.number(),
  pages: z.array(workedPage),
});
export type FeedbackPart = z.infer<typeof feedbackPart>;

/** A student's feedback on one set: beside their own work. */
export const feedback = z.object({
  setId: identifier,
  courseId: identifier,
  number: z.number().int(),
  title: z.string(),
  releasedAt: instant,
  handedInAt: instant.nullable(),
  /** The receipt's digest. */
  receipt: z.string().nullable(),
  /** What lateness took off; null where it was in time. */
  late: deduction.nullable(),
  /** With what was taken off. */
  total: z.number(),
  outOf: z.number(),
  showKeys: z.boolean(),
  problems: z.array(
    z.object({
      position: z.number().int(),
      title: z.string(),
      /** Markdown before the first part. */
      stem: z.string(),
      givens: z.array(printedGiven),
      total: z.number(),
      outOf: z.number(),
      parts: z.array(feedbackPart),
    }),
  ),
});
export type Feedback = z.infer<typeof feedback>;
export type FeedbackProblem = Feedback['problems'][number];

/** A part as a column of the results. */
export const resultPart = z.object({
  pileId: identifier,
  /** For example `2 (b)`. */
  label: z.string(),
  marks: z.number(),
});

/** A script as a row of the results. Names appear once the set is released. */
export const resultRow = z.object({
  code: z.string(),
  name: z.string().nullable(),
  email: z.string().nullable(),
  /** One for each part, in the order of the columns; null where no mark stands. */
  marks: z.array(z.number().nullable()),
  /** What lateness took off; null where it was in time, or nothing is taken off. */
  late: deduction.nullable(),
  /** With what was taken off. */
  total: z.number(),
});
export type ResultRow = z.infer<typeof resultRow>;

/** The results of a set. */
export const results = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  parts: z.array(resultPart),
  outOf: z.number(),
  takesLateWork: z.boolean(),
  items: z.array(resultRow),
  total: z.number().int(),
});
export type Results = z.infer<typeof results>;

/** A set as the list of results shows it. */
export const resultsSummary = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  scripts: z.number().int(),
  answers: z.number().int(),
  marked: z.number().int(),
  setAside: z.number().int(),
});
export type ResultsSummary = z.infer<typeof resultsSummary>;

const courseParams = z.object({ courseId: identifier });
const setParams = z.object({ setId: identifier });

export const resultsRoutes = {
  resultsList: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/results',
    summary: 'The sets of a course that have scripts, with how far they are marked',
    params: courseParams,
    response: z.object({ items: z.array(resultsSummary), total: z.number().int() }),
  }),
  results: defineRoute({
    method: 'GET',
    path: '/sets/:setId/results',
    summary: 'The marks of a set, script by script; names once it is released',
    params: setParams,
    response: results,
  }),
  resultsCsv: defineRoute({
    method: 'GET',
    path: '/sets/:setId/results.csv',
    summary: 'The same as a CSV file',
    params: setParams,
    response: z.string(),
  }),
  release: defineRoute({
    method: 'GET',
    path: '/sets/:setId/release',
    summary: 'What a release would do, and what is missing; or what it did',
    params: setParams,
    response: release,
  }),
  releaseSet: defineRoute({
    method: 'POST',
    path: '/sets/:setId/release',
    summary: 'Release marks and feedback to the students; letters leave ten minutes later',
    params: setParams,
    body: z.object({
      /** The letter's wording; without it the usual one. */
      text: z
        .string()
        .trim()
        .min(1, 'Write something, or take the usual wording.')
        .max(4000, 'A letter has at most 4,000 characters.')
        .optional(),
      /** Release to all but those who still have time; they get their marks with a later release. */
      leaveOutOpen: z.boolean().default(false),
    }),
    response: release,
    status: 200,
    versioned: true,
  }),
  takeBackRelease: defineRoute({
    method: 'POST',
    path: '/sets/:setId/release/take-back',
    summary: 'Take a release back, before its first letter has left',
    params: setParams,
    response: release,
    status: 200,
    versioned: true,
  }),
  feedbackList: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/feedback',
    summary: 'A student’s own sets that are released',
    params: courseParams,
    response: z.object({ items: z.array(feedbackSummary), total: z.number().int() }),
  }),
  feedback: defineRoute({
    method: 'GET',
    path: '/sets/:setId/feedback',
    summary: 'A student’s own marks and feedback, once the set is released',
    params: setParams,
    response: feedback,
  }),
};
