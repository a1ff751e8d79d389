import { and, asc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { checks, marks, memberships, sets, users } from '@drizzle/schema';
import { partMarks } from '@shared/problems';
import type { Query, QuerySummary } from '@shared/queries';
import { splitStatement } from '@shared/statement';
import { handedInFor, printGivens, variantOf, workedPages } from '../marking/bench-answer';
import { findPile, type FoundPile } from '../marking/find-pile';
import {
  findQuery,
  gaveTheMark,
  giversOf,
  outcomeOf,
  queriesWhere,
  waitingQueries,
  type FoundQuery,
} from './find-queries';

/** The queries of a course, those that wait first, and of the others the newest first. */
export function listQueries(tx: Queryable, courseId: string, membershipId: string): QuerySummary[] {
  const rows = queriesWhere(tx, eq(sets.courseId, courseId));
  const givers = giversOf(
    tx,
    rows.map(({ answer }) => answer),
  );
  const piles = new Map<string, FoundPile>();
  const pileOf = (id: string): FoundPile => {
    const found = piles.get(id) ?? findPile(tx, id);
    piles.set(id, found);
    return found;
  };
  const [waiting, done] = [rows.filter(({ answered }) => !answered), rows.filter(({ answered }) => answered)];
  return [...waiting, ...done.reverse()].map((row) =>
    summaryOf(row, pileOf(row.answer.pileId), givers.get(row.answer.id)?.has(membershipId) ?? false),
  );
}

/** How many queries wait that somebody may answer. */
export function waitingFor(tx: Queryable, courseId: string, membershipId: string): number {
  const rows = waitingQueries(tx, courseId);
  const givers = giversOf(
    tx,
    rows.map(({ answer }) => answer),
  );
  return rows.filter(({ answer }) => !givers.get(answer.id)?.has(membershipId)).length;
}

/** A query with all that is needed to answer it, for one of the team. @throws RequestError 404 */
export function presentQuery(tx: Queryable, queryId: string, membershipId: string): Query {
  const row = findQuery(tx, queryId);
  const { query, answer, script, set } = row;
  const found = findPile(tx, answer.pileId);
  const handedIn = handedInFor(tx, script.id, found);
  const check =
    answer.checkId === null
      ? null
      : (tx.select({ result: checks.result }).from(checks).where(eq(checks.id, answer.checkId)).get()?.result ?? null);
  const gave = giversOf(tx, [answer]).get(answer.id)?.has(membershipId) ?? false;
  return {
    ...summaryOf(row, found, gave),
    courseId: set.courseId,
    setTitle: set.title,
    problemTitle: found.content.title,
    policy: query.policy,
    reason: query.reason,
    criterionId: query.criterionId,
    version: answer.version,
    text: splitStatement(found.content.statement).parts.find(({ label }) => label === found.partLabel)?.text ?? '',
    givens: printGivens(found.content.givens, variantOf(tx, found.setProblem.id, script.membershipId)?.givens ?? {}),
    answer: handedIn.text,
    readAs: check?.readAs ?? '',
    verdict: check?.verdict ?? null,
    relation: check?.relation.name ?? null,
    key: check?.key ? { value: check.key.value, unit: check.key.unit ?? null } : null,
    pages: workedPages(tx, answer.id, handedIn.pageIds),
    criteria: [...found.part.criteria],
    outOf: partMarks(found.part),
    marks: historyOf(tx, answer),
  };
}

function historyOf(tx: Queryable, answer: FoundQuery['answer']): Query['marks'] {
  return tx
    .select({ mark: marks, marker: users.name })
    .from(marks)
    .leftJoin(memberships, eq(memberships.id, marks.markerId))
    .leftJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(marks.answerId, answer.id)))
    .orderBy(asc(marks.at))
    .all()
    .map(({ mark: { id, kind, total, criteria, remark, at, replacesId, reason }, marker }) => ({
      id,
      kind,
      marker,
      total,
      criteria: [...criteria],
      remark,
      at,
      replacesId,
      reason,
      stands: id === answer.standingMarkId,
    }));
}

function summaryOf(row: FoundQuery, found: FoundPile, gave: boolean): QuerySummary {
  const { query, script, set } = row;
  return {
    id: query.id,
    setId: set.id,
    setNumber: set.number,
    code: script.code,
    part: `${String(found.setProblem.position)} (${found.partLabel})`,
    criterionName: found.part.criteria.find(({ id }) => id === query.criterionId)?.name ?? null,
    at: query.at,
    outcome: outcomeOf(row),
    notYours: gave ? gaveTheMark : null,
  };
}
