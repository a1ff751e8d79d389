import { and, desc, eq, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { corrections, revisions, setProblems } from '@drizzle/schema';
import type { ProblemContent } from '@shared/problems';

/**
 * What a set checks answers with: the correction that holds there, or else the revision. For queries that join
 * `corrections` by {@link holdsInSet}.
 */
export const correctedContent = sql<ProblemContent>`coalesce(${corrections.content}, ${revisions.content})`.mapWith(
  revisions.content,
);

/** The condition of a left join with the correction that holds for a problem of a set. */
export const holdsInSet = eq(corrections.id, setProblems.correctionId);

/** The last correction that was made of a revision: sets that take the revision from now on take it with this. */
export function standingCorrection(tx: Queryable, revisionId: string) {
  return tx
    .select()
    .from(corrections)
    .where(and(eq(corrections.revisionId, revisionId), eq(corrections.state, 'made')))
    .orderBy(desc(corrections.madeAt), sql`rowid desc`)
    .limit(1)
    .get();
}
