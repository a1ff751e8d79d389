import { inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { checks } from '@drizzle/schema';
import { seenIn, type Seen } from './patterns';

/** Most checks that are remembered. */
const most = 50_000;
const batch = 500;
const unchecked = seenIn(null);

/**
 * What strips need of checks, by id. Checks never change, so what was once seen is remembered: a pile of 2,000 answers
 * is put in order without reading 2,000 results again.
 */
const remembered = new Map<string, Seen>();

/** What a strip needs of each of some checks. */
export function seenChecks(tx: Queryable, ids: readonly (string | null)[]): (checkId: string | null) => Seen {
  const missing = ids.filter((id): id is string => id !== null && !remembered.has(id));
  if (remembered.size + missing.length > most) remembered.clear();
  const wanted = remembered.size === 0 ? ids.filter((id): id is string => id !== null) : missing;
  for (let start = 0; start < wanted.length; start += batch) {
    const rows = tx
      .select({ id: checks.id, result: checks.result })
      .from(checks)
      .where(inArray(checks.id, wanted.slice(start, start + batch)))
      .all();
    for (const row of rows) remembered.set(row.id, seenIn(row.result));
  }
  return (checkId) => (checkId === null ? unchecked : (remembered.get(checkId) ?? unchecked));
}
