import { and, desc, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses, memberships, users } from '@drizzle/schema';
import type { Session } from '@shared/accounts';
import { conventionOf } from '../courses/convention';
import { notFound } from '../http/errors';

/** Who is signed in, with their courses, newest first. */
export function presentSession(tx: Queryable, userId: string): Session {
  const person = tx.select().from(users).where(eq(users.id, userId)).get();
  if (!person) throw notFound('account');
  const rows = tx
    .select({ membership: memberships, course: courses })
    .from(memberships)
    .innerJoin(courses, eq(courses.id, memberships.courseId))
    .where(and(eq(memberships.userId, userId), isNull(memberships.removedAt)))
    .orderBy(desc(courses.createdAt))
    .all();
  const { id, name, email, isAdministrator } = person;
  return {
    person: { id, name, email, isAdministrator },
    courses: rows.map(({ membership, course }) => ({
      courseId: course.id,
      membershipId: membership.id,
      title: course.title,
      term: course.term,
      timeZone: course.timeZone,
      convention: conventionOf(course),
      role: membership.role,
    })),
  };
}
