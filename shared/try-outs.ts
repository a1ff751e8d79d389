import * as z from 'zod';
import { plainValue } from './checks';
import { identifier, instant, listOf } from './primitives';
import { verdict } from './problems';
import { reviewer } from './review';
import { defineRoute } from './route';
import { sheetField } from './scripts';

/** A part as it is tried: what a student would see of it. */
export const triedPart = z.object({
  partId: identifier,
  label: z.string(),
  text: z.string(),
  marks: z.number(),
  field: sheetField,
  options: z.array(z.object({ label: z.string(), text: z.string() })),
  answer: z.string(),
});
export type TriedPart = z.infer<typeof triedPart>;

/** A try-out as the one who makes it sees it: a variant, as a student gets it. */
export const tryOutPaper = z.object({
  id: identifier,
  revision: z.number().int(),
  title: z.string(),
  stem: z.string(),
  safety: z.string(),
  givens: z.record(z.string(), z.object({ printed: z.string(), unit: z.string().optional() })),
  data: z.array(z.object({ name: z.string(), symbol: z.string(), counts: z.array(z.number().int()).readonly() })),
  parts: z.array(triedPart),
  activeSeconds: z.number().int(),
});
export type TryOutPaper = z.infer<typeof tryOutPaper>;

/** How an answer of a try-out stands to its key. */
export const triedAnswer = z.object({
  label: z.string(),
  answer: z.string(),
  /** Null where the check makes none: a person looks. */
  verdict: verdict.nullable(),
  /** In words, for example `twice the key`, or the slip that it equals. */
  relation: z.string(),
  key: plainValue.nullable(),
  unit: z.string().optional(),
});

/** A try-out that was handed in. */
export const tryOut = z.object({
  id: identifier,
  by: reviewer,
  revision: z.number().int(),
  handedInAt: instant,
  /** Whole minutes, at least 1. */
  activeMinutes: z.number().int(),
  /** How many of the parts that the check judges were right. */
  right: z.number().int(),
  checked: z.number().int(),
  answers: z.array(triedAnswer),
});
export type TryOut = z.infer<typeof tryOut>;

const problemParams = z.object({ problemId: identifier });
const tryOutParams = problemParams.extend({ tryOutId: identifier });

/** What is typed, and how long somebody was at it. */
const typedAnswers = z.object({
  answers: z.record(identifier, z.string().max(20_000, 'At most 20,000 characters.')),
  activeSeconds: z.number().int().min(0).max(86_400),
});

export const tryOutRoutes = {
  tryOuts: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/try-outs',
    summary: 'The try-outs of a problem that were handed in, newest first, with the keys of their variants',
    params: problemParams,
    response: listOf(tryOut),
  }),
  beginTryOut: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/try-outs',
    summary: 'Begin to try the latest revision out, or go on with what was begun',
    params: problemParams,
    response: tryOutPaper,
  }),
  keepTryOut: defineRoute({
    method: 'PUT',
    path: '/problems/:problemId/try-outs/:tryOutId/answers',
    summary: 'Keep what is typed',
    params: tryOutParams,
    body: typedAnswers,
  }),
  handInTryOut: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/try-outs/:tryOutId/submission',
    summary: 'Hand a try-out in: it is checked as a student’s answers are',
    params: tryOutParams,
    body: typedAnswers,
    response: tryOut,
  }),
};
