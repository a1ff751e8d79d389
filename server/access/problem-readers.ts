import { and, eq, ne, or } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { problems, reviewRequests } from '@drizzle/schema';
import { can, type SignedIn } from './policy';

/**
 * Whether a person may read a problem, keys and all: the team that owns the bank reads everything but other people's
 * drafts; a marker reads what they were asked to review, while it is no draft.
 */
export function mayReadProblem(tx: Queryable, person: SignedIn, problemId: string): boolean {
  const visible = tx
    .select({ id: problems.id })
    .from(problems)
    .where(and(eq(problems.id, problemId), or(ne(problems.status, 'draft'), eq(problems.authorId, person.id))))
    .get();
  if (!visible) return false;
  return can(person, 'read problems') || (can(person, 'review problems') && wasAsked(tx, person.id, problemId));
}

/** Whether a person was ever asked to review a problem. */
export function wasAsked(tx: Queryable, personId: string, problemId: string): boolean {
  const request = tx
    .select({ id: reviewRequests.id })
    .from(reviewRequests)
    .where(and(eq(reviewRequests.problemId, problemId), eq(reviewRequests.colleagueId, personId)))
    .get();
  return request !== undefined;
}
