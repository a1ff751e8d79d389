import { and, desc, eq, notInArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, holds, marks, record } from '@drizzle/schema';
import type { z } from 'zod';
import type { BenchOutcome, CurrentAnswer, MarkedCriterion, newMark } from '@shared/marking';
import type { Criterion } from '@shared/problems';
import { conflict, invalidField, notAllowed, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { enterStage } from '../sets/enter-stage';
import { presentCurrent, presentMark } from './present-answers';
import { findAnswer, marksAreGiven, type FoundPile } from './find-pile';
import { activeHold, heldNow, takeHolds, type Bench, type HoldsChange } from './holds';
import { nextSequence } from './sequence';

/** Who does something at a bench, and to what. */
export interface Doer extends Bench {
  readonly userId: string;
  readonly name: string;
  readonly found: FoundPile;
}

/** What is written to, the version it was made for, and when. */
export interface Write {
  readonly answerId: string;
  readonly version: number;
  readonly now: number;
}

/** A write that can come twice. */
export interface KeyedWrite extends Write {
  readonly idempotencyKey: string;
}

/** What a deed came to, and what of it is to be told after commit. */
export interface Deed {
  readonly pileId: string;
  readonly outcome: BenchOutcome;
  readonly told: {
    readonly byId: string;
    readonly event: 'answerMarked' | 'answerSetAside' | 'answerReturned' | null;
    readonly sequence: number;
    readonly markerId: string | null;
    readonly total: number | null;
    readonly holds: HoldsChange | null;
  };
}

type MarkRow = typeof marks.$inferSelect;

/**
 * Marks an answer that the bench holds, or changes its mark: always a new row. The same key twice is the same mark.
 *
 * @throws RequestError 412 with the current state where the answer changed, or is not held any more; 400 by field; 403
 *   where the mark is a colleague's; 409 after release
 */
export function markAnswer(
  tx: Queryable,
  doer: Doer,
  write: KeyedWrite,
  sent: Pick<z.output<typeof newMark>, 'criteria' | 'remark' | 'reason' | 'takeNext'>,
): Deed {
  const done = markOfKey(tx, write);
  if (done) return repeated(tx, doer, write, done);
  const { answer } = demandCurrent(tx, doer, write);
  const criteria = settledCriteria(sent.criteria, doer.found.part.criteria);
  const before = answer.standingMarkId === null ? null : markOf(tx, answer.standingMarkId);
  demandChangeable(doer, before, sent.reason);

  const row = appendMark(tx, write, {
    markerId: doer.membershipId,
    criteria,
    total: totalOf(criteria, doer.found.part.criteria),
    remark: sent.remark,
    reason: sent.reason ?? null,
  });
  settle(tx, write, { state: 'marked', standingMarkId: row.id });
  // The first mark is what makes a closed set one that is marked.
  if (doer.found.set.stage === 'closed') enterStage(tx, doer.found.set, 'marking', doer, write.now);
  if (before) {
    enter(tx, {
      ...entryFor(doer, write, 'mark changed'),
      sentence: `The mark of ${nameOf(tx, doer, write)} was changed from ${String(before.total)} to ${String(row.total)}.`,
      before: { markId: before.id, total: before.total, criteria: before.criteria },
      after: { markId: row.id, total: row.total, criteria },
      ...(sent.reason ? { reason: sent.reason } : {}),
    });
  }
  return finish(tx, doer, write, { event: 'answerMarked', mark: row, takeNext: sent.takeNext });
}

/**
 * Takes back the standing mark. The mark before it stands again, as a row of its own; without one the answer waits.
 *
 * @throws RequestError 412 with the current state, 403 where the mark is a colleague's
 */
export function undoMark(tx: Queryable, doer: Doer, write: Write, markId: string): Deed {
  const { answer } = demandVersion(tx, doer, write);
  if (answer.standingMarkId !== markId) throw staleAnswer(tx, doer, write, 'This mark does not stand any more.');
  const holder = activeHold(tx, write.answerId, write.now);
  if (holder && holder.membershipId !== doer.membershipId)
    throw staleAnswer(tx, doer, write, 'A colleague holds this answer now, so the mark was not taken back.');
  const undone = markOf(tx, markId);
  if (!doer.seesAllMarks && undone.markerId !== doer.membershipId)
    throw notAllowed('This mark is not yours; only a lead can take it back.');

  const back = takenBack(tx, write.answerId);
  if (back.some((each) => each.restored === markId))
    throw conflict('This mark stands again because another was taken back; change it instead.');
  const replaced = undone.replacesId === null ? null : markOf(tx, undone.replacesId);
  const earlier = replaced && back.some((each) => each.taken === replaced.id) ? null : replaced;
  const { markerId, criteria, total, remark } = earlier ?? undone;
  const again =
    earlier &&
    appendMark(
      tx,
      { ...write, idempotencyKey: newId() },
      { markerId, criteria, total, remark, reason: 'The mark after it was taken back.' },
    );
  settle(tx, write, again ? { state: 'marked', standingMarkId: again.id } : { state: 'waits', standingMarkId: null });
  enter(tx, {
    ...entryFor(doer, write, 'mark taken back'),
    sentence: `The mark of ${nameOf(tx, doer, write)}, ${String(undone.total)}, was taken back.`,
    before: { markId: undone.id, total: undone.total },
    after: again ? { markId: again.id, total: again.total } : null,
  });
  return finish(tx, doer, write, { event: again ? 'answerMarked' : 'answerReturned', mark: again, takeNext: false });
}

/** Sets an answer that the bench holds aside for the lead. @throws RequestError 412 with the current state, 409 once it is marked */
export function setAside(tx: Queryable, doer: Doer, write: Write, reason: string, takeNext: boolean): Deed {
  const { answer } = demandCurrent(tx, doer, write);
  if (answer.state !== 'waits') throw conflict('Only an answer that waits for a mark can be set aside.');
  settle(tx, write, { state: 'set aside', setAsideReason: reason, setAsideById: doer.membershipId });
  enter(tx, {
    ...entryFor(doer, write, 'answer set aside'),
    sentence: `${capitalised(nameOf(tx, doer, write))} was set aside.`,
    reason,
  });
  return finish(tx, doer, write, { event: 'answerSetAside', mark: null, takeNext });
}

/** Returns an answer that was set aside to the pile. @throws RequestError 412 with the current state, 403 for all but lead and setter */
export function returnAnswer(tx: Queryable, doer: Doer, write: Write): Deed {
  const { answer } = demandVersion(tx, doer, write);
  if (answer.state !== 'set aside') throw conflict('This answer is not set aside any more.');
  if (!doer.seesAllMarks && answer.setAsideById !== doer.membershipId)
    throw notAllowed('A lead, or who set the answer aside, can return it.');
  settle(tx, write, { state: 'waits' });
  enter(tx, {
    ...entryFor(doer, write, 'answer returned'),
    sentence: `${capitalised(nameOf(tx, doer, write))} was returned to the pile.`,
  });
  return finish(tx, doer, write, { event: 'answerReturned', mark: null, takeNext: false });
}

/** The marks of the criteria that are awarded. */
export function totalOf(marked: readonly MarkedCriterion[], scheme: readonly Criterion[]): number {
  const awarded = new Set(marked.filter((each) => each.awarded).map((each) => each.criterionId));
  const total = scheme.filter((each) => awarded.has(each.id)).reduce((sum, each) => sum + each.marks, 0);
  // Marks may have decimals; 0.1 + 0.2 must be 0.3 on a certificate.
  return Math.round(total * 1e6) / 1e6;
}

/** Every criterion of the scheme exactly once, in its order. @throws RequestError 400 */
export function settledCriteria(sent: readonly MarkedCriterion[], scheme: readonly Criterion[]): MarkedCriterion[] {
  for (const [index, each] of sent.entries()) {
    if (!scheme.some((its) => its.id === each.criterionId))
      throw invalidField(['criteria', index, 'criterionId'], 'The mark scheme has no such criterion.');
    if (sent.findIndex((other) => other.criterionId === each.criterionId) !== index)
      throw invalidField(['criteria', index, 'criterionId'], 'A criterion is settled once.');
  }
  return scheme.map(({ id, name }) => {
    const found = sent.find((each) => each.criterionId === id);
    if (!found) throw invalidField(['criteria'], `Say whether ${name} is awarded.`);
    return { criterionId: id, awarded: found.awarded };
  });
}

function demandChangeable(doer: Doer, before: MarkRow | null, reason: string | undefined): void {
  if (!before || before.markerId === doer.membershipId) return;
  if (!doer.seesAllMarks) throw notAllowed('This answer has a mark that is not yours; only a lead can change it.');
  if (!reason) throw invalidField(['reason'], 'Give a reason: this changes a mark that is not yours.');
}

function demandVersion(tx: Queryable, doer: Doer, write: Write) {
  if (!marksAreGiven(doer.found.set.stage))
    throw conflict('Marks of this set cannot be changed now: it is not closed yet, or is released.');
  const found = findAnswer(tx, write.answerId);
  if (found.script.releasedAt !== null)
    throw conflict('The marks of this script are released to its student already, so they cannot be changed here.');
  if (found.answer.version !== write.version)
    throw staleAnswer(tx, doer, write, 'This answer changed meanwhile. What you typed is kept.');
  return found;
}

/** The answer as it is, provided that the bench still holds it and nobody changed it. */
function demandCurrent(tx: Queryable, doer: Doer, write: Write) {
  const found = demandVersion(tx, doer, write);
  const hold = activeHold(tx, write.answerId, write.now);
  if (hold?.membershipId === doer.membershipId && hold.benchId === doer.benchId) return found;
  throw staleAnswer(
    tx,
    doer,
    write,
    hold && hold.membershipId !== doer.membershipId
      ? 'A colleague holds this answer now. What you typed is kept.'
      : 'You do not hold this answer any more. What you typed is kept; take it in hand again.',
  );
}

function staleAnswer(tx: Queryable, doer: Doer, write: Write, detail: string) {
  return stale(detail, current(tx, doer, write));
}

function current(tx: Queryable, doer: Doer, write: Pick<Write, 'answerId' | 'now'>): CurrentAnswer {
  return presentCurrent(tx, doer, write.answerId, write.now);
}

function settle(
  tx: Queryable,
  write: Write,
  next: {
    state: 'waits' | 'marked' | 'set aside';
    standingMarkId?: string | null;
    setAsideReason?: string;
    setAsideById?: string;
  },
): void {
  const changed = tx
    .update(answers)
    .set({ setAsideReason: null, setAsideById: null, anotherLook: null, ...next, version: write.version + 1 })
    .where(and(eq(answers.id, write.answerId), eq(answers.version, write.version)))
    .run();
  if (changed.changes !== 1) throw new Error('An answer changed inside the transaction that had read its version.');
}

function markOf(tx: Queryable, markId: string): MarkRow {
  const row = tx.select().from(marks).where(eq(marks.id, markId)).get();
  if (!row) throw new Error('A mark that is named does not exist.');
  return row;
}

/** The marks of an answer that were taken back, each with the one that stood again for it, from the record. */
function takenBack(tx: Queryable, answerId: string) {
  return tx
    .select({ before: record.before, after: record.after })
    .from(record)
    .where(and(eq(record.thing, 'answer'), eq(record.thingId, answerId), eq(record.action, 'mark taken back')))
    .all()
    .map(({ before, after }) => ({ taken: idIn(before), restored: idIn(after) }));
}

function idIn(value: unknown): string | null {
  return (value as { markId?: string } | null)?.markId ?? null;
}

function markOfKey(tx: Queryable, write: KeyedWrite): MarkRow | undefined {
  return tx
    .select()
    .from(marks)
    .where(and(eq(marks.answerId, write.answerId), eq(marks.idempotencyKey, write.idempotencyKey)))
    .get();
}

/** A first mark, or the next in the chain of those that replaced each other. */
export function appendMark(
  tx: Queryable,
  write: Pick<KeyedWrite, 'answerId' | 'now' | 'idempotencyKey'>,
  content: Pick<MarkRow, 'markerId' | 'criteria' | 'total' | 'remark' | 'reason'> &
    Partial<Pick<MarkRow, 'patternApplicationId'>>,
): MarkRow {
  const ofAnswer = and(eq(marks.answerId, write.answerId), eq(marks.kind, 'first'));
  const replaced = tx
    .select({ id: marks.replacesId })
    .from(marks)
    .where(ofAnswer)
    .all()
    .flatMap((row) => row.id ?? []);
  const last = tx
    .select({ id: marks.id })
    .from(marks)
    .where(and(ofAnswer, notInArray(marks.id, replaced)))
    .orderBy(desc(marks.at))
    .get();
  return tx
    .insert(marks)
    .values({
      id: newId(),
      answerId: write.answerId,
      kind: 'first',
      ...content,
      at: write.now,
      replacesId: last?.id ?? null,
      idempotencyKey: write.idempotencyKey,
    })
    .returning()
    .get();
}

/** The same key came again: the bench gets the mark it made, and the answer as it is now. */
function repeated(tx: Queryable, doer: Doer, write: KeyedWrite, row: MarkRow): Deed {
  if (row.markerId !== doer.membershipId) throw conflict('This key was used by somebody else.');
  const answer = current(tx, doer, write);
  return {
    pileId: doer.pileId,
    outcome: { answer, mark: presentMark(row), version: answer.version, held: heldNow(tx, doer, write.now) },
    told: {
      event: null,
      byId: doer.membershipId,
      sequence: answer.sequence,
      markerId: row.markerId,
      total: row.total,
      holds: null,
    },
  };
}

function finish(
  tx: Queryable,
  doer: Doer,
  write: Write,
  done: { event: 'answerMarked' | 'answerSetAside' | 'answerReturned'; mark: MarkRow | null; takeNext: boolean },
): Deed {
  const sequence = nextSequence(tx, doer.pileId);
  // Whoever marks or sets aside has done with it; others are told by the same fact.
  if (done.event !== 'answerReturned') tx.delete(holds).where(eq(holds.answerId, write.answerId)).run();
  const taking = done.takeNext ? takeHolds(tx, doer, { after: write.answerId }, write.now) : null;
  const answer = current(tx, doer, write);
  return {
    pileId: doer.pileId,
    outcome: {
      answer,
      mark: done.mark && presentMark(done.mark),
      version: answer.version,
      held: taking?.held ?? heldNow(tx, doer, write.now),
    },
    told: {
      event: done.event,
      byId: doer.membershipId,
      sequence,
      markerId: done.mark?.markerId ?? null,
      total: done.mark?.total ?? null,
      holds: taking?.change ?? null,
    },
  };
}

function entryFor(doer: Doer, write: Write, action: string) {
  return {
    at: write.now,
    actorId: doer.userId,
    courseId: doer.found.set.courseId,
    action,
    thing: 'answer',
    thingId: write.answerId,
  };
}

/** "answer K7QF to set 4, 2 (b)". */
function nameOf(tx: Queryable, doer: Doer, write: Pick<Write, 'answerId'>): string {
  const { set, setProblem, partLabel } = doer.found;
  const { code } = findAnswer(tx, write.answerId);
  return `answer ${code} to set ${String(set.number)}, ${String(setProblem.position)} (${partLabel})`;
}

function capitalised(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
