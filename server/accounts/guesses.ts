import { eq, inArray, lt, sql } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { guesses } from '@drizzle/schema';
import { tooManyGuesses } from '../http/errors';
import { hashSecret } from './secrets';

const minute = 60_000;

/** Failures within the window that lock, and for how long. An address serves a lecture hall, so it may fail more. */
const limits = {
  account: { failures: 8, window: 15 * minute, lock: 15 * minute },
  address: { failures: 60, window: 15 * minute, lock: 15 * minute },
} as const;

const kinds = ['account', 'address'] as const;

function subjectsOf(account: string, address: string) {
  return { account: hashSecret(`account:${account}`), address: hashSecret(`address:${address}`) };
}

/**
 * Counts a guess by account and by address before it is looked at, so that guesses at the same moment are counted too, and
 * locks after too many. A right one is taken back with `forgiveGuess`.
 *
 * @throws RequestError 429 while the account or the address is locked
 */
export function countGuess(db: Database, account: string, address: string, now: number): void {
  db.transaction(
    (tx) => {
      const subjects = subjectsOf(account, address);
      const rows = tx
        .select()
        .from(guesses)
        .where(inArray(guesses.subject, Object.values(subjects)))
        .all();
      const until = Math.max(0, ...rows.map((row) => row.lockedUntil ?? 0));
      if (until > now) throw tooManyGuesses(Math.ceil((until - now) / 1000));
      for (const kind of kinds) {
        const limit = limits[kind];
        const subject = subjects[kind];
        const row = rows.find((each) => each.subject === subject);
        const fresh = !row || row.since < now - limit.window;
        const failures = fresh ? 1 : row.failures + 1;
        const lockedUntil = failures >= limit.failures ? now + limit.lock : null;
        const values = { failures: lockedUntil ? 0 : failures, since: fresh ? now : row.since, lockedUntil };
        tx.insert(guesses)
          .values({ subject, ...values })
          .onConflictDoUpdate({ target: guesses.subject, set: values })
          .run();
      }
    },
    { behavior: 'immediate' },
  );
}

/** After a right password: the account's guesses are forgotten, and the address has one fewer. */
export function forgiveGuess(tx: Queryable, account: string, address: string): void {
  const subjects = subjectsOf(account, address);
  tx.delete(guesses).where(eq(guesses.subject, subjects.account)).run();
  tx.update(guesses)
    .set({ failures: sql`max(0, ${guesses.failures} - 1)` })
    .where(eq(guesses.subject, subjects.address))
    .run();
}

/** Drops counters that no longer matter. */
export function dropOldGuesses(tx: Queryable, now: number): void {
  tx.delete(guesses)
    .where(lt(guesses.since, now - 24 * 60 * minute))
    .run();
}
