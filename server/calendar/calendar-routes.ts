import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { calendarAddresses } from '@drizzle/schema';
import { calendarRoutes } from '@shared/calendar';
import { hashSecret, newSecret } from '../accounts/secrets';
import type { Context } from '../context';
import { newId } from '../http/new-id';
import { notFound } from '../http/errors';
import type { Serve } from '../http/serve';
import { icalendar } from './icalendar';
import { ownDates } from './own-dates';

/** How long a calendar may be kept before it is asked for again, in seconds. */
const freshFor = 900;

/** Adds the routes of calendars: a person's secret address, and what is found there. */
export function addCalendarRoutes(serve: Serve, context: Context): void {
  const { db, clock, config } = context;

  serve(calendarRoutes.calendarAddress, ({ user }) => ({ madeAt: present(db, user.id)?.createdAt ?? null }));

  serve(calendarRoutes.makeCalendarAddress, ({ user }) => {
    const secret = newSecret();
    const madeAt = clock.now();
    db.transaction(
      (tx) => {
        revoke(tx, user.id, madeAt);
        tx.insert(calendarAddresses)
          .values({ id: newId(), userId: user.id, hash: hashSecret(secret), createdAt: madeAt })
          .run();
      },
      { behavior: 'immediate' },
    );
    return { address: `${config.origin}/api/calendars/${secret}.ics`, madeAt };
  });

  serve(calendarRoutes.revokeCalendarAddress, ({ user }) => {
    revoke(db, user.id, clock.now());
    return {};
  });

  serve.open(calendarRoutes.calendar, ({ params, response }) => {
    const row = db
      .select()
      .from(calendarAddresses)
      .where(
        and(
          eq(calendarAddresses.hash, hashSecret(params.address.replace(/\.ics$/, ''))),
          isNull(calendarAddresses.revokedAt),
        ),
      )
      .get();
    if (!row) throw notFound('calendar');
    const text = icalendar('Halfsilver', ownDates(db, row.userId, config.origin, clock.now()), clock.now());
    response
      .setHeader('Cache-Control', `private, max-age=${String(freshFor)}`)
      .type('text/calendar; charset=utf-8')
      .send(text);
    return text;
  });
}

function present(tx: Queryable, userId: string) {
  return tx.select().from(calendarAddresses).where(ofPerson(userId)).get();
}

function revoke(tx: Queryable, userId: string, now: number): void {
  tx.update(calendarAddresses).set({ revokedAt: now }).where(ofPerson(userId)).run();
}

function ofPerson(userId: string) {
  return and(eq(calendarAddresses.userId, userId), isNull(calendarAddresses.revokedAt));
}
