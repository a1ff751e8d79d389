import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, markQueries, queryAnswers } from '@drizzle/schema';
import type { NewQuery, OwnQueries } from '@shared/queries';
import { fullMomentOf } from '@shared/times';
import { conflict, invalidField, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { pilesOfSet } from '../marking/find-pile';
import { enter } from '../record/enter';
import { findSet, isReleasedTo } from '../results/find-set';
import { scriptOf } from '../scripts/begin-script';
import { outcomeOf, queriesWhere } from './find-queries';
import { policyOf, queriesCloseAt } from './query-terms';

/** Whose queries, on which set. */
export interface Asker {
  readonly userId: string;
  readonly membershipId: string;
  readonly setId: string;
  readonly now: number;
}

/** A student's own queries on a set. @throws RequestError 404 before its marks are released to them */
export function presentOwnQueries(tx: Queryable, { setId, membershipId, now }: Omit<Asker, 'userId'>): OwnQueries {
  const { set, course, script } = releasedScript(tx, setId, membershipId);
  const columns = new Map(pilesOfSet(tx, setId).map((found) => [found.pile.id, found]));
  const closesAt = queriesCloseAt(tx, set, script);
  return {
    closesAt,
    isOpen: now < closesAt && set.stage !== 'archived',
    policy: policyOf(tx, course.id),
    items: queriesWhere(tx, eq(answers.scriptId, script.id)).flatMap((row) => {
      const found = columns.get(row.answer.pileId);
      if (!found) return [];
      const { id, criterionId, reason, at } = row.query;
      return [
        {
          id,
          position: found.setProblem.position,
          partId: found.part.id,
          partLabel: found.partLabel,
          criterionId,
          criterionName: found.part.criteria.find((each) => each.id === criterionId)?.name ?? null,
          reason,
          at,
          outcome: outcomeOf(row),
        },
      ];
    }),
  };
}

/**
 * Queries the mark that stands for a part. The same key twice is the same query.
 *
 * @throws RequestError 404 before the release, 409 after the closing date and while a query on the part waits, 400 by field
 */
export function askQuery(tx: Queryable, asker: Asker, sent: NewQuery, idempotencyKey: string): void {
  const { set, course, script } = releasedScript(tx, asker.setId, asker.membershipId);
  const found = pilesOfSet(tx, set.id).find(
    ({ setProblem, part }) => setProblem.position === sent.position && part.id === sent.partId,
  );
  if (!found) throw invalidField(['partId'], 'This set has no such part.');
  const criterion = found.part.criteria.find(({ id }) => id === sent.criterionId);
  if (sent.criterionId !== null && !criterion)
    throw invalidField(['criterionId'], 'The mark scheme of this part has no such criterion.');
  const answer = tx
    .select()
    .from(answers)
    .where(and(eq(answers.scriptId, script.id), eq(answers.pileId, found.pile.id)))
    .get();
  if (!answer?.standingMarkId) throw conflict('There is no mark for this part that could be queried.');
  const ofAnswer = eq(markQueries.answerId, answer.id);
  const same = and(ofAnswer, eq(markQueries.idempotencyKey, idempotencyKey));
  if (tx.select({ id: markQueries.id }).from(markQueries).where(same).get()) return;

  const closesAt = queriesCloseAt(tx, set, script);
  if (asker.now >= closesAt || set.stage === 'archived')
    throw conflict(`Marks of this set could be queried until ${fullMomentOf(closesAt, course.timeZone)}.`);
  const waits = tx
    .select({ id: markQueries.id })
    .from(markQueries)
    .leftJoin(queryAnswers, eq(queryAnswers.queryId, markQueries.id))
    .where(and(ofAnswer, isNull(queryAnswers.id)))
    .get();
  if (waits) throw conflict('Your query on this part waits for its answer already.');

  const id = newId();
  tx.insert(markQueries)
    .values({
      id,
      answerId: answer.id,
      markId: answer.standingMarkId,
      criterionId: sent.criterionId,
      reason: sent.reason,
      policy: course.queryPolicy,
      at: asker.now,
      idempotencyKey,
    })
    .run();
  const what = `${criterion ? `${criterion.name} in ` : ''}${String(sent.position)} (${found.partLabel})`;
  enter(tx, {
    at: asker.now,
    actorId: asker.userId,
    courseId: course.id,
    action: 'mark queried',
    thing: 'mark query',
    thingId: id,
    sentence: `The mark of ${what} of script ${script.code} in set ${String(set.number)} was queried.`,
    after: { answerId: answer.id, markId: answer.standingMarkId, criterionId: sent.criterionId },
    reason: sent.reason,
  });
}

function releasedScript(tx: Queryable, setId: string, membershipId: string) {
  const { set, course } = findSet(tx, setId);
  const script = scriptOf(tx, setId, membershipId);
  if (!script || !isReleasedTo(set, script)) throw notFound('feedback');
  return { set, course, script };
}
