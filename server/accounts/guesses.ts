import { inArray, lt } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
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

/** @throws RequestError 429 while the account or the address is locked */
export function refuseWhileLocked(tx: Queryable, account: string, address: string, now: number): void {
  const subjects = subjectsOf(account, address);
  const rows = tx
    .select()
    .from(guesses)
    .where(inArray(guesses.subject, Object.values(subjects)))
    .all();
  const until = Math.max(0, ...rows.map((row) => row.lockedUntil ?? 0));
  if (until > now) throw tooManyGuesses(Math.ceil((until - now) / 1000));
}

/** Counts a failed guess by account and by address, and locks where there were too many. */
export function countFailure(tx: Queryable, account: string, address: string, now: number): void {
  const subjects = subjectsOf(account, address);
  for (const kind of kinds) {
    const limit = limits[kind];
    const subject = subjects[kind];
    const row = tx
      .select()
      .from(guesses)
      .where(inArray(guesses.subject, [subject]))
      .get();
    const fresh = !row || row.since < now - limit.window;
    const failures = fresh ? 1 : row.failures + 1;
    const lockedUntil = failures >= limit.failures ? now + limit.lock : null;
    const values = { failures: lockedUntil ? 0 : failures, since: fresh ? now : row.since, lockedUntil };
    tx.insert(guesses)
      .values({ subject, ...values })
      .onConflictDoUpdate({ target: guesses.subject, set: values })
      .run();
  }
}

/** Forgets the failures of an account after a right password. */
export function forgetFailures(tx: Queryable, account: string): void {
  tx.delete(guesses)
    .where(inArray(guesses.subject, [hashSecret(`account:${account}`)]))
    .run();
}

/** Drops counters that no longer matter. */
export function dropOldGuesses(tx: Queryable, now: number): void {
  tx.delete(guesses)
    .where(lt(guesses.since, now - 24 * 60 * minute))
    .run();
}
