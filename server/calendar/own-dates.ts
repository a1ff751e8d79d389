import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses, memberships, sets } from '@drizzle/schema';
import { fullMomentOf } from '@shared/times';
import { ownTimes } from '../scripts/own-times';
import type { CalendarEvent } from './icalendar';

/**
 * The dates of a person's sets: a student's are their own, adjusted by what a lead granted them. Sets that are being made
 * are in nobody's calendar.
 *
 * @param origin the address that people use
 */
export function ownDates(tx: Queryable, userId: string, origin: string, now: number): CalendarEvent[] {
  const rows = tx
    .select({ set: sets, course: courses, membership: memberships })
    .from(memberships)
    .innerJoin(courses, eq(courses.id, memberships.courseId))
    .innerJoin(sets, eq(sets.courseId, courses.id))
    .where(and(eq(memberships.userId, userId), isNull(memberships.removedAt)))
    .orderBy(asc(courses.createdAt), asc(sets.number))
    .all();
  const host = new URL(origin).hostname;
  return rows.flatMap(({ set, course, membership }) => {
    if (set.stage === 'draft' || set.stage === 'review') return [];
    const isStudent = membership.role === 'student';
    const { dueAt, endsAt } = isStudent
      ? ownTimes(tx, set, membership.id, now)
      : { dueAt: set.closesAt, endsAt: set.lateRule?.until ?? null };
    const place = isStudent ? 'sheets' : membership.role === 'lead' ? 'sets' : 'marking';
    const event = (what: string, at: number | null, verb: string): CalendarEvent[] =>
      at === null
        ? []
        : [
            {
              uid: `${set.id}-${membership.id}-${what}@${host}`,
              at,
              summary: `Set ${String(set.number)} ${verb}: ${set.title}`,
              description: `${course.title}, ${course.term}\n${fullMomentOf(at, course.timeZone)}`,
              url: `${origin}/courses/${course.id}/${place}${membership.role === 'marker' ? '' : `/${set.id}`}`,
            },
          ];
    return [
      ...event('opens', set.opensAt, 'opens'),
      ...event('closes', dueAt, 'closes'),
      ...(endsAt !== null && dueAt !== null && endsAt > dueAt ? event('late', endsAt, 'takes no more late work') : []),
    ];
  });
}
