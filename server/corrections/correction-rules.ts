import { and, eq } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { answers, correctionChanges, corrections, scripts, sets } from '@drizzle/schema';
import type { AnswerSpecification } from '@shared/answer-forms';
import { hasEnded } from '@shared/jobs';
import { partLabel, type ProblemContent } from '@shared/problems';
import type { PatternSlip } from '@shared/corrections';
import { conflict, invalidInput, notFound, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { enqueueJob, findJob } from '../jobs/job-queue';
import { answersInOrder, type FoundPile } from '../marking/find-pile';
import { keyFaults } from '../problems/key-faults';
import { enter } from '../record/enter';
import type { Keys } from '../variants/evaluate-outcomes';
import { demandAmendment } from './amended-answer';
import { makeCorrectionJob, previewCorrectionJob } from './correction-jobs';
import { standingCorrection } from './corrected-content';
import type { CorrectionRow } from './judge-scripts';
import { slipOfRelation } from './pattern-slip';
import { demandCorrection, presentCorrection } from './present-correction';

/** Who corrects, and when. */
export interface Corrector {
  readonly userId: string;
  readonly now: number;
}

/** What is proposed. */
export interface Proposal {
  readonly answer: AnswerSpecification;
  readonly reason: string;
  readonly note: string;
  readonly idempotencyKey: string;
}

/**
 * Proposes a correction of the part of a pile; a job looks what it would change. The same key twice is the same
 * correction.
 *
 * @throws RequestError 400 where more is changed than key, tolerance and slips, nothing is, or an expression has no value
 */
export async function proposeCorrection(
  db: Database,
  keys: Keys,
  found: FoundPile,
  proposal: Proposal,
  { userId, now }: Corrector,
): Promise<CorrectionRow> {
  const done = byKey(db, found, proposal.idempotencyKey);
  if (done) return done;
  demandAmendment(found.part.answer, proposal.answer);
  const content: ProblemContent = {
    ...found.content,
    parts: found.content.parts.map((part) => (part.id === found.part.id ? { ...part, answer: proposal.answer } : part)),
  };
  const faults = await keyFaults(keys, content);
  if (faults.length > 0) {
    // The fault of a later part that uses this key is said at this key.
    const fields = faults.map((fault) => {
      const own = fault.path[0] === 'parts' && fault.path[1] === found.partIndex;
      return { ...fault, path: own ? fault.path.slice(2) : ['answer', 'key'] };
    });
    throw invalidInput(fields, fields[0]?.message);
  }
  return db.transaction(
    (tx) => {
      const again = byKey(tx, found, proposal.idempotencyKey);
      if (again) return again;
      const id = newId();
      const row = {
        id,
        revisionId: found.setProblem.revisionId,
        partId: found.part.id,
        content,
        basedOnId: standingCorrection(tx, found.setProblem.revisionId)?.id ?? null,
        courseId: found.set.courseId,
        reason: proposal.reason,
        note: proposal.note,
        byId: userId,
        createdAt: now,
        idempotencyKey: proposal.idempotencyKey,
      };
      tx.insert(corrections).values(row).run();
      const job = enqueueJob(
        tx,
        previewCorrectionJob,
        { correctionId: id },
        { startedById: userId, courseId: found.set.courseId, now },
      );
      tx.update(corrections).set({ previewJobId: job.id }).where(eq(corrections.id, id)).run();
      enterStep(tx, demandCorrection(tx, id), 'correction proposed', 'was proposed', { userId, now });
      return demandCorrection(tx, id);
    },
    { behavior: 'immediate' },
  );
}

function byKey(tx: Queryable, found: FoundPile, idempotencyKey: string): CorrectionRow | undefined {
  return tx
    .select()
    .from(corrections)
    .where(and(eq(corrections.revisionId, found.setProblem.revisionId), eq(corrections.idempotencyKey, idempotencyKey)))
    .get();
}

function demandVersion(tx: Queryable, correctionId: string, version: number): CorrectionRow {
  const row = demandCorrection(tx, correctionId);
  if (row.version !== version)
    throw stale('This correction went on meanwhile. Look at it as it is now.', presentCorrection(tx, row));
  return row;
}

/**
 * Confirms a correction whose changes were looked at; a job makes it. One whose job failed or was cancelled can be
 * confirmed again.
 *
 * @throws RequestError 409 where its changes are not known, another was made meanwhile, or it is made or withdrawn
 */
export function confirmCorrection(
  tx: Queryable,
  correctionId: string,
  version: number,
  corrector: Corrector,
): CorrectionRow {
  const row = demandVersion(tx, correctionId, version);
  if (row.state === 'withdrawn') throw conflict('This correction was withdrawn.');
  if (row.state === 'made') throw conflict('This correction is made already.');
  const job = row.jobId === null ? undefined : findJob(tx, row.jobId);
  if (job && !hasEnded(job)) throw conflict('This correction is being made at this moment.');
  const preview = row.previewJobId === null ? undefined : findJob(tx, row.previewJobId);
  if (preview?.state !== 'done')
    throw conflict('What it changes is not known yet. Wait for the preview, look at it, and confirm then.');
  if ((standingCorrection(tx, row.revisionId)?.id ?? null) !== row.basedOnId)
    throw conflict('Another correction of this problem was made meanwhile. Withdraw this one and propose it again.');
  const made = enqueueJob(
    tx,
    makeCorrectionJob,
    { correctionId },
    { startedById: corrector.userId, courseId: row.courseId, now: corrector.now },
  );
  tx.update(corrections)
    .set({ state: 'confirmed', jobId: made.id, version: row.version + 1 })
    .where(eq(corrections.id, correctionId))
    .run();
  enterStep(tx, row, 'correction confirmed', 'was confirmed', corrector);
  return demandCorrection(tx, correctionId);
}

/** Withdraws a correction that was not made. @throws RequestError 409 where it is, or is being made */
export function withdrawCorrection(
  tx: Queryable,
  correctionId: string,
  version: number,
  corrector: Corrector,
): CorrectionRow {
  const row = demandVersion(tx, correctionId, version);
  const job = row.jobId === null ? undefined : findJob(tx, row.jobId);
  if (row.state === 'made')
    throw conflict('This correction is made. What it did can be changed by another correction.');
  if (job && !hasEnded(job)) throw conflict('This correction is being made. Cancel that first.');
  tx.update(corrections)
    .set({ state: 'withdrawn', version: row.version + 1 })
    .where(eq(corrections.id, correctionId))
    .run();
  enterStep(tx, row, 'correction withdrawn', 'was withdrawn', corrector);
  return demandCorrection(tx, correctionId);
}

function enterStep(tx: Queryable, row: CorrectionRow, action: string, what: string, { userId, now }: Corrector): void {
  const index = row.content.parts.findIndex((part) => part.id === row.partId);
  enter(tx, {
    at: now,
    actorId: userId,
    courseId: row.courseId,
    action,
    thing: 'correction',
    thingId: row.id,
    sentence: `A correction of “${row.content.title}” (${partLabel(index)}) ${what}.`,
    reason: row.reason,
  });
}

/** Says that a mark which a person gave stands after another look. @throws RequestError 404 where none waits for one */
export function letMarkStand(tx: Queryable, row: CorrectionRow, answerId: string, { userId, now }: Corrector): void {
  const found = tx
    .select({ answer: answers, courseId: sets.courseId, code: scripts.code })
    .from(correctionChanges)
    .innerJoin(answers, eq(answers.id, correctionChanges.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .where(and(eq(correctionChanges.correctionId, row.id), eq(answers.id, answerId)))
    .get();
  if (typeof found?.answer.anotherLook !== 'string') throw notFound('mark that waits for another look');
  tx.update(answers)
    .set({ anotherLook: null, version: found.answer.version + 1 })
    .where(eq(answers.id, answerId))
    .run();
  enter(tx, {
    at: now,
    actorId: userId,
    courseId: found.courseId,
    action: 'mark stands',
    thing: 'answer',
    thingId: answerId,
    sentence: `The mark of answer ${found.code} stands after another look.`,
    reason: row.reason,
  });
}

/** A pattern of a pile as a slip, or why it is none. */
export function slipOfPattern(
  tx: Queryable,
  found: FoundPile,
  patternKey: string | undefined,
): { readonly slip: PatternSlip | null; readonly noSlip: string | null } {
  if (patternKey === undefined) return { slip: null, noSlip: null };
  const pattern = answersInOrder(tx, found.pile.id).patterns.find(({ key }) => key === patternKey);
  if (!pattern) return { slip: null, noSlip: 'This pattern is not on the pile any more.' };
  const earlier = Array.from({ length: found.partIndex }, (_, index) => partLabel(index));
  const expression = slipOfRelation(pattern.name, found.part.answer, earlier);
  if (expression === undefined)
    return { slip: null, noSlip: `No expression says “${pattern.name}”. Write the slip yourself.` };
  return { slip: { name: pattern.name, expression, answers: pattern.total }, noSlip: null };
}
