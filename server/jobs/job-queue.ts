import { and, asc, eq, inArray, lt, or } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { jobs } from '@drizzle/schema';
import type { Job } from '@shared/jobs';
import { newId } from '../http/new-id';
import type { JobKind } from './job-kinds';

export type JobRow = typeof jobs.$inferSelect;

/** After so long without a word from its process, in milliseconds, a job is taken up by another. */
export const silence = 15_000;

/** A job that was begun so often and never ended takes its process down; it is not begun again. */
export const mostAttempts = 3;

/** Puts work in the queue, in the transaction of what asks for it. Call `workJobs` after commit. */
export function enqueueJob<Input>(
  tx: Queryable,
  kind: JobKind<Input>,
  input: Input,
  { startedById, courseId = null, now }: { startedById: string; courseId?: string | null; now: number },
): JobRow {
  return tx
    .insert(jobs)
    .values({ id: newId(), kind: kind.kind, input, startedById, courseId, createdAt: now })
    .returning()
    .get();
}

/** A job's row. */
export function findJob(tx: Queryable, jobId: string): JobRow | undefined {
  return tx.select().from(jobs).where(eq(jobs.id, jobId)).get();
}

/** A job as it leaves the server. */
export function presentJob({ id, kind, state, done, total, problem, createdAt, finishedAt }: JobRow): Job {
  return { id, kind, state, done, total, problem, createdAt, finishedAt };
}

/** The oldest job that waits, or that its process left. */
export function waitingJob(tx: Queryable, now: number): JobRow | undefined {
  const left = and(eq(jobs.state, 'running'), lt(jobs.aliveAt, now - silence));
  return tx
    .select()
    .from(jobs)
    .where(or(eq(jobs.state, 'queued'), left))
    .orderBy(asc(jobs.createdAt))
    .limit(1)
    .get();
}

/**
 * Claims the oldest job that waits, or that its process left. Of several processes one gets it, since they write one
 * after the other.
 *
 * @param claimant names the process
 */
export function claimJob(tx: Queryable, claimant: string, now: number): JobRow | undefined {
  const row = waitingJob(tx, now);
  if (!row) return undefined;
  if (row.attempts >= mostAttempts) {
    endJob(tx, row.id, 'failed', now, 'It was begun three times and the server stopped each time. Try it again.');
    return claimJob(tx, claimant, now);
  }
  return tx
    .update(jobs)
    .set({ state: 'running', claimedBy: claimant, aliveAt: now, attempts: row.attempts + 1, done: 0, total: 0 })
    .where(eq(jobs.id, row.id))
    .returning()
    .get();
}

/** Notes how far a job is. @returns whether it should go on */
export function noteProgress(
  tx: Queryable,
  jobId: string,
  claimant: string,
  at: { readonly done: number; readonly total: number; readonly now: number },
): boolean {
  const [row] = tx
    .update(jobs)
    .set({ done: at.done, total: at.total, aliveAt: at.now })
    .where(and(eq(jobs.id, jobId), eq(jobs.claimedBy, claimant), eq(jobs.state, 'running')))
    .returning()
    .all();
  return row !== undefined && !row.cancelAsked;
}

/**
 * Ends a job that is not ended yet.
 *
 * @param claimant the process that ends it; where another one, or none, has it by now nothing happens
 */
export function endJob(
  tx: Queryable,
  jobId: string,
  state: 'done' | 'failed' | 'cancelled',
  now: number,
  problem: string | null = null,
  claimant?: string,
): JobRow | undefined {
  return tx
    .update(jobs)
    .set({ state, problem, finishedAt: now, claimedBy: null })
    .where(
      and(
        eq(jobs.id, jobId),
        inArray(jobs.state, ['queued', 'running']),
        claimant === undefined ? undefined : eq(jobs.claimedBy, claimant),
      ),
    )
    .returning()
    .get();
}

/** Gives up a claim in an orderly stop, so that the job is taken up at once. */
export function releaseClaims(tx: Queryable, claimant: string): void {
  tx.update(jobs)
    .set({ state: 'queued', claimedBy: null })
    .where(and(eq(jobs.claimedBy, claimant), eq(jobs.state, 'running')))
    .run();
}

/** Asks a job to stop. One that waits is cancelled at once. */
export function cancelJob(tx: Queryable, jobId: string, now: number): JobRow | undefined {
  const row = findJob(tx, jobId);
  if (row?.state === 'queued') return endJob(tx, jobId, 'cancelled', now);
  if (row?.state !== 'running') return row;
  return tx.update(jobs).set({ cancelAsked: true }).where(eq(jobs.id, jobId)).returning().get();
}
