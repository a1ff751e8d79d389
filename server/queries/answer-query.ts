import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { Queryable } from '@drizzle/client';
import { answers, courses, marks, memberships, queryAnswers } from '@drizzle/schema';
import type { newQueryAnswer } from '@shared/queries';
import type { SignedIn } from '../access/policy';
import { conflict, invalidField, notAllowed, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { queueLetter } from '../mail/letters';
import { settledCriteria, totalOf } from '../marking/bench-deeds';
import { findPile, type FoundPile } from '../marking/find-pile';
import { nextSequence } from '../marking/sequence';
import { enter } from '../record/enter';
import { findQuery, gaveTheMark, giversOf, type FoundQuery } from './find-queries';
import { presentQuery } from './present-query';

/** Who answers, and on what state of the answer. */
export interface Answerer {
  readonly user: SignedIn;
  readonly membershipId: string;
  readonly version: number;
  readonly idempotencyKey: string;
  readonly origin: string;
  readonly now: number;
}

/** The pile that changed, with its new number; null where the mark stands. */
export type Changed = { readonly pileId: string; readonly sequence: number } | null;

/**
 * Answers a query: a changed mark is a new row that names the one it replaces; otherwise the mark stands. The student gets
 * a letter that names nobody. The same key twice is the same answer.
 *
 * @throws RequestError 403 for who gave the mark, 409 where it is answered already, 412 where the answer changed, 400 by field
 */
export function answerQuery(
  tx: Queryable,
  queryId: string,
  sent: z.output<typeof newQueryAnswer>,
  by: Answerer,
): Changed {
  const row = findQuery(tx, queryId);
  const { query, answer, answered } = row;
  if (answered?.idempotencyKey === by.idempotencyKey && answered.byId === by.membershipId) return null;
  if (giversOf(tx, [answer]).get(answer.id)?.has(by.membershipId)) throw notAllowed(gaveTheMark);
  if (answered) throw conflict('A colleague has answered this query meanwhile.');
  const { standingMarkId } = answer;
  if (answer.version !== by.version || standingMarkId === null)
    throw stale('The mark changed while you looked at the query.', presentQuery(tx, queryId, by.membershipId));
  const before = tx.select().from(marks).where(eq(marks.id, standingMarkId)).get();
  if (!before) throw new Error('A mark that stands does not exist.');

  const found = findPile(tx, answer.pileId);
  const criteria = sent.criteria === null ? null : settledCriteria(sent.criteria, found.part.criteria);
  const isChanged = criteria !== null && JSON.stringify(criteria) !== JSON.stringify(inOrder(before.criteria, found));
  if (criteria !== null && !isChanged)
    throw invalidField(['criteria'], 'This is the mark that stands. Change a criterion, or say that the mark stands.');
  const total = criteria === null ? before.total : totalOf(criteria, found.part.criteria);
  if (query.policy === 'only raise' && total < before.total)
    throw invalidField(['criteria'], 'The student was told that a query can only raise a mark.');

  const markId = isChanged ? newId() : standingMarkId;
  if (isChanged) {
    tx.insert(marks)
      .values({
        id: markId,
        answerId: answer.id,
        kind: before.kind,
        markerId: by.membershipId,
        criteria,
        total,
        remark: before.remark,
        at: by.now,
        replacesId: before.id,
        reason: sent.words,
        idempotencyKey: `query ${queryId}`,
      })
      .run();
    tx.update(answers)
      .set({ standingMarkId: markId, anotherLook: null, version: answer.version + 1 })
      .where(eq(answers.id, answer.id))
      .run();
  }
  const { idempotencyKey, now: at } = by;
  tx.insert(queryAnswers)
    .values({ id: newId(), queryId, byId: by.membershipId, at, words: sent.words, markId, isChanged, idempotencyKey })
    .run();
  const what = { before: before.total, after: total, isChanged };
  enterAnswer(tx, row, found, by, { ...what, beforeId: before.id, markId, words: sent.words });
  sendAnswer(tx, row, found, by, { ...what, words: sent.words });
  return isChanged ? { pileId: answer.pileId, sequence: nextSequence(tx, answer.pileId) } : null;
}

interface Told {
  readonly before: number;
  readonly after: number;
  readonly isChanged: boolean;
  readonly words: string;
}

const inOrder = (criteria: typeof marks.$inferSelect.criteria, { part }: FoundPile) =>
  part.criteria.map(({ id }) => ({
    criterionId: id,
    awarded: criteria.some((each) => each.criterionId === id && each.awarded),
  }));

function outcomeInWords({ before, after, isChanged }: Told): string {
  if (!isChanged) return `the mark, ${String(before)}, stands`;
  if (before === after) return `the criteria changed, and the mark is ${String(after)} as before`;
  return `the mark went from ${String(before)} to ${String(after)}`;
}

function enterAnswer(
  tx: Queryable,
  { query, script, set }: FoundQuery,
  { setProblem, partLabel }: FoundPile,
  by: Answerer,
  told: Told & { readonly beforeId: string; readonly markId: string },
): void {
  const part = `${String(setProblem.position)} (${partLabel}) of script ${script.code} in set ${String(set.number)}`;
  enter(tx, {
    at: by.now,
    actorId: by.user.id,
    courseId: set.courseId,
    action: 'query answered',
    thing: 'mark query',
    thingId: query.id,
    sentence: `${by.user.name} answered the query on ${part}: ${outcomeInWords(told)}.`,
    before: { answerId: query.answerId, markId: told.beforeId, total: told.before },
    after: { answerId: query.answerId, markId: told.markId, total: told.after },
    reason: told.words,
  });
}

function sendAnswer(
  tx: Queryable,
  { script, set }: FoundQuery,
  { setProblem, partLabel }: FoundPile,
  { origin, now }: Answerer,
  told: Told,
): void {
  const to = tx
    .select({ userId: memberships.userId, course: courses.title })
    .from(memberships)
    .innerJoin(courses, eq(courses.id, memberships.courseId))
    .where(eq(memberships.id, script.membershipId))
    .get();
  if (!to) return;
  queueLetter(tx, {
    kind: 'query answered',
    userId: to.userId,
    subject: `Your query on Set ${String(set.number)} of ${to.course} is answered`,
    text: [
      `Your query on ${String(setProblem.position)} (${partLabel}) of Set ${String(set.number)}, ${set.title}, is answered: ${outcomeInWords(told)}.`,
      told.words,
      `${origin}/courses/${set.courseId}/feedback/${set.id}`,
    ].join('\n\n'),
    now,
  });
}
