import { and, asc, count, desc, eq, getTableColumns, inArray, isNotNull, isNull, ne, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import {
  answers,
  answerVersions,
  corrections,
  courses,
  memberships,
  pages,
  problems,
  revisions,
  scripts,
  setProblems,
  sets,
  setStages,
  submissions,
  users,
} from '@drizzle/schema';
import { problemMarks } from '@shared/problems';
import { stageMoves, type SetCounts, type SetDetail, type SetProblem, type SetSummary } from '@shared/sets';
import { correctedContent, holdsInSet } from '../corrections/corrected-content';
import { notFound } from '../http/errors';

export type SetRow = typeof sets.$inferSelect;
export type CourseRow = typeof courses.$inferSelect;

/** A set with its course. @throws RequestError 404 */
export function demandSet(tx: Queryable, setId: string): { readonly set: SetRow; readonly course: CourseRow } {
  const row = tx
    .select({ set: sets, course: courses })
    .from(sets)
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .where(eq(sets.id, setId))
    .get();
  if (!row) throw notFound('set');
  return row;
}

/** The problems of a set in their order, with the content of their revisions, corrected where a correction holds. */
export function problemsOfSet(tx: Queryable, setId: string) {
  return tx
    .select({
      setProblem: setProblems,
      revision: { ...getTableColumns(revisions), content: correctedContent },
      status: problems.status,
      authorId: problems.authorId,
    })
    .from(setProblems)
    .innerJoin(revisions, eq(revisions.id, setProblems.revisionId))
    .leftJoin(corrections, holdsInSet)
    .innerJoin(problems, eq(problems.id, setProblems.problemId))
    .where(eq(setProblems.setId, setId))
    .orderBy(asc(setProblems.position))
    .all();
}

export type ProblemOfSet = ReturnType<typeof problemsOfSet>[number];

/** The students who are in a course now. */
export function studentsOf(tx: Queryable, courseId: string) {
  return tx
    .select({ membershipId: memberships.id, userId: users.id, name: users.name })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.courseId, courseId), eq(memberships.role, 'student'), isNull(memberships.removedAt)))
    .orderBy(asc(users.name))
    .all();
}

/** Answers of a set that hold a text or a page now, as pairs of script and answer. */
export function answeredIn(tx: Queryable, setId: string): readonly { scriptId: string; answerId: string }[] {
  const latest = tx
    .select({
      answerId: answerVersions.answerId,
      text: answerVersions.text,
      number: sql<number>`max(${answerVersions.number})`.as('number'),
    })
    .from(answerVersions)
    .innerJoin(answers, eq(answers.id, answerVersions.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(eq(scripts.setId, setId))
    .groupBy(answerVersions.answerId)
    .as('latest');
  const withText = tx
    .select({ scriptId: answers.scriptId, answerId: answers.id })
    .from(answers)
    .innerJoin(latest, eq(latest.answerId, answers.id))
    .where(ne(sql`trim(${latest.text})`, ''))
    .all();
  const withPage = tx
    .selectDistinct({ scriptId: answers.scriptId, answerId: answers.id })
    .from(pages)
    .innerJoin(answers, eq(answers.id, pages.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(scripts.setId, setId), isNull(pages.removedAt)))
    .all();
  const seen = new Set(withText.map((row) => row.answerId));
  return [...withText, ...withPage.filter((row) => !seen.has(row.answerId))];
}

/** How far the students of a set are. */
export function countsOf(tx: Queryable, set: Pick<SetRow, 'id' | 'courseId'>): SetCounts {
  const students = new Set(studentsOf(tx, set.courseId).map((student) => student.membershipId));
  const own = tx
    .select({ id: scripts.id, membershipId: scripts.membershipId })
    .from(scripts)
    .where(eq(scripts.setId, set.id))
    .all()
    .filter((script) => students.has(script.membershipId));
  const inCourse = new Set(own.map((script) => script.id));
  const handedIn = tx
    .selectDistinct({ scriptId: submissions.scriptId })
    .from(submissions)
    .innerJoin(scripts, eq(scripts.id, submissions.scriptId))
    .where(and(eq(scripts.setId, set.id), eq(submissions.by, 'student')))
    .all()
    .filter((row) => inCourse.has(row.scriptId));
  const answered = new Set(
    answeredIn(tx, set.id)
      .map((row) => row.scriptId)
      .filter((id) => inCourse.has(id)),
  );
  return { students: students.size, opened: own.length, answered: answered.size, handedIn: handedIn.length };
}

/** When a set entered its stages. */
export function stagesOf(tx: Queryable, setId: string) {
  return tx
    .select({ stage: setStages.stage, at: setStages.at })
    .from(setStages)
    .where(eq(setStages.setId, setId))
    .orderBy(asc(setStages.at), sql`rowid`)
    .all();
}

/** The sets of a course, the newest first. */
export function listSets(tx: Queryable, courseId: string): SetSummary[] {
  return tx
    .select()
    .from(sets)
    .where(eq(sets.courseId, courseId))
    .orderBy(desc(sets.number))
    .all()
    .map((row) => presentSummary(tx, row, problemsOfSet(tx, row.id)));
}

function presentSummary(tx: Queryable, row: SetRow, own: readonly ProblemOfSet[]): SetSummary {
  const { id, courseId, number, title, stage, opensAt, closesAt, version } = row;
  return {
    id,
    courseId,
    number,
    title,
    stage,
    stages: stagesOf(tx, id),
    opensAt,
    closesAt,
    problems: own.length,
    parts: own.reduce((sum, each) => sum + each.revision.content.parts.length, 0),
    marks: own.reduce((sum, each) => sum + problemMarks(each.revision.content), 0),
    counts: countsOf(tx, row),
    version,
  };
}

/** A set with its settings and problems. @throws RequestError 404 */
export function presentSet(tx: Queryable, setId: string): SetDetail {
  const { set } = demandSet(tx, setId);
  const own = problemsOfSet(tx, setId);
  const latest = latestRevisionsOf(
    tx,
    own.map((each) => each.setProblem.problemId),
  );
  return {
    ...presentSummary(tx, set, own),
    coverText: set.coverText,
    individualVariants: set.individualVariants,
    showKeys: set.showKeys,
    lateRule: set.lateRule,
    problems: own.map(({ setProblem, revision, status }): SetProblem => {
      const newest = latest.get(setProblem.problemId) ?? revision;
      return {
        id: setProblem.id,
        position: setProblem.position,
        problemId: setProblem.problemId,
        revisionId: revision.id,
        revision: revision.number,
        latestRevisionId: newest.id,
        latestRevision: newest.number,
        title: revision.content.title,
        status,
        parts: revision.content.parts.length,
        marks: problemMarks(revision.content),
      };
    }),
    moves: [...stageMoves[set.stage]],
  };
}

/** The newest revision of each of some problems; none for a problem without. */
export function latestRevisionsOf(tx: Queryable, problemIds: readonly string[]) {
  if (problemIds.length === 0) return new Map<string, typeof revisions.$inferSelect>();
  const rows = tx
    .select()
    .from(revisions)
    .where(inArray(revisions.problemId, [...problemIds]))
    .orderBy(asc(revisions.number))
    .all();
  return new Map(rows.map((row) => [row.problemId, row]));
}

/** The next number of a set in a course. */
export function nextSetNumber(tx: Queryable, courseId: string): number {
  const row = tx
    .select({ last: sql<number>`coalesce(max(${sets.number}), 0)` })
    .from(sets)
    .where(eq(sets.courseId, courseId))
    .get();
  return (row?.last ?? 0) + 1;
}

/** How many answers of a set have a mark that a person gave. */
export function marksByPersons(tx: Queryable, setId: string): number {
  return (
    tx
      .select({ n: count() })
      .from(answers)
      .innerJoin(scripts, eq(scripts.id, answers.scriptId))
      .where(
        and(
          eq(scripts.setId, setId),
          isNotNull(answers.standingMarkId),
          sql`exists (select 1 from marks where marks.id = ${answers.standingMarkId} and marks.marker_id is not null)`,
        ),
      )
      .get()?.n ?? 0
  );
}
