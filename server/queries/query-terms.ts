import { and, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses, sets, type scripts } from '@drizzle/schema';
import { queriesLast, type QueryPolicy } from '@shared/query-policy';
import type { QuerySet } from '@shared/queries';
import type { SignedIn } from '../access/policy';
import { conflict, invalidField, stale } from '../http/errors';
import { enter } from '../record/enter';
import { findSet, isReleased, releasedAt } from '../results/find-set';

type SetRow = typeof sets.$inferSelect;

/** Until when the marks of a script can be queried: the set's own date, or fourteen days after its release. */
export function queriesCloseAt(
  tx: Queryable,
  set: SetRow,
  script: Pick<typeof scripts.$inferSelect, 'releasedAt'> | null,
): number {
  if (set.queriesCloseAt !== null) return set.queriesCloseAt;
  return (script?.releasedAt ?? releasedAt(tx, set.id) ?? 0) + queriesLast;
}

/** A released set with its date, for those who set it. */
export function presentQuerySet(tx: Queryable, set: SetRow): QuerySet {
  return {
    setId: set.id,
    number: set.number,
    title: set.title,
    stage: set.stage,
    closesAt: queriesCloseAt(tx, set, null),
    isChosen: set.queriesCloseAt !== null,
    version: set.version,
  };
}

/** The sets of a course whose marks are out, the newest first. */
export function querySets(tx: Queryable, courseId: string): QuerySet[] {
  return tx
    .select()
    .from(sets)
    .where(eq(sets.courseId, courseId))
    .all()
    .filter(({ stage }) => isReleased(stage))
    .sort((one, other) => other.number - one.number)
    .map((set) => presentQuerySet(tx, set));
}

/** What a query can do to a mark in a course. */
export function policyOf(tx: Queryable, courseId: string): QueryPolicy {
  return (
    tx.select({ policy: courses.queryPolicy }).from(courses).where(eq(courses.id, courseId)).get()?.policy ??
    'raise or lower'
  );
}

/**
 * Sets until when the marks of a set can be queried; null: fourteen days after release.
 *
 * @throws RequestError 412 where the set changed, 400 for a date before the release, 409 before there are marks to query
 */
export function changeClosing(
  tx: Queryable,
  setId: string,
  closesAt: number | null,
  by: { readonly user: Pick<SignedIn, 'id' | 'name'>; readonly version: number; readonly now: number },
): QuerySet {
  const { set } = findSet(tx, setId);
  if (set.version !== by.version)
    throw stale('Somebody else changed the set while you looked at it.', presentQuerySet(tx, set));
  const released = releasedAt(tx, setId);
  if (!isReleased(set.stage) || released === null) throw conflict('The marks of this set are not released yet.');
  if (closesAt !== null && closesAt < released)
    throw invalidField(['closesAt'], 'Queries cannot close before the release.');
  tx.update(sets)
    .set({ queriesCloseAt: closesAt, version: set.version + 1 })
    .where(and(eq(sets.id, setId), eq(sets.version, by.version)))
    .run();
  enter(tx, {
    at: by.now,
    actorId: by.user.id,
    courseId: set.courseId,
    action: 'closing of queries changed',
    thing: 'set',
    thingId: setId,
    sentence: `${by.user.name} changed until when the marks of set ${String(set.number)} can be queried.`,
    before: { closesAt: set.queriesCloseAt },
    after: { closesAt },
  });
  return presentQuerySet(tx, findSet(tx, setId).set);
}

/** Changes what a query can do to a mark in a course, from the next query on. */
export function changePolicy(tx: Queryable, courseId: string, policy: QueryPolicy, user: SignedIn, now: number): void {
  const before = policyOf(tx, courseId);
  if (before === policy) return;
  tx.update(courses).set({ queryPolicy: policy }).where(eq(courses.id, courseId)).run();
  enter(tx, {
    at: now,
    actorId: user.id,
    courseId,
    action: 'policy of queries changed',
    thing: 'course',
    thingId: courseId,
    sentence: `${user.name} changed what a mark query can do: ${policy === 'only raise' ? 'only raise a mark' : 'raise or lower a mark'}.`,
    before: { policy: before },
    after: { policy },
  });
}
