import { and, count, eq, isNull, like, or, type SQL } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { memberships, users } from '@drizzle/schema';
import type { Member } from '@shared/courses';
import type { Role } from '@shared/primitives';
import type { SignedIn } from '../access/policy';
import { conflict, notFound } from '../http/errors';
import { newId } from '../http/new-id';

const pageSize = 50;
const hues = 8;

/** A person who is or was in a course, by membership. @throws RequestError 404 */
export function findMember(tx: Queryable, courseId: string, membershipId: string) {
  const row = selectMembers(tx)
    .where(and(eq(memberships.id, membershipId), eq(memberships.courseId, courseId)))
    .get();
  if (!row) throw notFound('person');
  return row;
}

/** A page of the people in a course, by name. */
export function listMembers(
  tx: Queryable,
  courseId: string,
  filter: { search: string; role?: Role | undefined; page: number },
): { items: Member[]; total: number } {
  const conditions: (SQL | undefined)[] = [eq(memberships.courseId, courseId), isNull(memberships.removedAt)];
  if (filter.role) conditions.push(eq(memberships.role, filter.role));
  const term = `%${filter.search}%`;
  if (filter.search) conditions.push(or(like(users.name, term), like(users.email, term)));
  const where = and(...conditions);
  const total =
    tx.select({ n: count() }).from(memberships).innerJoin(users, eq(users.id, memberships.userId)).where(where).get()
      ?.n ?? 0;
  const rows = selectMembers(tx)
    .where(where)
    .orderBy(users.name)
    .limit(pageSize)
    .offset((filter.page - 1) * pageSize)
    .all();
  return { items: rows.map(presentMember), total };
}

/** What adding a person did. */
export interface Joined {
  readonly membershipId: string;
  readonly userId: string;
  /** Whether they have no password yet, and need an invitation. */
  readonly needsInvitation: boolean;
}

/**
 * Adds a person to a course, making their account where there is none. Somebody who was taken out comes back.
 *
 * @throws RequestError 409 if they are in the course already
 */
export function joinCourse(
  tx: Queryable,
  courseId: string,
  person: { name: string; email: string; role: Role },
  now: number,
): Joined {
  const found = tx.select().from(users).where(eq(users.email, person.email)).get();
  const userId = found?.id ?? newId();
  if (!found) tx.insert(users).values({ id: userId, name: person.name, email: person.email, createdAt: now }).run();
  const here = tx
    .select()
    .from(memberships)
    .where(and(eq(memberships.courseId, courseId), eq(memberships.userId, userId)))
    .get();
  if (here?.removedAt === null)
    throw conflict(`${found?.name ?? person.name} is in this course already, as ${here.role}.`);
  const membershipId = here?.id ?? newId();
  const place = { role: person.role, removedAt: null, ...benchTokens(tx, courseId, membershipId, person) };
  if (here) tx.update(memberships).set(place).where(eq(memberships.id, membershipId)).run();
  else
    tx.insert(memberships)
      .values({ id: membershipId, courseId, userId, createdAt: now, ...place })
      .run();
  return { membershipId, userId, needsInvitation: !found?.passwordHash };
}

/** Initials and hue for the bench, for those who mark; the least used hue of the course. */
export function benchTokens(
  tx: Queryable,
  courseId: string,
  membershipId: string,
  person: { name: string; role: Role },
) {
  if (person.role === 'student') return { initials: null, hue: null };
  const team = tx
    .select({ id: memberships.id, initials: memberships.initials, hue: memberships.hue })
    .from(memberships)
    .where(and(eq(memberships.courseId, courseId), isNull(memberships.removedAt)))
    .all()
    .filter((each) => each.id !== membershipId);
  const uses = Array.from({ length: hues }, (_, index) => team.filter((each) => each.hue === index + 1).length);
  const taken = new Set(team.map((each) => each.initials));
  return { initials: freeInitials(person.name, taken), hue: uses.indexOf(Math.min(...uses)) + 1 };
}

/** Initials of first and last name; where a colleague has the same, with more of the last name or a number. */
function freeInitials(name: string, taken: ReadonlySet<string | null>): string {
  const words = name.split(/\s+/).filter(Boolean);
  const first = (words[0]?.[0] ?? '?').toUpperCase();
  const last = words.length > 1 ? (words.at(-1) ?? '') : '';
  const candidates = [first + last.slice(0, 1).toUpperCase(), first + last.slice(0, 2)];
  for (let number = 2; number < 100; number += 1)
    candidates.push(`${first}${last.slice(0, 1).toUpperCase()}${String(number)}`);
  return candidates.find((each) => !taken.has(each)) ?? first;
}

function selectMembers(tx: Queryable) {
  return tx
    .select({ membership: memberships, user: users })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId));
}

/** A member as leads see them. */
export function presentMember(row: {
  membership: typeof memberships.$inferSelect;
  user: typeof users.$inferSelect;
}): Member {
  return {
    membershipId: row.membership.id,
    userId: row.user.id,
    name: row.user.name,
    email: row.user.email,
    role: row.membership.role,
    initials: row.membership.initials,
    hue: row.membership.hue,
    hasPassword: row.user.passwordHash !== null,
  };
}

/**
 * Whether somebody may be given the link with which another person sets their first password: who has it can become that
 * person, in every course. A lead may for people who are in no course but theirs, and never for an administrator.
 */
export function mayHandOverLink(
  tx: Queryable,
  by: SignedIn,
  account: Pick<typeof users.$inferSelect, 'id' | 'isAdministrator'>,
): boolean {
  if (by.isAdministrator) return true;
  if (account.isAdministrator) return false;
  const places = tx
    .select({ courseId: memberships.courseId })
    .from(memberships)
    .where(eq(memberships.userId, account.id))
    .all();
  return places.every(({ courseId }) => by.memberships.get(courseId)?.role === 'lead');
}
