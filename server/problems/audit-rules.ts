import { createHash } from 'node:crypto';
import { and, desc, eq, sql } from 'drizzle-orm';
import * as z from 'zod';
import type { Queryable } from '@drizzle/client';
import { audits, jobs } from '@drizzle/schema';
import type { AuditState, KeyAudit } from '@shared/audit';
import { problemContent, type ProblemContent } from '@shared/problems';
import { readDraft } from '@shared/read-draft';
import type { ProblemDraft } from '@shared/problem-draft';
import { auditKeys } from '../checks/audit/audit-keys';
import type { Context } from '../context';
import { conflict, invalidInput } from '../http/errors';
import { newId } from '../http/new-id';
import { defineJob } from '../jobs/job-kinds';
import { enqueueJob, presentJob, type JobRow } from '../jobs/job-queue';
import { awaitJob, workJobs } from '../jobs/work-jobs';
import { drawAudited, type AuditedContent } from './audit-variants';
import { latestRevision } from './problem-queries';

/** How long making ready waits for an audit that has to run first, in milliseconds. */
const longestWait = 40_000;

/** Audits one content of a problem, which need not be saved: the digest tells what the findings are of. */
const keyAuditJob = defineJob({
  kind: 'key audit',
  input: z.object({ problemId: z.uuid(), digest: z.string(), content: problemContent }),
  async run({ db, keys, clock }, { jobId, input, progress }) {
    const audited = await drawAudited(keys, input.content, progress);
    const { findings, parts } = auditKeys(audited);
    db.insert(audits)
      .values({
        id: newId(),
        problemId: input.problemId,
        digest: input.digest,
        jobId,
        variants: audited.variants.length + audited.undrawn.length,
        findings: [...findings],
        parts: [...parts],
        at: clock.now(),
      })
      .run();
  },
});

/** SHA-256 of all that an audit depends on; title, tags and mark scheme are no part of it. */
function auditDigest(content: AuditedContent): string {
  const { statement, givens, convention } = content;
  const answers = content.parts.map((part) => part.answer);
  return createHash('sha256').update(inOneOrder({ statement, givens, convention, answers })).digest('hex');
}

/** JSON with the properties of every object in alphabetical order. */
function inOneOrder(value: unknown): string {
  return JSON.stringify(value, (_name, each: unknown) =>
    typeof each === 'object' && each !== null && !Array.isArray(each)
      ? Object.fromEntries(Object.entries(each).sort(([one], [other]) => (one < other ? -1 : 1)))
      : each,
  );
}

/** The newest audit of a content. */
function findAudit(tx: Queryable, problemId: string, digest: string): KeyAudit | null {
  const row = tx
    .select()
    .from(audits)
    .where(and(eq(audits.problemId, problemId), eq(audits.digest, digest)))
    .orderBy(desc(audits.at), sql`rowid desc`)
    .limit(1)
    .get();
  return row ? { at: row.at, variants: row.variants, findings: [...row.findings], parts: [...row.parts] } : null;
}

/** Where the audit of a draft stands. */
export function auditStateOf(tx: Queryable, problemId: string, draft: ProblemDraft): AuditState {
  const { content } = readDraft(draft);
  if (!content) {
    const obstacle = 'The audit runs once nothing in the draft is left to mend.';
    return { audit: null, job: null, obstacle };
  }
  const digest = auditDigest(content);
  const last = lastJob(tx, problemId, digest);
  const isOfNote = last && last.state !== 'done';
  return { audit: findAudit(tx, problemId, digest), job: isOfNote ? presentJob(last) : null, obstacle: null };
}

function lastJob(tx: Queryable, problemId: string, digest: string): JobRow | undefined {
  return tx
    .select()
    .from(jobs)
    .where(
      and(
        eq(jobs.kind, keyAuditJob.kind),
        sql`json_extract(${jobs.input}, '$.problemId') = ${problemId}`,
        sql`json_extract(${jobs.input}, '$.digest') = ${digest}`,
      ),
    )
    .orderBy(desc(jobs.createdAt), sql`rowid desc`)
    .limit(1)
    .get();
}

/**
 * Begins an audit of a draft, or finds the one that runs.
 *
 * @throws RequestError 400 where the draft is not yet content
 */
export function beginAudit(context: Context, problemId: string, draft: ProblemDraft, personId: string): AuditState {
  const { content, faults } = readDraft(draft);
  if (!content) throw invalidInput(faults, 'The audit runs once nothing in the draft is left to mend.');
  enqueueAudit(context, problemId, content, personId);
  void workJobs(context);
  return auditStateOf(context.db, problemId, draft);
}

function enqueueAudit(context: Context, problemId: string, content: ProblemContent, personId: string): JobRow {
  const { db, clock } = context;
  const digest = auditDigest(content);
  return db.transaction(
    (tx) => {
      const last = lastJob(tx, problemId, digest);
      if (last?.state === 'queued' || last?.state === 'running') return last;
      const input = { problemId, digest, content };
      return enqueueJob(tx, keyAuditJob, input, { startedById: personId, now: clock.now() });
    },
    { behavior: 'immediate' },
  );
}

/**
 * Makes sure that the latest revision of a problem was audited: an audit that was made of this content counts, otherwise
 * one is made now.
 *
 * @throws RequestError 409 where the audit fails, is cancelled, or takes long
 */
export async function auditForUse(context: Context, problemId: string, personId: string): Promise<void> {
  const latest = latestRevision(context.db, problemId);
  if (!latest || findAudit(context.db, problemId, auditDigest(latest.content))) return;
  const begun = enqueueAudit(context, problemId, latest.content, personId);
  const job = await awaitJob(context, begun.id, longestWait);
  if (job?.state === 'done') return;
  if (job?.state === 'failed') throw conflict(`The key audit failed. ${job.problem ?? ''}`.trim());
  if (job?.state === 'cancelled') throw conflict('The key audit was cancelled. A problem becomes ready only after it.');
  throw conflict('The key audit of this revision still runs. Make the problem ready when it is done.');
}

/** @throws RequestError 409 where the audit of a revision is missing, or found something that stops use */
export function demandCleanAudit(tx: Queryable, problemId: string, content: ProblemContent): void {
  const audit = findAudit(tx, problemId, auditDigest(content));
  if (!audit) throw conflict('The key audit of the latest revision has not been made yet. Run it first.');
  const stopping = audit.findings.filter(({ grade }) => grade === 'stops use');
  const [first] = stopping;
  if (!first) return;
  const more = stopping.length - 1;
  const others = more === 0 ? '' : ` ${String(more)} more ${more === 1 ? 'finding stops' : 'findings stop'} its use.`;
  throw conflict(`The problem cannot be ready: the key audit found something to mend. ${first.sentence}${others}`, {
    fields: stopping.map(({ part, sentence }) => ({
      path: part === null ? ['statement'] : ['parts', part, 'answer', 'key'],
      message: sentence,
    })),
  });
}
