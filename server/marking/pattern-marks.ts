import { and, eq, inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, holds, marks, patternApplications, scripts } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { MarkedCriterion } from '@shared/marking';
import type { PatternOutcome, PatternUndone } from '@shared/pattern-marks';
import type { Criterion } from '@shared/problems';
import { conflict, notAllowed, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { enterStage } from '../sets/enter-stage';
import { appendMark, settledCriteria, totalOf, type Doer } from './bench-deeds';
import { findPile, marksAreGiven } from './find-pile';
import { activeHold, heldNow } from './holds';
import { reachOf } from './pattern-reach';
import { nextSequence, sequenceOf } from './sequence';

/** What is applied: the criteria of the answer in hand, to the answers that a preview named. */
export interface Application {
  readonly answerId: string;
  readonly criteria: readonly MarkedCriterion[];
  readonly remark: string;
  readonly answers: readonly { readonly answerId: string; readonly version: number }[];
  readonly idempotencyKey: string;
}

/**
 * Marks the named answers of a pattern alike, in the transaction given, each by a mark of its own that says it was not
 * seen singly. Criteria of accuracy are those of the answer in hand; marks of method are what the check of each answer
 * proposes. What changed since the preview, or is held by a colleague, is left alone. The same key twice is the same act.
 *
 * @returns what was done; `isNew` says whether there is something to tell
 * @throws RequestError 409 where the answer is not in hand, marks are not given now, or the pattern has nothing in common
 */
export function applyToPattern(
  tx: Queryable,
  doer: Doer,
  application: Application,
  now: number,
): { readonly outcome: PatternOutcome; readonly isNew: boolean } {
  const before = applicationOfKey(tx, doer, application.idempotencyKey);
  if (before) return { outcome: repeated(tx, doer, before.id, now), isNew: false };
  const { found } = doer;
  if (!marksAreGiven(found.set.stage)) throw conflict('This pile is not open for marking.');
  const hold = activeHold(tx, application.answerId, now);
  if (hold?.membershipId !== doer.membershipId || hold.benchId !== doer.benchId || hold.kind !== 'in hand')
    throw conflict('Take an answer of the pattern in hand first; its marks are what is applied.');
  const criteria = settledCriteria(application.criteria, found.part.criteria);
  const reach = reachOf(tx, found, application.answerId, doer.membershipId, now);
  if (reach.refused !== null) throw conflict(reach.refused);

  const wanted = new Map(application.answers.map((each) => [each.answerId, each.version]));
  const due = reach.marks.filter((each) => wanted.get(each.answerId) === each.version);
  if (due.length === 0)
    throw conflict('Every answer of the preview was marked, taken or changed meanwhile. Nothing was applied.');
  const id = newId();
  tx.insert(patternApplications)
    .values({
      id,
      pileId: doer.pileId,
      pattern: reach.pattern,
      byId: doer.membershipId,
      at: now,
      idempotencyKey: application.idempotencyKey,
    })
    .run();
  for (const { answerId, version } of due) {
    const check = reach.checks.get(answerId);
    if (!check) throw new Error('An answer without a check was reached by its pattern.');
    const own = criteriaFor(criteria, found.part.criteria, check);
    const row = appendMark(
      tx,
      { answerId, now, idempotencyKey: application.idempotencyKey },
      {
        markerId: doer.membershipId,
        criteria: own,
        total: totalOf(own, found.part.criteria),
        remark: application.remark,
        reason: null,
        patternApplicationId: id,
      },
    );
    moveOn(tx, answerId, version, { state: 'marked', standingMarkId: row.id });
    tx.delete(holds).where(eq(holds.answerId, answerId)).run();
  }
  if (found.set.stage === 'closed') enterStage(tx, found.set, 'marking', doer, now);
  enter(tx, {
    ...entryFor(doer, id, now, 'pattern marked'),
    sentence: `${countOf(due.length)} of the pattern “${reach.name}” of ${nameOf(doer)} ${due.length === 1 ? 'was' : 'were'} marked alike, not seen singly.`,
    after: { pattern: reach.pattern, criteria, answers: due.map(({ code }) => code) },
  });
  const marked = due.map(({ answerId, code }) => ({ answerId, code }));
  return {
    isNew: true,
    outcome: {
      applicationId: id,
      marked,
      skipped: codesOf(
        tx,
        [...wanted.keys()].filter((each) => !marked.some(({ answerId }) => answerId === each)),
        doer.pileId,
      ),
      sequence: nextSequence(tx, doer.pileId),
      held: heldNow(tx, doer, now),
    },
  };
}

/**
 * Takes back every mark of an application that still stands as it was given; its answer waits again. Marks that somebody
 * changed or took back since, and answers that a colleague holds, stay as they are. Doing it twice changes nothing more.
 *
 * @throws RequestError 404, 403 where it is a colleague's, 409 where marks are not given now
 */
export function undoApplication(
  tx: Queryable,
  doer: Doer,
  applicationId: string,
  now: number,
): { readonly outcome: PatternUndone; readonly isNew: boolean } {
  const application = findApplication(tx, applicationId);
  if (!doer.seesAllMarks && application.byId !== doer.membershipId)
    throw notAllowed('These marks are not yours; only a lead can take them back.');
  if (!marksAreGiven(doer.found.set.stage)) throw conflict('Marks of this set cannot be changed now.');
  if (application.undoneAt !== null)
    return { isNew: false, outcome: { restored: [], kept: [], sequence: sequenceOf(tx, doer.pileId) } };
  const given = tx
    .select({ mark: marks, answer: answers, code: scripts.code, releasedAt: scripts.releasedAt })
    .from(marks)
    .innerJoin(answers, eq(answers.id, marks.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(eq(marks.patternApplicationId, applicationId))
    .all();
  const restored: PatternUndone['restored'] = [];
  const kept: PatternUndone['kept'] = [];
  for (const { mark, answer, code, releasedAt } of given) {
    const named = { answerId: answer.id, code };
    const holder = activeHold(tx, answer.id, now);
    const isHeld = holder !== undefined && holder.membershipId !== doer.membershipId;
    if (answer.standingMarkId !== mark.id || answer.state !== 'marked' || isHeld || releasedAt !== null) {
      kept.push(named);
      continue;
    }
    moveOn(tx, answer.id, answer.version, { state: 'waits', standingMarkId: null });
    enter(tx, {
      ...entryFor(doer, answer.id, now, 'mark taken back'),
      thing: 'answer',
      sentence: `The mark of answer ${code} to ${nameOf(doer)}, ${String(mark.total)}, was taken back with those of its pattern.`,
      before: { markId: mark.id, total: mark.total },
      after: null,
    });
    restored.push(named);
  }
  tx.update(patternApplications).set({ undoneAt: now }).where(eq(patternApplications.id, applicationId)).run();
  enter(tx, {
    ...entryFor(doer, applicationId, now, 'pattern marks taken back'),
    sentence: `${countOf(restored.length)} of a pattern of ${nameOf(doer)} ${restored.length === 1 ? 'waits' : 'wait'} again; ${String(kept.length)} had changed and stayed.`,
    after: { restored: restored.map(({ code }) => code), kept: kept.map(({ code }) => code) },
  });
  return { isNew: true, outcome: { restored, kept, sequence: nextSequence(tx, doer.pileId) } };
}

/** An application by its id. @throws RequestError 404 */
export function findApplication(tx: Queryable, applicationId: string) {
  const row = tx.select().from(patternApplications).where(eq(patternApplications.id, applicationId)).get();
  if (!row) throw notFound('application to a pattern');
  return row;
}

/** Accuracy as in hand; method as the check of this answer proposes; nobody has seen its page. */
function criteriaFor(
  inHand: readonly MarkedCriterion[],
  scheme: readonly Criterion[],
  check: Pick<CheckResult, 'proposed'>,
): MarkedCriterion[] {
  return inHand.map((each) => {
    const its = scheme.find(({ id }) => id === each.criterionId);
    const byCheck = its?.kind === 'M' || its?.kind === 'B' || its?.awardedBy.length === 0;
    return byCheck ? { ...each, awarded: check.proposed.includes(each.criterionId) } : each;
  });
}

function moveOn(
  tx: Queryable,
  answerId: string,
  version: number,
  next: { readonly state: 'waits' | 'marked'; readonly standingMarkId: string | null },
): void {
  const changed = tx
    .update(answers)
    .set({ ...next, setAsideReason: null, setAsideById: null, anotherLook: null, version: version + 1 })
    .where(and(eq(answers.id, answerId), eq(answers.version, version)))
    .run();
  if (changed.changes !== 1) throw new Error('An answer changed inside the transaction that had read its version.');
}

function applicationOfKey(tx: Queryable, doer: Doer, idempotencyKey: string) {
  return tx
    .select()
    .from(patternApplications)
    .where(
      and(
        eq(patternApplications.pileId, doer.pileId),
        eq(patternApplications.byId, doer.membershipId),
        eq(patternApplications.idempotencyKey, idempotencyKey),
      ),
    )
    .get();
}

function repeated(tx: Queryable, doer: Doer, applicationId: string, now: number): PatternOutcome {
  const ids = tx
    .select({ id: marks.answerId })
    .from(marks)
    .where(eq(marks.patternApplicationId, applicationId))
    .all()
    .map(({ id }) => id);
  return {
    applicationId,
    marked: codesOf(tx, ids, doer.pileId),
    skipped: [],
    held: heldNow(tx, doer, now),
    sequence: findPile(tx, doer.pileId).pile.sequence,
  };
}

function codesOf(tx: Queryable, ids: readonly string[], pileId: string) {
  if (ids.length === 0) return [];
  return tx
    .select({ answerId: answers.id, code: scripts.code })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(inArray(answers.id, [...ids]), eq(answers.pileId, pileId)))
    .all();
}

function entryFor(doer: Doer, thingId: string, at: number, action: string) {
  return {
    at,
    actorId: doer.userId,
    courseId: doer.found.set.courseId,
    action,
    thing: 'pattern application',
    thingId,
  };
}

function countOf(n: number): string {
  return n === 1 ? '1 answer' : `${String(n)} answers`;
}

/** "set 4, 2 (b)". */
function nameOf({ found: { set, setProblem, partLabel } }: Doer): string {
  return `set ${String(set.number)}, ${String(setProblem.position)} (${partLabel})`;
}
