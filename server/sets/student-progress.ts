import { eq, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, answerVersions, scripts, submissions } from '@drizzle/schema';
import { progressPageSize, type StudentProgress } from '@shared/sets';
import { answeredIn, problemsOfSet, studentsOf, type SetRow } from './set-queries';

/** How far each student of a set is, a page at a time, by name. */
export function listProgress(
  tx: Queryable,
  set: SetRow,
  filter: { readonly state?: StudentProgress['state'] | undefined; readonly search: string; readonly page: number },
): { readonly items: StudentProgress[]; readonly total: number } {
  const search = filter.search.toLowerCase();
  const found = progressOfAll(tx, set).filter(
    (each) => (!filter.state || each.state === filter.state) && each.name.toLowerCase().includes(search),
  );
  const from = (filter.page - 1) * progressPageSize;
  return { items: found.slice(from, from + progressPageSize), total: found.length };
}

function progressOfAll(tx: Queryable, set: SetRow): StudentProgress[] {
  const parts = problemsOfSet(tx, set.id).reduce((sum, each) => sum + each.revision.content.parts.length, 0);
  const own = tx.select().from(scripts).where(eq(scripts.setId, set.id)).all();
  const byMembership = new Map(own.map((script) => [script.membershipId, script]));
  const answered = new Map<string, number>();
  for (const { scriptId } of answeredIn(tx, set.id)) answered.set(scriptId, (answered.get(scriptId) ?? 0) + 1);
  const saved = new Map(
    tx
      .select({ scriptId: answers.scriptId, at: sql<number>`max(${answerVersions.savedAt})` })
      .from(answerVersions)
      .innerJoin(answers, eq(answers.id, answerVersions.answerId))
      .innerJoin(scripts, eq(scripts.id, answers.scriptId))
      .where(eq(scripts.setId, set.id))
      .groupBy(answers.scriptId)
      .all()
      .map((row) => [row.scriptId, row.at]),
  );
  const handedIn = new Map(
    tx
      .select({ scriptId: submissions.scriptId, at: submissions.at, by: submissions.by })
      .from(submissions)
      .innerJoin(scripts, eq(scripts.id, submissions.scriptId))
      .where(eq(scripts.setId, set.id))
      .orderBy(submissions.number)
      .all()
      .map((row) => [row.scriptId, row]),
  );
  return studentsOf(tx, set.courseId).map(({ membershipId, name }) => {
    const script = byMembership.get(membershipId);
    const count = script ? (answered.get(script.id) ?? 0) : 0;
    const last = script && handedIn.get(script.id);
    return {
      membershipId,
      name,
      state: stateOf(script !== undefined, count, last?.by),
      answered: count,
      parts,
      lastSavedAt: (script && saved.get(script.id)) ?? null,
      handedInAt: last?.at ?? null,
    };
  });
}

function stateOf(opened: boolean, answered: number, by: 'student' | 'closing' | undefined): StudentProgress['state'] {
  if (by === 'student') return 'handed in';
  if (by === 'closing') return 'handed in at closing';
  if (!opened) return 'not opened';
  return answered === 0 ? 'nothing yet' : 'working';
}
