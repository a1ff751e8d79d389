import { createHash } from 'node:crypto';
import { and, desc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses, memberships, sets, submissions } from '@drizzle/schema';
import type { AnswerDigest } from '@shared/checks';
import { canonicalForm } from '@shared/scripts';
import { fullMomentOf } from '@shared/times';
import { newId } from '../http/new-id';
import { queueLetter } from '../mail/letters';
import { receiptOf } from '../receipts/receipt-of';
import type { ScriptRow } from './begin-script';
import { contentOf, savedParts } from './saved-answers';

export type SubmissionRow = typeof submissions.$inferSelect;

/** How something is handed in. */
export interface HandingIn {
  readonly by: 'student' | 'closing';
  readonly at: number;
  readonly idempotencyKey: string;
}

/** What a script handed in last. */
export function lastSubmission(tx: Queryable, scriptId: string): SubmissionRow | undefined {
  return tx
    .select()
    .from(submissions)
    .where(eq(submissions.scriptId, scriptId))
    .orderBy(desc(submissions.number))
    .limit(1)
    .get();
}

/** SHA-256 over the canonical form of what is handed in, in hexadecimal. */
export function digestOf(content: readonly AnswerDigest[]): string {
  return createHash('sha256').update(canonicalForm(content), 'utf8').digest('hex');
}

/**
 * Hands in what is saved of a script, as a new submission with its receipt by mail. The same key twice, or nothing new since
 * the last submission, is the submission that is there.
 */
export function handIn(tx: Queryable, script: ScriptRow, handing: HandingIn): SubmissionRow {
  const done = tx
    .select()
    .from(submissions)
    .where(and(eq(submissions.scriptId, script.id), eq(submissions.idempotencyKey, handing.idempotencyKey)))
    .get();
  if (done) return done;
  const content = contentOf(savedParts(tx, script));
  const digest = digestOf(content);
  const last = lastSubmission(tx, script.id);
  if (last?.digest === digest) return last;

  const row: SubmissionRow = {
    id: newId(),
    scriptId: script.id,
    number: (last?.number ?? 0) + 1,
    content,
    digest,
    ...handing,
  };
  tx.insert(submissions).values(row).run();
  const isEmpty = content.every((part) => part.text.trim() === '' && part.pages.length === 0);
  if (handing.by === 'student' || !isEmpty) sendReceipt(tx, script, row);
  return row;
}

function sendReceipt(tx: Queryable, script: ScriptRow, submission: SubmissionRow): void {
  const found = tx
    .select({ set: sets, course: courses, userId: memberships.userId })
    .from(sets)
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .innerJoin(memberships, eq(memberships.id, script.membershipId))
    .where(eq(sets.id, script.setId))
    .get();
  if (!found) return;
  const { set, course, userId } = found;
  const name = `Set ${String(set.number)}, ${set.title}, of ${course.title}`;
  const answered = submission.content.filter((part) => part.text.trim() !== '' || part.pages.length > 0).length;
  queueLetter(tx, {
    kind: 'receipt',
    userId,
    subject: `Receipt: Set ${String(set.number)} of ${course.title}`,
    text: [
      submission.by === 'student'
        ? `You handed in ${name}.`
        : `${name} closed, and what you had saved was handed in for you.`,
      [
        `Time: ${fullMomentOf(submission.at, course.timeZone)}`,
        `Script: ${script.code}, submission ${String(submission.number)}`,
        `Parts with an answer: ${String(answered)} of ${String(submission.content.length)}`,
        `Digest (SHA-256): ${submission.digest}`,
      ].join('\n'),
      'Keep this letter: time, digest and signature prove what was handed in. Anyone on the course’s team can verify what stands between the braces.',
      JSON.stringify(receiptOf(script, submission), null, 2),
    ].join('\n\n'),
    now: submission.at,
  });
}
