import { and, asc, eq, inArray, isNull, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Queryable } from '@drizzle/client';
import { answers, markQueries, marks, queryAnswers, scripts, sets } from '@drizzle/schema';
import type { QueryOutcome } from '@shared/queries';
import { notFound } from '../http/errors';

const queried = alias(marks, 'queried');
const standing = alias(marks, 'standing');
const replaced = alias(marks, 'replaced');

/** Queries with what they are about, and what became of them, the oldest first. */
export function queriesWhere(tx: Queryable, where: SQL | undefined) {
  return tx
    .select({
      query: markQueries,
      answer: answers,
      script: scripts,
      set: sets,
      answered: queryAnswers,
      queriedTotal: queried.total,
      total: standing.total,
      replacedTotal: replaced.total,
    })
    .from(markQueries)
    .innerJoin(answers, eq(answers.id, markQueries.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(queried, eq(queried.id, markQueries.markId))
    .leftJoin(queryAnswers, eq(queryAnswers.queryId, markQueries.id))
    .leftJoin(standing, eq(standing.id, queryAnswers.markId))
    .leftJoin(replaced, eq(replaced.id, standing.replacesId))
    .where(where)
    .orderBy(asc(markQueries.at))
    .all();
}

/** A query with what it is about. */
export type FoundQuery = ReturnType<typeof queriesWhere>[number];

/** One query. @throws RequestError 404 */
export function findQuery(tx: Queryable, queryId: string): FoundQuery {
  const [row] = queriesWhere(tx, eq(markQueries.id, queryId));
  if (!row) throw notFound('mark query');
  return row;
}

/** The queries of a course that wait for an answer. */
export function waitingQueries(tx: Queryable, courseId: string): FoundQuery[] {
  return queriesWhere(tx, and(eq(sets.courseId, courseId), isNull(queryAnswers.id)));
}

/** What became of a query; null while it waits. It names nobody. */
export function outcomeOf({ answered, queriedTotal, total, replacedTotal }: FoundQuery): QueryOutcome | null {
  if (!answered) return null;
  const after = total ?? queriedTotal;
  return {
    at: answered.at,
    words: answered.words,
    before: answered.isChanged ? (replacedTotal ?? after) : after,
    after,
  };
}

/**
 * Who has given a mark of each answer that a query on it is a question to: every first mark, and each mark in the chain
 * that ends in the one that stands. A blind second marker whose mark does not stand may answer.
 */
export function giversOf(tx: Queryable, asked: readonly Pick<typeof answers.$inferSelect, 'id' | 'standingMarkId'>[]) {
  const ids = [...new Set(asked.map(({ id }) => id))];
  const rows = ids.length === 0 ? [] : tx.select().from(marks).where(inArray(marks.answerId, ids)).all();
  const byId = new Map(rows.map((row) => [row.id, row]));
  return new Map(
    asked.map(({ id, standingMarkId }) => {
      const givers = new Set(
        rows.filter((row) => row.answerId === id && row.kind === 'first').flatMap(({ markerId }) => markerId ?? []),
      );
      for (let row = byId.get(standingMarkId ?? ''); row; row = byId.get(row.replacesId ?? ''))
        if (row.markerId !== null) givers.add(row.markerId);
      return [id, givers];
    }),
  );
}

/** Why somebody is not the one to answer a query. */
export const gaveTheMark = 'You gave a mark of this answer, so a colleague answers the query.';
