import { and, asc, eq, inArray, or } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, courses, markQueries, memberships, record, scripts, sets, users } from '@drizzle/schema';
import type { Look, OwnData, RoleOfDoer } from '@shared/own-data';
import { isReleasedTo } from '../results/find-set';
import { scriptLookedAt } from '../record/record-look';
import type { PersonsScript } from './own-scripts';

type RecordRow = typeof record.$inferSelect;

/** Who did something, as a role: a person learns of nobody's name here. */
function roleOf(tx: Queryable, userId: string, { actorId, courseId }: RecordRow): RoleOfDoer {
  if (actorId === null) return 'the server';
  if (actorId === userId) return 'you';
  const here =
    courseId === null
      ? undefined
      : tx
          .select({ role: memberships.role, removedAt: memberships.removedAt })
          .from(memberships)
          .where(and(eq(memberships.courseId, courseId), eq(memberships.userId, actorId)))
          .get();
  if (here) return here.removedAt === null ? here.role : 'somebody who left';
  const person = tx.select({ isAdministrator: users.isAdministrator }).from(users).where(eq(users.id, actorId)).get();
  return person?.isAdministrator ? 'administrator' : 'somebody who left';
}

/**
 * The record's entries by a person and about them. What was done to a script's answers is there once it is released: before,
 * it would tell how the marking goes. Words are those of the person's own deeds only; others' name colleagues.
 */
export function ownRecord(tx: Queryable, userId: string, own: readonly PersonsScript[]): OwnData['record'] {
  const released = own.filter(({ set, script }) => isReleasedTo(set, script)).map(({ script }) => script.id);
  const answerIds =
    released.length === 0
      ? []
      : tx
          .select({ id: answers.id })
          .from(answers)
          .where(inArray(answers.scriptId, released))
          .all()
          .map(({ id }) => id);
  const queryIds =
    answerIds.length === 0
      ? []
      : tx
          .select({ id: markQueries.id })
          .from(markQueries)
          .where(inArray(markQueries.answerId, answerIds))
          .all()
          .map(({ id }) => id);
  const membershipIds = tx
    .select({ id: memberships.id })
    .from(memberships)
    .where(eq(memberships.userId, userId))
    .all()
    .map(({ id }) => id);
  const theirs = new Set([userId, ...membershipIds, ...released, ...answerIds, ...queryIds]);
  return tx
    .select()
    .from(record)
    .where(or(eq(record.actorId, userId), inArray(record.thingId, [...theirs])))
    .orderBy(asc(record.at))
    .all()
    .map((row) => ({
      at: row.at,
      action: row.action,
      thing: row.thing,
      by: roleOf(tx, userId, row),
      sentence: row.actorId === userId && theirs.has(row.thingId) ? row.sentence : null,
    }));
}

/** In which role others looked at a person's scripts after release, the newest first. */
export function looksAt(tx: Queryable, userId: string): Look[] {
  return tx
    .select({ row: record, set: sets, course: courses.title })
    .from(record)
    .innerJoin(scripts, eq(scripts.id, record.thingId))
    .innerJoin(memberships, eq(memberships.id, scripts.membershipId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .where(and(eq(record.thing, 'script'), eq(record.action, scriptLookedAt), eq(memberships.userId, userId)))
    .orderBy(asc(record.at))
    .all()
    .map(({ row, set, course }) => ({
      at: row.at,
      by: roleOf(tx, userId, row),
      courseTitle: course,
      setNumber: set.number,
      setTitle: set.title,
    }))
    .reverse();
}
