import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses, memberships, scripts, sets, setStages, users } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';
import { notFound } from '../http/errors';

/** Stages in which marks and feedback are the students' to see. */
const released: ReadonlySet<SetStage> = new Set(['released', 'archived']);

/** Whether marks and feedback are the students' to see. */
export function isReleased(stage: SetStage): boolean {
  return released.has(stage);
}

/** Whether marks and feedback of one script are its student's to see: with the set, or before it. */
export function isReleasedTo(
  set: { readonly stage: SetStage },
  script: Pick<typeof scripts.$inferSelect, 'releasedAt'> | undefined,
): boolean {
  return isReleased(set.stage) || (script !== undefined && script.releasedAt !== null);
}

/** A set with its course. @throws RequestError 404 */
export function findSet(tx: Queryable, setId: string) {
  const row = tx
    .select({ set: sets, course: courses })
    .from(sets)
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .where(eq(sets.id, setId))
    .get();
  if (!row) throw notFound('set');
  return row;
}

/** The stages that a set has entered, in time. */
export function stagesOf(tx: Queryable, setId: string) {
  return tx
    .select({ stage: setStages.stage, at: setStages.at })
    .from(setStages)
    .where(eq(setStages.setId, setId))
    .orderBy(asc(setStages.at))
    .all();
}

/** When a set was released last; null where it is not released. */
export function releasedAt(tx: Queryable, setId: string): number | null {
  return (
    tx
      .select({ at: setStages.at })
      .from(setStages)
      .where(and(eq(setStages.setId, setId), eq(setStages.stage, 'released')))
      .orderBy(desc(setStages.at))
      .get()?.at ?? null
  );
}

/** The scripts of a set whose students are in the course still, by code. */
export function scriptsOf(tx: Queryable, setId: string) {
  return tx
    .select({ script: scripts, userId: users.id, name: users.name, email: users.email })
    .from(scripts)
    .innerJoin(memberships, eq(memberships.id, scripts.membershipId))
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(scripts.setId, setId), isNull(memberships.removedAt)))
    .orderBy(asc(scripts.code))
    .all();
}
