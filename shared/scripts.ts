import * as z from 'zod';
import { ownAllowance } from './allowances';
import { answerDigest, type AnswerDigest } from './checks';
import { convention, identifier, instant } from './primitives';
import { signedReceipt } from './receipts';
import { defineRoute } from './route';

/** Longest answer, in characters. */
export const longestAnswer = 20_000;

/** Largest file that is taken, in bytes. */
export const largestUpload = 25 * 1024 * 1024;

/** Most worked pages of one part. */
export const mostPages = 20;

/** What a worked page can be. */
export const pageMediaTypes = ['application/pdf', 'image/jpeg', 'image/png', 'image/webp'] as const;
export const pageMediaType = z.enum(pageMediaTypes);

/** A worked page as its student sees it. */
export const sheetPage = z.object({
  id: identifier,
  mediaType: pageMediaType,
  bytes: z.number().int(),
  pageCount: z.number().int(),
  addedAt: instant,
  /** Below `/api`. */
  path: z.string(),
});
export type SheetPage = z.infer<typeof sheetPage>;

/** What is printed beside an answer field; the reader of answers needs no more. */
const fieldVariable = z.object({
  name: z.string(),
  symbol: z.string().optional(),
  spellings: z.array(z.string()).optional(),
});
export const sheetField = z.discriminatedUnion('form', [
  z.object({
    form: z.literal('number'),
    hint: z.enum(['pure number', 'with a unit']),
    unit: z.string().optional(),
  }),
  z.object({ form: z.literal('formula'), variables: z.array(fieldVariable) }),
  z.object({ form: z.literal('choice'), labels: z.array(z.string()), several: z.boolean() }),
  z.object({ form: z.literal(['complex', 'list', 'distribution', 'matrix', 'state', 'worked']) }),
]);
export type SheetField = z.infer<typeof sheetField>;

/** A part of a sheet. It holds nothing of key, tolerance, slips or mark scheme. */
export const sheetPart = z.object({
  answerId: identifier,
  /** `a`, `b` … */
  label: z.string(),
  /** The part's own words, Markdown. */
  text: z.string(),
  marks: z.number(),
  field: sheetField,
  /** For a choice: what its options say. */
  options: z.array(z.object({ label: z.string(), text: z.string() })),
  workedPage: z.boolean(),
  /** What is saved. */
  answer: z.string(),
  /** Counts the saved texts; 0 where nothing was saved. */
  version: z.number().int(),
  savedAt: instant.nullable(),
  pages: z.array(sheetPage),
});
export type SheetPart = z.infer<typeof sheetPart>;

/** A problem of a sheet, with the student's own givens. */
export const sheetProblem = z.object({
  setProblemId: identifier,
  position: z.number().int(),
  title: z.string(),
  marks: z.number(),
  /** Markdown before the first part. */
  stem: z.string(),
  /** A line about safety at laboratory work; may be empty. */
  safety: z.string(),
  /** What `\val{name}` prints; only names that the statement prints. */
  givens: z.record(z.string(), z.object({ printed: z.string(), unit: z.string().optional() })),
  /** Data of the student's own, of names that the statement prints: counts, one a shot. */
  data: z.array(z.object({ name: z.string(), symbol: z.string(), counts: z.array(z.number().int()).readonly() })),
  /** Where the problem was written under another convention than the course's. */
  convention: convention.nullable(),
  parts: z.array(sheetPart),
});
export type SheetProblem = z.infer<typeof sheetProblem>;

/** What was handed in, in short. */
export const submissionSummary = z.object({
  number: z.number().int(),
  at: instant,
  by: z.enum(['student', 'closing']),
  digest: z.string(),
});
export type SubmissionSummary = z.infer<typeof submissionSummary>;

/** Where a sheet stands for its student. */
export const sheetState = z.enum(['open', 'closed', 'released']);
export type SheetState = z.infer<typeof sheetState>;

/** A student's sheet. */
export const sheet = z.object({
  setId: identifier,
  courseId: identifier,
  courseTitle: z.string(),
  number: z.number().int(),
  title: z.string(),
  coverText: z.string(),
  state: sheetState,
  /** The student's own closing time. */
  closesAt: instant.nullable(),
  /** Where late work is taken: until when, and what is taken off. */
  late: z.object({ until: instant, rule: z.string() }).nullable(),
  /** What a lead granted this student. */
  allowance: ownAllowance.nullable(),
  timeZone: z.string(),
  /** The course's, printed on the sheet. */
  convention,
  marks: z.number(),
  problems: z.array(sheetProblem),
  /** What was handed in last; null for nothing yet. */
  submission: submissionSummary.nullable(),
  /** Whether something was saved since. */
  changedSince: z.boolean(),
  /** The server's clock. */
  now: instant,
});
export type Sheet = z.infer<typeof sheet>;

/** A sheet in a student's list. */
export const sheetSummary = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  state: z.enum(['coming', 'open', 'closed', 'released']),
  opensAt: instant.nullable(),
  /** The student's own closing time. */
  closesAt: instant.nullable(),
  /** Until when late work is taken; null where none is. */
  lateUntil: instant.nullable(),
  parts: z.number().int(),
  answered: z.number().int(),
  submission: submissionSummary.nullable(),
  changedSince: z.boolean(),
});
export type SheetSummary = z.infer<typeof sheetSummary>;

/** What a save came to. */
export const savedAnswer = z.object({
  answerId: identifier,
  answer: z.string(),
  version: z.number().int(),
  savedAt: instant.nullable(),
});
export type SavedAnswer = z.infer<typeof savedAnswer>;

/** One part in a receipt. */
export const receiptPart = z.object({
  position: z.number().int(),
  problemTitle: z.string(),
  label: z.string(),
  text: z.string(),
  pages: z.array(z.object({ id: identifier, sha256: z.string(), bytes: z.number().int(), path: z.string() })),
});

/** Proof of what was handed in and when. */
export const receipt = z.object({
  setId: identifier,
  courseId: identifier,
  courseTitle: z.string(),
  number: z.number().int(),
  title: z.string(),
  timeZone: z.string(),
  /** The script's code, which stands for the name wherever it is marked. */
  code: z.string(),
  /** The last one counts. */
  submission: submissionSummary,
  earlier: z.array(submissionSummary),
  /** The last submission, signed by the server. */
  signed: signedReceipt,
  parts: z.array(receiptPart),
  /** The digest is the SHA-256 over the canonical form of this; `canonicalForm` makes it. */
  content: z.array(answerDigest),
  state: sheetState,
  closesAt: instant.nullable(),
  changedSince: z.boolean(),
});
export type Receipt = z.infer<typeof receipt>;

/**
 * The text over which a receipt's digest is computed: JSON without spaces, the parts in the order of the sheet, each with
 * the names `setProblemId`, `partId`, `text` and `pages` in this order, and each page with `id` and `sha256`. Encoded as
 * UTF-8, its SHA-256 in lower-case hexadecimal is the digest. `docs/receipt.md` describes it for those who check one.
 */
export function canonicalForm(content: readonly AnswerDigest[]): string {
  return JSON.stringify(
    content.map(({ setProblemId, partId, text, pages }) => ({
      setProblemId,
      partId,
      text,
      pages: pages.map(({ id, sha256 }) => ({ id, sha256 })),
    })),
  );
}

const setParams = z.object({ setId: identifier });
const answerParams = z.object({ answerId: identifier });
const pageParams = z.object({ pageId: identifier });

export const scriptsRoutes = {
  sheets: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/sheets',
    summary: 'A student’s own sheets, the newest first',
    params: z.object({ courseId: identifier }),
    response: z.object({ items: z.array(sheetSummary), total: z.number().int(), now: instant }),
  }),
  sheet: defineRoute({
    method: 'GET',
    path: '/sets/:setId/sheet',
    summary: 'A student’s own sheet; its script is begun when it is first opened',
    params: setParams,
    response: sheet,
  }),
  saveAnswer: defineRoute({
    method: 'PUT',
    path: '/answers/:answerId/text',
    summary: 'Save an answer as it is typed; If-Match carries the saved version that was typed over, 0 for none',
    params: answerParams,
    body: z.object({
      text: z
        .string({ error: 'Send the answer as text.' })
        .max(longestAnswer, 'An answer has at most 20,000 characters; put longer work on a page.'),
    }),
    response: savedAnswer,
    versioned: true,
    idempotent: true,
  }),
  addPage: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/pages',
    summary: 'Add a worked page: the body is the file itself (PDF, JPEG, PNG or WebP, at most 25 MB)',
    params: answerParams,
    response: sheetPage,
    idempotent: true,
  }),
  removePage: defineRoute({
    method: 'DELETE',
    path: '/pages/:pageId',
    summary: 'Take a worked page off the sheet; what was handed in with it keeps it',
    params: pageParams,
  }),
  restorePage: defineRoute({
    method: 'POST',
    path: '/pages/:pageId/return',
    summary: 'Undo the removal of a worked page',
    params: pageParams,
    response: sheetPage,
    status: 200,
  }),
  page: defineRoute({
    method: 'GET',
    path: '/pages/:pageId',
    summary: 'The file of a worked page, for its student, and once handed in for those who mark',
    params: pageParams,
    response: z.unknown(),
  }),
  submitSheet: defineRoute({
    method: 'POST',
    path: '/sets/:setId/submissions',
    summary: 'Hand in what is saved; until closing it can be handed in again',
    params: setParams,
    response: receipt,
    idempotent: true,
  }),
  receipt: defineRoute({
    method: 'GET',
    path: '/sets/:setId/receipt',
    summary: 'Proof of what was handed in and when',
    params: setParams,
    response: receipt,
  }),
};
