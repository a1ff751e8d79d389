import { and, eq, isNull, ne } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Queryable } from '@drizzle/client';
import { memberships, problems, reviewRequests, users } from '@drizzle/schema';
import type { Need } from '@shared/desk';
import type { Membership } from '../access/policy';

/** Problems that the person was asked to review, and has not decided about. */
export function reviewNeeds(tx: Queryable, member: Membership): Need[] {
  if (member.role === 'student') return [];
  const asker = alias(users, 'asker');
  return tx
    .select({ id: reviewRequests.id, dueAt: reviewRequests.dueAt, problem: problems, asker: asker.name })
    .from(reviewRequests)
    .innerJoin(memberships, eq(memberships.userId, reviewRequests.colleagueId))
    .innerJoin(problems, eq(problems.id, reviewRequests.problemId))
    .innerJoin(asker, eq(asker.id, reviewRequests.askedById))
    .where(
      and(
        eq(memberships.id, member.id),
        isNull(reviewRequests.answeredAt),
        ne(problems.status, 'draft'),
        ne(problems.status, 'retired'),
      ),
    )
    .all()
    .map(({ id, dueAt, problem, asker: name }) => ({
      id: `review ${id}`,
      due: dueAt,
      title: `“${problem.draft.title.trim()}” waits for your review`,
      detail: `${name} asks you to sign it off, or to say what should change`,
      act: { label: 'Open the problem', page: 'problem', id: problem.id },
    }));
}
