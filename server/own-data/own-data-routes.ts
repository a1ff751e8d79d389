import { asc, eq } from 'drizzle-orm';
import { courses, letters, memberships, sessions, users } from '@drizzle/schema';
import { ownDataRoutes, type OwnData } from '@shared/own-data';
import type { Queryable } from '@drizzle/client';
import type { Context } from '../context';
import { notFound } from '../http/errors';
import type { Serve } from '../http/serve';
import { enter } from '../record/enter';
import { looksAt, ownRecord } from './own-record';
import { presentOwnScript, scriptsOfPerson } from './own-scripts';

/** Adds the routes by which people see what is held about them. Anybody who is signed in may, of themselves alone. */
export function addOwnDataRoutes(serve: Serve, { db, clock }: Context): void {
  serve(ownDataRoutes.ownData, ({ user, response }) => {
    const data = presentOwnData(db, user.id, clock.now());
    enter(db, {
      at: clock.now(),
      actorId: user.id,
      action: 'own data taken',
      thing: 'account',
      thingId: user.id,
      sentence: `${user.name} took a copy of what is held about them.`,
    });
    response.attachment('halfsilver-own-data.json');
    return data;
  });

  serve(ownDataRoutes.looks, ({ user }) => {
    const items = looksAt(db, user.id);
    return { items, total: items.length };
  });
}

/** Everything that is held about a person. Nothing of keys, slips, tolerances or other people, and no mark before its release. */
function presentOwnData(tx: Queryable, userId: string, now: number): OwnData {
  const person = tx.select().from(users).where(eq(users.id, userId)).get();
  if (!person) throw notFound('account');
  const own = scriptsOfPerson(tx, userId);
  const { id, name, email, isAdministrator, createdAt, passwordHash } = person;
  return {
    madeAt: now,
    account: { id, name, email, isAdministrator, createdAt, hasPassword: passwordHash !== null },
    // The session library counts in seconds.
    sessions: tx
      .select({ expiresAt: sessions.expiresAt })
      .from(sessions)
      .where(eq(sessions.userId, userId))
      .all()
      .map(({ expiresAt }) => ({ expiresAt: expiresAt * 1000 })),
    memberships: tx
      .select({
        courseId: courses.id,
        courseTitle: courses.title,
        term: courses.term,
        role: memberships.role,
        initials: memberships.initials,
        createdAt: memberships.createdAt,
        removedAt: memberships.removedAt,
      })
      .from(memberships)
      .innerJoin(courses, eq(courses.id, memberships.courseId))
      .where(eq(memberships.userId, userId))
      .all(),
    scripts: own.map((each) => presentOwnScript(tx, each, now)),
    letters: tx
      .select({
        kind: letters.kind,
        subject: letters.subject,
        createdAt: letters.createdAt,
        sentAt: letters.sentAt,
        cancelledAt: letters.cancelledAt,
      })
      .from(letters)
      .where(eq(letters.userId, userId))
      .orderBy(asc(letters.createdAt))
      .all(),
    looks: looksAt(tx, userId),
    record: ownRecord(tx, userId, own),
  };
}
