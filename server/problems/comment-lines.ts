import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { problemComments } from '@drizzle/schema';
import { moveLine } from '@shared/comment-place';

/** Keeps comments at their lines when a draft's statement changes. What they remember of the line stays as it is. */
export function followLines(tx: Queryable, problemId: string, before: string, after: string): void {
  if (before === after) return;
  const rows = tx
    .select()
    .from(problemComments)
    .where(
      and(
        eq(problemComments.problemId, problemId),
        isNull(problemComments.repliesToId),
        sql`json_extract(${problemComments.anchor}, '$.kind') = 'line'`,
      ),
    )
    .all();
  for (const { id, anchor } of rows) {
    if (anchor.kind !== 'line') continue;
    const line = moveLine(before, after, anchor.line);
    if (line !== anchor.line)
      tx.update(problemComments)
        .set({ anchor: { ...anchor, line } })
        .where(eq(problemComments.id, id))
        .run();
  }
}
