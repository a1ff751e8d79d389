import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { piles, sets } from '@drizzle/schema';
import { can, type SignedIn } from '../access/policy';
import { mayReadProblem } from '../access/problem-readers';

/** Those who watch a pile and see their own marks only, and those who may see every mark. */
export const pileRoom = (pileId: string) => `pile:${pileId}`;
export const pileMarksRoom = (pileId: string) => `pile:${pileId}:marks`;

/** All open connections of one person. */
export const personRoom = (userId: string) => `person:${userId}`;

/** The teaching team's and the students' news of a course. */
export const teamRoom = (courseId: string) => `course:${courseId}:team`;
export const studentsRoom = (courseId: string) => `course:${courseId}:students`;

/** Those who have a problem open. */
export const problemRoom = (problemId: string) => `problem:${problemId}`;

/** The room of a problem that a person may enter; null where they may not. */
export function roomOfProblem(tx: Queryable, person: SignedIn, problemId: string): string | null {
  return mayReadProblem(tx, person, problemId) ? problemRoom(problemId) : null;
}

/** What a person may watch of a pile, by the same policy that HTTP uses, and as whom; null where they may not. */
export function seatAt(
  tx: Queryable,
  person: SignedIn,
  pileId: string,
): { readonly room: string; readonly membershipId: string } | null {
  const course = tx
    .select({ courseId: sets.courseId })
    .from(piles)
    .innerJoin(sets, eq(sets.id, piles.setId))
    .where(eq(piles.id, pileId))
    .get();
  const membership = course && person.memberships.get(course.courseId);
  if (!membership || !can(person, 'read piles', course.courseId)) return null;
  const room = can(person, 'see all marks', course.courseId) ? pileMarksRoom(pileId) : pileRoom(pileId);
  return { room, membershipId: membership.id };
}

/** The room of a course that a person may enter; null where they may not. */
export function roomOfCourse(person: SignedIn, courseId: string): string | null {
  if (can(person, 'read sets', courseId)) return teamRoom(courseId);
  return can(person, 'answer a sheet', courseId) ? studentsRoom(courseId) : null;
}
