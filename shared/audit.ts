import * as z from 'zod';
import { job } from './jobs';
import { identifier, instant } from './primitives';
import { problemDraft } from './problem-draft';
import { defineRoute } from './route';

/** How many variants an audit draws, or all where there are fewer. */
export const auditedVariants = 500;

/** What a finding means: a problem with one that stops use cannot become ready. */
export const findingGrades = ['stops use', 'look at this'] as const;
export const findingGrade = z.enum(findingGrades);
export type FindingGrade = z.infer<typeof findingGrade>;

/** What a key audit looks for. */
export const findingKinds = [
  'key without value',
  'methods disagree',
  'slip inside tolerance',
  'slip equals key',
  'slips coincide',
  'slip without value',
  'tolerance below rounding',
  'unit mismatch',
  'key of another kind',
  'relative tolerance at zero',
  'given without use',
  'given without value',
  'answer in the statement',
  'variants repeat',
  'variants unequal',
  'convention not named',
] as const;
export const findingKind = z.enum(findingKinds);
export type FindingKind = z.infer<typeof findingKind>;

/** The variant that shows a finding. */
export const shownVariant = z.object({
  /** From 1; null where the variants are too many to be numbered. */
  number: z.number().int().nullable(),
  /** For example `n̄ = 4.0, T = 0.50`, by the names of the givens. */
  givens: z.string(),
});
export type ShownVariant = z.infer<typeof shownVariant>;

/** Something that the audit found. */
export const auditFinding = z.object({
  kind: findingKind,
  grade: findingGrade,
  /** From 0; null where it concerns the whole problem. */
  part: z.number().int().nullable(),
  sentence: z.string(),
  variant: shownVariant.nullable(),
  /** In how many of the variants. */
  count: z.number().int(),
});
export type AuditFinding = z.infer<typeof auditFinding>;

/** What is in order about a part, in a sentence. */
export const partAudit = z.object({ part: z.number().int(), inOrder: z.string() });
export type PartAudit = z.infer<typeof partAudit>;

/** A key audit of some content of a problem. */
export const keyAudit = z.object({
  at: instant,
  variants: z.number().int(),
  findings: z.array(auditFinding),
  parts: z.array(partAudit),
});
export type KeyAudit = z.infer<typeof keyAudit>;

/** Where the audit of a draft stands. */
export const auditState = z.object({
  /** The newest audit of exactly this content; null where there is none. */
  audit: keyAudit.nullable(),
  /** The job that runs at the moment, or the last one where it failed. */
  job: job.nullable(),
  /** Why there can be none: the draft is not yet content. */
  obstacle: z.string().nullable(),
});
export type AuditState = z.infer<typeof auditState>;

const params = z.object({ problemId: identifier });

export const auditRoutes = {
  audit: defineRoute({
    method: 'GET',
    path: '/problems/:problemId/audit',
    summary: 'The key audit of the saved draft as it is now, and the job that makes one',
    params,
    response: auditState,
  }),
  beginAudit: defineRoute({
    method: 'POST',
    path: '/problems/:problemId/audit',
    summary: 'Begin a key audit of a draft: the one that is sent, or else the saved one',
    params,
    body: z.object({ draft: problemDraft.optional() }),
    response: auditState,
    status: 200,
  }),
};
