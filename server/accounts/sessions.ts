import { DrizzleSQLiteAdapter } from '@lucia-auth/adapter-drizzle';
import { and, eq, isNull } from 'drizzle-orm';
import type { NextFunction, Request, Response } from 'express';
import { Lucia, TimeSpan, type Adapter } from 'lucia';
import { memberships, sessions, users } from '@drizzle/schema';
import type { Database } from '@drizzle/client';
import type { Membership, SignedIn } from '../access/policy';
import type { Config } from '../config';
import { hashSecret, newSecret } from './secrets';

declare module 'lucia' {
  interface Register {
    Lucia: Sessions['lucia'];
    DatabaseUserAttributes: { name: string; isAdministrator: boolean };
  }
}

/** The session library's adapter with every session id hashed on its way into the database. */
function hashedAdapter(inner: Adapter): Adapter {
  return {
    getSessionAndUser: async (sessionId) => {
      const [session, user] = await inner.getSessionAndUser(hashSecret(sessionId));
      return [session ? { ...session, id: sessionId } : null, user];
    },
    getUserSessions: (userId) => inner.getUserSessions(userId),
    setSession: (session) => inner.setSession({ ...session, id: hashSecret(session.id) }),
    updateSessionExpiration: (sessionId, expiresAt) => inner.updateSessionExpiration(hashSecret(sessionId), expiresAt),
    deleteSession: (sessionId) => inner.deleteSession(hashSecret(sessionId)),
    deleteUserSessions: (userId) => inner.deleteUserSessions(userId),
    deleteExpiredSessions: () => inner.deleteExpiredSessions(),
  };
}

/** Sign-ins of this installation. */
export type Sessions = ReturnType<typeof createSessions>;

/** Makes the keeper of sessions. */
export function createSessions(db: Database, config: Pick<Config, 'secureCookies'>) {
  const lucia = new Lucia(hashedAdapter(new DrizzleSQLiteAdapter(db, sessions, users)), {
    sessionExpiresIn: new TimeSpan(14, 'd'),
    sessionCookie: {
      name: 'halfsilver',
      expires: true,
      attributes: { sameSite: 'lax', secure: config.secureCookies, path: '/' },
    },
    getUserAttributes: (row) => ({ name: row.name, isAdministrator: row.isAdministrator }),
  });

  /** Starts a session and gives the cookie that carries it. */
  async function begin(userId: string): Promise<string> {
    const session = await lucia.createSession(userId, {}, { sessionId: newSecret() });
    return lucia.createSessionCookie(session.id).serialize();
  }

  /** Who is behind a `Cookie` header; null for nobody. `refreshed` is a cookie to send back, where there is one. */
  async function read(cookieHeader: string): Promise<{ person: SignedIn | null; refreshed?: string }> {
    const token = lucia.readSessionCookie(cookieHeader);
    if (!token) return { person: null };
    const { session, user } = await lucia.validateSession(token);
    if (!session) return { person: null, refreshed: lucia.createBlankSessionCookie().serialize() };
    const person: SignedIn = {
      id: user.id,
      name: user.name,
      isAdministrator: user.isAdministrator,
      sessionId: hashSecret(token),
      memberships: membershipsOf(db, user.id),
    };
    return session.fresh ? { person, refreshed: lucia.createSessionCookie(session.id).serialize() } : { person };
  }

  /** Ends a session by its hashed id. */
  function end(hashedId: string): void {
    db.delete(sessions).where(eq(sessions.id, hashedId)).run();
  }

  /** Ends all sessions of a person but, where given, one; returns the hashed ids of what ended. */
  function endAll(userId: string, spare?: string): string[] {
    const ended = db.select({ id: sessions.id }).from(sessions).where(eq(sessions.userId, userId)).all();
    const ids = ended.map((row) => row.id).filter((id) => id !== spare);
    for (const id of ids) end(id);
    return ids;
  }

  /** Puts the person behind the request where routes find them. */
  async function middleware(request: Request, response: Response, next: NextFunction): Promise<void> {
    const { person, refreshed } = await read(request.headers.cookie ?? '');
    response.locals['person'] = person;
    if (refreshed) response.append('Set-Cookie', refreshed);
    next();
  }

  return {
    lucia,
    begin,
    read,
    end,
    endAll,
    middleware,
    blankCookie: () => lucia.createBlankSessionCookie().serialize(),
  };
}

function membershipsOf(db: Database, userId: string): ReadonlyMap<string, Membership> {
  const rows = db
    .select({ id: memberships.id, courseId: memberships.courseId, role: memberships.role })
    .from(memberships)
    .where(and(eq(memberships.userId, userId), isNull(memberships.removedAt)))
    .all();
  return new Map(rows.map((row) => [row.courseId, row]));
}
