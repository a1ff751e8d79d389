import { isDeepStrictEqual } from 'node:util';
import { and, count, desc, eq, inArray, ne, or, sql, type SQL } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { problems, revisions, users } from '@drizzle/schema';
import type { ProblemContent, ProblemStatus, ProblemSummary } from '@shared/problems';
import { problemPageSize, type RevisionDetail } from '@shared/problem-routes';
import { readDraft } from '@shared/read-draft';
import { readTypedNumber } from '@shared/typed-number';

/** A problem as the database has it, with its author's name. */
export type ProblemRow = typeof problems.$inferSelect & { readonly author: string };

type RevisionRow = typeof revisions.$inferSelect & { readonly author: string };

/** A draft that nobody has been asked to review is its author's alone. */
function visibleTo(personId: string): SQL | undefined {
  return or(ne(problems.status, 'draft'), eq(problems.authorId, personId));
}

/** The problem, where the person may see it. */
export function findProblem(tx: Queryable, problemId: string, personId: string): ProblemRow | undefined {
  const row = tx
    .select({ problem: problems, author: users.name })
    .from(problems)
    .innerJoin(users, eq(users.id, problems.authorId))
    .where(and(eq(problems.id, problemId), visibleTo(personId)))
    .get();
  return row && { ...row.problem, author: row.author };
}

/** One page of the problems that a person may see, newest change first. */
export function listProblems(
  tx: Queryable,
  personId: string,
  query: { readonly search: string; readonly status?: ProblemStatus | undefined; readonly page: number },
): { readonly items: readonly ProblemSummary[]; readonly total: number } {
  const words = query.search.toLowerCase().split(/\s+/).filter(Boolean);
  const text = sql`lower(json_extract(${problems.draft}, '$.title') || ' ' || json_extract(${problems.draft}, '$.tags')
    || ' ' || json_extract(${problems.draft}, '$.statement') || ' ' || ${users.name})`;
  const where = and(
    visibleTo(personId),
    query.status ? eq(problems.status, query.status) : undefined,
    ...words.map((word) => sql`instr(${text}, ${word}) > 0`),
  );
  const rows = tx
    .select({ problem: problems, author: users.name })
    .from(problems)
    .innerJoin(users, eq(users.id, problems.authorId))
    .where(where)
    .orderBy(desc(problems.draftSavedAt), problems.id)
    .limit(problemPageSize)
    .offset((query.page - 1) * problemPageSize)
    .all();
  const total = tx
    .select({ total: count() })
    .from(problems)
    .innerJoin(users, eq(users.id, problems.authorId))
    .where(where)
    .get();
  const latest = latestRevisions(
    tx,
    rows.map((row) => row.problem.id),
  );
  return {
    items: rows.map((row) => presentSummary({ ...row.problem, author: row.author }, latest.get(row.problem.id))),
    total: total?.total ?? 0,
  };
}

/** The latest revision of each of some problems. */
function latestRevisions(tx: Queryable, problemIds: readonly string[]): ReadonlyMap<string, RevisionRow> {
  if (problemIds.length === 0) return new Map();
  const rows = tx
    .select({ revision: revisions, author: users.name })
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(inArray(revisions.problemId, [...problemIds]))
    .orderBy(revisions.number)
    .all();
  return new Map(rows.map((row) => [row.revision.problemId, { ...row.revision, author: row.author }]));
}

/** The latest revision of a problem. */
export function latestRevision(tx: Queryable, problemId: string): RevisionRow | undefined {
  return latestRevisions(tx, [problemId]).get(problemId);
}

/** The revisions of a problem, newest first. */
export function listRevisions(tx: Queryable, problemId: string): readonly RevisionRow[] {
  return tx
    .select({ revision: revisions, author: users.name })
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(eq(revisions.problemId, problemId))
    .orderBy(desc(revisions.number))
    .all()
    .map((row) => ({ ...row.revision, author: row.author }));
}

/** A revision as it leaves the server. */
export function presentRevision(row: RevisionRow): RevisionDetail {
  const { id, number, author, reason, createdAt, content } = row;
  return { id, number, author, reason, createdAt, content };
}

/** A problem as its list shows it. */
export function presentSummary(row: ProblemRow, latest: RevisionRow | undefined): ProblemSummary {
  const { draft } = row;
  return {
    id: row.id,
    title: draft.title.trim(),
    status: row.status,
    author: row.author,
    tags: draft.tags
      .split(/[,;]/)
      .map((tag) => tag.trim())
      .filter((tag) => tag !== ''),
    parts: draft.parts.length,
    marks: draft.parts
      .flatMap((part) => part.criteria)
      .reduce((sum, criterion) => sum + (readTypedNumber(criterion.marks) ?? 0), 0),
    latestRevision: latest
      ? {
          id: latest.id,
          number: latest.number,
          author: latest.author,
          reason: latest.reason,
          createdAt: latest.createdAt,
        }
      : null,
    changed: latest === undefined || !isSame(readDraft(draft).content, latest.content),
    savedAt: row.draftSavedAt,
    version: row.version,
  };
}

function isSame(one: ProblemContent | undefined, other: ProblemContent): boolean {
  // By way of JSON, where a property that is absent and one that is undefined are alike.
  return one !== undefined && isDeepStrictEqual(JSON.parse(JSON.stringify(one)), other);
}

/** The number of a revision. */
export function revisionNumber(tx: Queryable, revisionId: string): number {
  return tx.select({ number: revisions.number }).from(revisions).where(eq(revisions.id, revisionId)).get()?.number ?? 0;
}
