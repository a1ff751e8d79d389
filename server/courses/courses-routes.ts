import { and, count, desc, eq, inArray, isNull } from 'drizzle-orm';
import { courseRoutes, type Course } from '@shared/courses';
import type { Queryable } from '@drizzle/client';
import { courses, memberships } from '@drizzle/schema';
import { can, demand, type SignedIn } from '../access/policy';
import { linkWith, makeToken } from '../accounts/tokens';
import type { Context } from '../context';
import { conflict, invalidInput, notAllowed, notFound, stale } from '../http/errors';
import { newId } from '../http/new-id';
import type { Serve } from '../http/serve';
import { invite } from '../mail/invitations';
import { enter } from '../record/enter';
import { conventionOf } from './convention';
import { benchTokens, findMember, joinCourse, listMembers, mayHandOverLink, presentMember } from './members';
import { readRoster } from './roster';

/** Courses and their people. */
export function addCourseRoutes(serve: Serve, context: Context): void {
  const { db, clock, config } = context;

  serve(courseRoutes.courses, ({ user }) => {
    const mine = [...user.memberships.keys()];
    const where = user.isAdministrator ? undefined : inArray(courses.id, mine);
    const items = db.select().from(courses).where(where).orderBy(desc(courses.createdAt)).all().map(presentCourse);
    return { items, total: items.length };
  });

  serve(courseRoutes.createCourse, ({ user, body }) => {
    demand(user, 'create a course');
    return db.transaction(
      (tx) => {
        const { convention, ...fields } = body;
        const row = { id: newId(), ...fields, ...convention, createdAt: clock.now(), version: 1 };
        tx.insert(courses).values(row).run();
        const lead = { id: newId(), courseId: row.id, userId: user.id, role: 'lead' as const, createdAt: clock.now() };
        tx.insert(memberships)
          .values({ ...lead, ...benchTokens(tx, row.id, lead.id, { name: user.name, role: 'lead' }) })
          .run();
        enterCourse(tx, user, row.id, 'course created', row.id, `${user.name} created ${row.title}.`);
        return presentCourse(row);
      },
      { behavior: 'immediate' },
    );
  });

  serve(courseRoutes.course, ({ user, params }) => {
    if (!can(user, 'read a course', params.courseId)) throw notFound('course');
    return presentCourse(findCourse(db, params.courseId));
  });

  serve(courseRoutes.changeCourse, ({ user, params, body, version }) => {
    if (!can(user, 'read a course', params.courseId)) throw notFound('course');
    demand(user, 'change a course', params.courseId);
    return db.transaction(
      (tx) => {
        const before = findCourse(tx, params.courseId);
        if (before.version !== version)
          throw stale('Somebody else changed the course while you wrote.', presentCourse(before));
        const { convention, ...fields } = body;
        const after = { ...before, ...fields, ...convention, version: version + 1 };
        tx.update(courses).set(after).where(eq(courses.id, before.id)).run();
        enter(tx, {
          at: clock.now(),
          actorId: user.id,
          courseId: before.id,
          action: 'course changed',
          thing: 'course',
          thingId: before.id,
          sentence: `${user.name} changed title, term, zone or convention of the course.`,
          before: presentCourse(before),
          after: presentCourse(after),
        });
        return presentCourse(after);
      },
      { behavior: 'immediate' },
    );
  });

  serve(courseRoutes.people, ({ user, params, query }) => {
    demand(user, 'read people', params.courseId);
    return listMembers(db, params.courseId, query);
  });

  serve(courseRoutes.addPerson, ({ user, params, body }) => {
    demand(user, 'change people', params.courseId);
    return db.transaction(
      (tx) => {
        const course = findCourse(tx, params.courseId);
        const joined = joinCourse(tx, course.id, body, clock.now());
        if (joined.needsInvitation) invite(tx, { id: joined.userId, name: body.name }, course.title, clock.now());
        const member = presentMember(findMember(tx, course.id, joined.membershipId));
        enterCourse(tx, user, course.id, 'person added', joined.membershipId, `${user.name} added a ${body.role}.`);
        return member;
      },
      { behavior: 'immediate' },
    );
  });

  serve(courseRoutes.changePerson, ({ user, params, body }) => {
    demand(user, 'change people', params.courseId);
    return db.transaction(
      (tx) => {
        const before = findMember(tx, params.courseId, params.membershipId);
        if (before.membership.role === 'lead' && body.role !== 'lead') refuseLastLead(tx, params.courseId);
        const tokens = benchTokens(tx, params.courseId, params.membershipId, {
          name: before.user.name,
          role: body.role,
        });
        const keep = before.membership.hue !== null && body.role !== 'student';
        tx.update(memberships)
          .set({ role: body.role, ...(keep ? {} : tokens) })
          .where(eq(memberships.id, params.membershipId))
          .run();
        enterCourse(
          tx,
          user,
          params.courseId,
          'role changed',
          params.membershipId,
          `${user.name} changed a person’s role from ${before.membership.role} to ${body.role}.`,
        );
        return presentMember(findMember(tx, params.courseId, params.membershipId));
      },
      { behavior: 'immediate' },
    );
  });

  serve(courseRoutes.removePerson, ({ user, params }) => {
    demand(user, 'change people', params.courseId);
    db.transaction(
      (tx) => {
        const row = findMember(tx, params.courseId, params.membershipId);
        if (row.membership.role === 'lead') refuseLastLead(tx, params.courseId);
        tx.update(memberships).set({ removedAt: clock.now() }).where(eq(memberships.id, row.membership.id)).run();
        enterCourse(
          tx,
          user,
          params.courseId,
          'person removed',
          row.membership.id,
          `${user.name} took a ${row.membership.role} out of the course.`,
        );
      },
      { behavior: 'immediate' },
    );
    return {};
  });

  serve(courseRoutes.restorePerson, ({ user, params }) => {
    demand(user, 'change people', params.courseId);
    return db.transaction(
      (tx) => {
        const row = findMember(tx, params.courseId, params.membershipId);
        tx.update(memberships).set({ removedAt: null }).where(eq(memberships.id, row.membership.id)).run();
        enterCourse(
          tx,
          user,
          params.courseId,
          'person returned',
          row.membership.id,
          `${user.name} took back the removal of a ${row.membership.role}.`,
        );
        return presentMember(findMember(tx, params.courseId, params.membershipId));
      },
      { behavior: 'immediate' },
    );
  });

  serve(courseRoutes.invitationLink, ({ user, params }) => {
    demand(user, 'change people', params.courseId);
    const row = findMember(db, params.courseId, params.membershipId);
    if (row.user.passwordHash !== null)
      throw conflict(`${row.user.name} has a password already and can set a new one from the sign-in page.`);
    const course = findCourse(db, params.courseId);
    const byMail = config.smtpUrl !== undefined;
    if (!byMail && !mayHandOverLink(db, user, row.user))
      throw notAllowed(
        `${row.user.name} belongs to another course too, or looks after this installation. An administrator can hand over the link.`,
      );
    enterCourse(
      db,
      user,
      course.id,
      'invited again',
      row.membership.id,
      `${user.name} invited a ${row.membership.role} again.`,
    );
    const { secret, expiresAt } = makeToken(db, 'invitation', row.user.id, clock.now());
    if (byMail) invite(db, row.user, course.title, clock.now());
    return { link: byMail ? null : linkWith(config.origin, secret), expiresAt };
  });

  serve(courseRoutes.previewRoster, ({ user, params, body }) => {
    demand(user, 'change people', params.courseId);
    const rows = readRoster(db, params.courseId, body.csv);
    const wrong = rows.filter((row) => row.outcome === 'wrong').length;
    return { rows, wrong, good: rows.length - wrong };
  });

  serve(courseRoutes.importRoster, ({ user, params, body }) => {
    demand(user, 'change people', params.courseId);
    return db.transaction(
      (tx) => {
        const course = findCourse(tx, params.courseId);
        const rows = readRoster(tx, course.id, body.csv);
        const wrong = rows.filter((row) => row.outcome === 'wrong');
        if (wrong.length > 0)
          throw invalidInput(
            wrong.map((row) => ({
              path: ['csv', row.line],
              message: `Line ${String(row.line)}: ${row.problems.join(' ')}`,
            })),
            `${String(wrong.length)} lines are wrong, so nobody was added.`,
          );
        const coming = rows.filter((row) => row.outcome !== 'already here');
        let invited = 0;
        for (const row of coming) {
          const person = { name: row.name, email: row.email, role: row.role as 'lead' | 'marker' | 'student' };
          const joined = joinCourse(tx, course.id, person, clock.now());
          if (!joined.needsInvitation) continue;
          invite(tx, { id: joined.userId, name: row.name }, course.title, clock.now());
          invited += 1;
        }
        enterCourse(
          tx,
          user,
          course.id,
          'roster imported',
          course.id,
          `${user.name} added ${String(coming.length)} people from a file.`,
        );
        return { added: coming.length, invited, unchanged: rows.length - coming.length };
      },
      { behavior: 'immediate' },
    );
  });

  function enterCourse(
    tx: Queryable,
    user: SignedIn,
    courseId: string,
    action: string,
    thingId: string,
    sentence: string,
  ): void {
    const thing = thingId === courseId ? 'course' : 'membership';
    enter(tx, { at: clock.now(), actorId: user.id, courseId, action, thing, thingId, sentence });
  }
}

/** A course's row. @throws RequestError 404 */
export function findCourse(tx: Queryable, courseId: string) {
  const row = tx.select().from(courses).where(eq(courses.id, courseId)).get();
  if (!row) throw notFound('course');
  return row;
}

function refuseLastLead(tx: Queryable, courseId: string): void {
  const leads = tx
    .select({ n: count() })
    .from(memberships)
    .where(and(eq(memberships.courseId, courseId), eq(memberships.role, 'lead'), isNull(memberships.removedAt)))
    .get();
  if ((leads?.n ?? 0) < 2) throw conflict('A course needs a lead. Make somebody else lead first.');
}

function presentCourse(row: Omit<typeof courses.$inferSelect, 'queryPolicy'>): Course {
  const { id, title, term, timeZone, createdAt, version } = row;
  return { id, title, term, timeZone, convention: conventionOf(row), createdAt, version };
}
