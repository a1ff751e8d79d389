import { count, desc, eq, like, or } from 'drizzle-orm';
import { accountRoutes } from '@shared/accounts';
import { letters, users } from '@drizzle/schema';
import { demand, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import { conflict, invalidField, notFound, notSignedIn } from '../http/errors';
import { newId } from '../http/new-id';
import type { Serve } from '../http/serve';
import { enter } from '../record/enter';
import { isCommonPassword } from './common-passwords';
import { countGuess, forgiveGuess } from './guesses';
import { sendReset } from '../mail/invitations';
import { hashPassword, passwordFits } from './secrets';
import { presentSession } from './present-session';
import type { Sessions } from './sessions';
import { findToken, linkWith, makeToken, useUpToken } from './tokens';

const pageSize = 50;

/** Sign-in, passwords, links from letters, and what administrators see of accounts. */
export function addAccountRoutes(serve: Serve, context: Context, sessions: Sessions): void {
  const { db, clock, config } = context;

  serve.open(accountRoutes.installation, () => ({
    institution: config.institution,
    mail: config.smtpUrl ? ('smtp' as const) : ('outbox' as const),
    now: clock.now(),
  }));

  serve.open(accountRoutes.session, ({ user }) => ({ session: user ? presentSession(db, user.id) : null }));

  serve.open(accountRoutes.signIn, async ({ body, request, response }) => {
    const address = request.ip ?? '';
    countGuess(db, body.email, address, clock.now());
    const found = db.select().from(users).where(eq(users.email, body.email)).get();
    const fits = await passwordFits(found?.passwordHash ?? null, body.password);
    if (!found || !fits)
      throw notSignedIn('E-mail and password do not belong together. Look at both, or set a new password.');
    forgiveGuess(db, body.email, address);
    enter(db, {
      at: clock.now(),
      actorId: found.id,
      action: 'signed in',
      thing: 'account',
      thingId: found.id,
      sentence: `${found.name} signed in.`,
    });
    response.append('Set-Cookie', await sessions.begin(found.id));
    return presentSession(db, found.id);
  });

  serve(accountRoutes.signOut, ({ user, response }) => {
    sessions.end(user.sessionId);
    context.live.endSessions([user.sessionId]);
    response.append('Set-Cookie', sessions.blankCookie());
    return {};
  });

  serve(accountRoutes.signOutEverywhere, ({ user, response }) => {
    context.live.endSessions(sessions.endAll(user.id));
    response.append('Set-Cookie', sessions.blankCookie());
    return {};
  });

  serve.open(accountRoutes.forgotPassword, ({ body, request }) => {
    // Asking is counted like a guess, so that nobody can be buried in letters; the answer never tells.
    const subject = `reset:${body.email}`;
    countGuess(db, subject, request.ip ?? '', clock.now());
    const found = db.select().from(users).where(eq(users.email, body.email)).get();
    if (found) sendReset(db, found, clock.now());
    return {};
  });

  serve.open(accountRoutes.readToken, ({ body }) => {
    const token = findToken(db, body.token, clock.now());
    const person = token.userId ? db.select().from(users).where(eq(users.id, token.userId)).get() : undefined;
    return { kind: token.kind, name: person?.name ?? '', email: person?.email ?? '', expiresAt: token.expiresAt };
  });

  serve.open(accountRoutes.useToken, async ({ body, response }) => {
    findToken(db, body.token, clock.now());
    refuseCommon(body.password);
    const passwordHash = await hashPassword(body.password);
    const { userId, ended } = db.transaction(
      (tx) => {
        const token = findToken(tx, body.token, clock.now());
        useUpToken(tx, token.id, clock.now());
        let personId = token.userId;
        if (personId === null) {
          if (!body.name) throw invalidField(['name'], 'Give your name.');
          if (!body.email) throw invalidField(['email'], 'Give your e-mail address.');
          personId = newId();
          const taken = tx.select().from(users).where(eq(users.email, body.email)).get();
          if (taken) throw invalidField(['email'], 'Somebody has an account with this address already.');
          tx.insert(users)
            .values({ id: personId, name: body.name, email: body.email, isAdministrator: true, createdAt: clock.now() })
            .run();
        }
        tx.update(users).set({ passwordHash }).where(eq(users.id, personId)).run();
        enter(tx, {
          at: clock.now(),
          actorId: personId,
          action: 'password set',
          thing: 'account',
          thingId: personId,
          sentence: `A password was set by the link of a letter (${token.kind}).`,
        });
        return { userId: personId, ended: sessions.endAll(personId) };
      },
      { behavior: 'immediate' },
    );
    context.live.endSessions(ended);
    response.append('Set-Cookie', await sessions.begin(userId));
    return presentSession(db, userId);
  });

  serve(accountRoutes.changePassword, async ({ user, body, request }) => {
    const mine = db.select().from(users).where(eq(users.id, user.id)).get();
    const address = request.ip ?? '';
    countGuess(db, mine?.email ?? '', address, clock.now());
    if (!(await passwordFits(mine?.passwordHash ?? null, body.current)))
      throw invalidField(['current'], 'This is not your present password.');
    forgiveGuess(db, mine?.email ?? '', address);
    refuseCommon(body.password);
    const passwordHash = await hashPassword(body.password);
    const ended = db.transaction(
      (tx) => {
        tx.update(users).set({ passwordHash }).where(eq(users.id, user.id)).run();
        enterAccount(tx, context, user, 'password changed', user.id, `${user.name} changed their password.`);
        return sessions.endAll(user.id, user.sessionId);
      },
      { behavior: 'immediate' },
    );
    context.live.endSessions(ended);
    return {};
  });

  serve(accountRoutes.accounts, ({ user, query }) => {
    demand(user, 'read accounts');
    const term = `%${query.search}%`;
    const where = query.search ? or(like(users.name, term), like(users.email, term)) : undefined;
    const total = db.select({ n: count() }).from(users).where(where).get()?.n ?? 0;
    const rows = db
      .select()
      .from(users)
      .where(where)
      .orderBy(users.name)
      .limit(pageSize)
      .offset((query.page - 1) * pageSize)
      .all();
    return { items: rows.map(presentAccount), total };
  });

  serve(accountRoutes.setAdministrator, ({ user, params, body }) => {
    demand(user, 'change accounts');
    return db.transaction(
      (tx) => {
        const row = tx.select().from(users).where(eq(users.id, params.accountId)).get();
        if (!row) throw notFound('account');
        if (row.id === user.id && !body.isAdministrator)
          throw conflict('You cannot take this role from yourself; ask another administrator.');
        tx.update(users).set({ isAdministrator: body.isAdministrator }).where(eq(users.id, row.id)).run();
        const deed = body.isAdministrator ? 'made administrator' : 'no longer administrator';
        enterAccount(tx, context, user, deed, row.id, `${row.name}: ${deed}.`);
        return presentAccount({ ...row, isAdministrator: body.isAdministrator });
      },
      { behavior: 'immediate' },
    );
  });

  serve(accountRoutes.makeLink, ({ user, params }) => {
    demand(user, 'change accounts');
    const row = db.select().from(users).where(eq(users.id, params.accountId)).get();
    if (!row) throw notFound('account');
    const kind = row.passwordHash ? 'password reset' : 'invitation';
    const { secret, expiresAt } = makeToken(db, kind, row.id, clock.now());
    enterAccount(db, context, user, 'link made', row.id, `${user.name} made a link for ${row.name} to set a password.`);
    return { link: linkWith(config.origin, secret), expiresAt };
  });

  serve(accountRoutes.letters, ({ user, query }) => {
    demand(user, 'read the outbox');
    enterAccount(
      db,
      context,
      user,
      'outbox read',
      user.id,
      `${user.name} read the outbox, page ${String(query.page)}.`,
    );
    const total = db.select({ n: count() }).from(letters).get()?.n ?? 0;
    const rows = db
      .select({ letter: letters, to: users.email })
      .from(letters)
      .innerJoin(users, eq(users.id, letters.userId))
      .orderBy(desc(letters.createdAt))
      .limit(pageSize)
      .offset((query.page - 1) * pageSize)
      .all();
    const hidden = '(the link is not kept here)';
    return {
      items: rows.map(({ letter, to }) => ({ ...letter, to, text: letter.text.replace('{link}', hidden) })),
      total,
    };
  });
}

function refuseCommon(password: string): void {
  if (isCommonPassword(password))
    throw invalidField(['password'], 'This password is on the lists that guessers try first. Choose another.');
}

function enterAccount(
  tx: Parameters<typeof enter>[0],
  context: Context,
  user: SignedIn,
  action: string,
  thingId: string,
  sentence: string,
): void {
  enter(tx, { at: context.clock.now(), actorId: user.id, action, thing: 'account', thingId, sentence });
}

function presentAccount(row: typeof users.$inferSelect) {
  const { id, name, email, isAdministrator, createdAt } = row;
  return { id, name, email, isAdministrator, createdAt, hasPassword: row.passwordHash !== null };
}

/** Makes the one-time link by which an empty installation gets its first administrator; null where it has one. */
export function firstAdministratorLink(context: Context): string | null {
  const { db, clock, config } = context;
  const any = db.select({ id: users.id }).from(users).where(eq(users.isAdministrator, true)).get();
  if (any) return null;
  return linkWith(config.origin, makeToken(db, 'first administrator', null, clock.now()).secret);
}
