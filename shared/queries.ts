import * as z from 'zod';
import { plainValue } from './checks';
import { markedCriterion, printedGiven, workedPage } from './marking';
import { identifier, instant, listOf, setStage, versionNumber } from './primitives';
import { criterion, verdict } from './problems';
import { queryPolicy } from './query-policy';
import { defineRoute } from './route';

/** Longest reason of a query and longest answer to it, in characters. */
export const longestReason = 2000;

/** What became of a query. */
export const queryOutcome = z.object({
  at: instant,
  /** What the student reads. */
  words: z.string(),
  before: z.number(),
  after: z.number(),
});
export type QueryOutcome = z.infer<typeof queryOutcome>;

/** A query as its student sees it. It names nobody. */
export const ownQuery = z.object({
  id: identifier,
  /** The problem's place in the set. */
  position: z.number().int(),
  partId: identifier,
  partLabel: z.string(),
  criterionId: identifier.nullable(),
  /** For example `A1`; null for the part as a whole. */
  criterionName: z.string().nullable(),
  reason: z.string(),
  at: instant,
  /** Null while it waits. */
  outcome: queryOutcome.nullable(),
});
export type OwnQuery = z.infer<typeof ownQuery>;

/** A student's queries on one set, and what they are told of them. */
export const ownQueries = z.object({
  /** Until when marks can be queried. */
  closesAt: instant,
  isOpen: z.boolean(),
  policy: queryPolicy,
  items: z.array(ownQuery),
});
export type OwnQueries = z.infer<typeof ownQueries>;

/** A query in the team's list. */
export const querySummary = z.object({
  id: identifier,
  setId: identifier,
  setNumber: z.number().int(),
  /** The script's code. */
  code: z.string(),
  /** For example `2 (b)`. */
  part: z.string(),
  criterionName: z.string().nullable(),
  at: instant,
  outcome: queryOutcome.nullable(),
  /** Why this person is not the one to answer it; null where they may. */
  notYours: z.string().nullable(),
});
export type QuerySummary = z.infer<typeof querySummary>;

/** A released set, with until when its marks can be queried. */
export const querySet = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  closesAt: instant,
  /** Whether the lead chose the date; otherwise it is fourteen days after release. */
  isChosen: z.boolean(),
  version: versionNumber,
});
export type QuerySet = z.infer<typeof querySet>;

/** A mark in the history of an answer, as the team sees it. */
export const queriedMark = z.object({
  id: identifier,
  kind: z.enum(['first', 'second', 'settled']),
  /** Null: the check gave it. */
  marker: z.string().nullable(),
  total: z.number(),
  criteria: z.array(markedCriterion),
  remark: z.string(),
  at: instant,
  replacesId: identifier.nullable(),
  reason: z.string().nullable(),
  stands: z.boolean(),
});

/** A query with all that is needed to answer it. */
export const query = querySummary.extend({
  courseId: identifier,
  setTitle: z.string(),
  problemTitle: z.string(),
  policy: queryPolicy,
  reason: z.string(),
  criterionId: identifier.nullable(),
  /** The answer's version: an answer to the query must name it. */
  version: versionNumber,
  /** The part's own words, Markdown. */
  text: z.string(),
  givens: z.array(printedGiven),
  answer: z.string(),
  readAs: z.string(),
  verdict: verdict.nullable(),
  relation: z.string().nullable(),
  key: z.object({ value: plainValue, unit: z.string().nullable() }).nullable(),
  pages: z.array(workedPage),
  criteria: z.array(criterion),
  outOf: z.number(),
  /** The oldest first. */
  marks: z.array(queriedMark),
});
export type Query = z.infer<typeof query>;

const written = (missing: string) =>
  z.string({ error: missing }).trim().min(1, missing).max(longestReason, 'At most 2,000 characters, please.');

/** A query as it is asked. */
export const newQuery = z.object({
  position: z.number().int().min(1),
  partId: identifier,
  criterionId: identifier.nullable(),
  reason: written('Say why you think that the mark is wrong.'),
});
export type NewQuery = z.infer<typeof newQuery>;

/** An answer to a query. */
export const newQueryAnswer = z.object({
  /** The changed mark; null: the mark stands. */
  criteria: z.array(markedCriterion).nullable(),
  words: written('Say to the student why.'),
});

/** When queries of a set close; null: fourteen days after release. */
export const newClosing = z.object({ closesAt: instant.nullable() });

const courseParams = z.object({ courseId: identifier });
const setParams = z.object({ setId: identifier });
const queryParams = z.object({ queryId: identifier });

const courseQueries = listOf(querySummary).extend({
  policy: queryPolicy,
  sets: z.array(querySet),
  /** How many wait that this person may answer. */
  waiting: z.number().int(),
});

export const queriesRoutes = {
  ownQueries: defineRoute({
    method: 'GET',
    path: '/sets/:setId/own-queries',
    summary: 'A student’s own mark queries on a set, and until when marks can be queried',
    params: setParams,
    response: ownQueries,
  }),
  askQuery: defineRoute({
    method: 'POST',
    path: '/sets/:setId/own-queries',
    summary: 'Query a mark: the part, the criterion where it is about one, and why',
    params: setParams,
    body: newQuery,
    response: ownQueries,
    idempotent: true,
  }),
  queries: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/queries',
    summary: 'The mark queries of a course, those that wait first',
    params: courseParams,
    /** Fifty a page, from 1. */
    query: z.object({ page: z.coerce.number().int().min(1).default(1) }),
    response: courseQueries,
  }),
  query: defineRoute({
    method: 'GET',
    path: '/queries/:queryId',
    summary: 'A mark query with the answer, its marks and the mark scheme',
    params: queryParams,
    response: query,
  }),
  answerQuery: defineRoute({
    method: 'POST',
    path: '/queries/:queryId/answer',
    summary: 'Answer a mark query with a changed mark or a reason; not for those who gave the mark',
    params: queryParams,
    body: newQueryAnswer,
    response: query,
    status: 200,
    versioned: true,
    idempotent: true,
  }),
  changeClosing: defineRoute({
    method: 'PUT',
    path: '/sets/:setId/query-closing',
    summary: 'Say until when the marks of a set can be queried',
    params: setParams,
    body: newClosing,
    response: querySet,
    versioned: true,
  }),
  changePolicy: defineRoute({
    method: 'PUT',
    path: '/courses/:courseId/query-policy',
    summary: 'Say what a query can do to a mark in this course; queries that were asked keep what they were told',
    params: courseParams,
    body: z.object({ policy: queryPolicy }),
    response: z.object({ policy: queryPolicy }),
  }),
};
