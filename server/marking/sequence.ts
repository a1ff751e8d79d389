import { eq, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { piles } from '@drizzle/schema';
import { notFound } from '../http/errors';

/** The number of the last fact about a pile. */
export function sequenceOf(tx: Queryable, pileId: string): number {
  return tx.select({ sequence: piles.sequence }).from(piles).where(eq(piles.id, pileId)).get()?.sequence ?? 0;
}

/** The next number of a pile's facts; called once for each fact, in its transaction. */
export function nextSequence(tx: Queryable, pileId: string): number {
  const [row] = tx
    .update(piles)
    .set({ sequence: sql`${piles.sequence} + 1` })
    .where(eq(piles.id, pileId))
    .returning({ sequence: piles.sequence })
    .all();
  if (!row) throw notFound('pile');
  return row.sequence;
}
