import { and, asc, count, desc, eq, inArray, isNotNull, ne, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, piles, scripts, setStages, sets, submissions } from '@drizzle/schema';
import type { DeskSet } from '@shared/desk';
import { setStageNames, type SetStage } from '@shared/primitives';

/** A set as the desk weighs it. */
export interface WeighedSet {
  readonly row: typeof sets.$inferSelect;
  readonly reached: DeskSet['reached'];
}

/** The sets of a course that are not archived, newest first, each with when it entered its stages. */
export function weighedSets(tx: Queryable, courseId: string): WeighedSet[] {
  const rows = tx
    .select()
    .from(sets)
    .where(and(eq(sets.courseId, courseId), ne(sets.stage, 'archived')))
    .orderBy(desc(sets.number))
    .all();
  const history = tx
    .select({ setId: setStages.setId, stage: setStages.stage, at: setStages.at })
    .from(setStages)
    .where(
      inArray(
        setStages.setId,
        rows.map((row) => row.id),
      ),
    )
    .orderBy(asc(setStages.at))
    .all();
  return rows.map((row) => ({
    row,
    reached: reachedIn(
      history.filter((each) => each.setId === row.id),
      row.stage,
    ),
  }));
}

/** The latest beginning of each stage up to the present one: a stage that was gone back from counts no more. */
function reachedIn(history: readonly { stage: SetStage; at: number }[], present: SetStage): DeskSet['reached'] {
  const last = setStageNames.indexOf(present);
  const at = new Map(history.map((each) => [each.stage, each.at]));
  return setStageNames.slice(0, last + 1).flatMap((stage) => {
    const began = at.get(stage);
    return began === undefined ? [] : [{ stage, at: began }];
  });
}

/** How a set's marking stands. */
export interface MarkingCount {
  readonly waits: number;
  readonly marked: number;
  readonly setAside: number;
}

/** How the marking of each of the given sets stands. */
export function markingCounts(tx: Queryable, setIds: readonly string[]): ReadonlyMap<string, MarkingCount> {
  const rows = tx
    .select({
      setId: piles.setId,
      waits: sql<number>`sum(${answers.state} = 'waits')`,
      marked: sql<number>`sum(${answers.state} = 'marked')`,
      setAside: sql<number>`sum(${answers.state} = 'set aside')`,
    })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .where(and(inArray(piles.setId, [...setIds]), isNotNull(answers.state)))
    .groupBy(piles.setId)
    .all();
  return new Map(rows.map(({ setId, ...counts }) => [setId, counts]));
}

/** How many scripts of each set were submitted by their students. */
export function submittedCounts(tx: Queryable, setIds: readonly string[]): ReadonlyMap<string, number> {
  const rows = tx
    .select({ setId: scripts.setId, n: sql<number>`count(distinct ${scripts.id})` })
    .from(scripts)
    .innerJoin(submissions, and(eq(submissions.scriptId, scripts.id), eq(submissions.by, 'student')))
    .where(inArray(scripts.setId, [...setIds]))
    .groupBy(scripts.setId)
    .all();
  return new Map(rows.map(({ setId, n }) => [setId, n]));
}

/** When a student submitted each of the given sets last. */
export function submittedAt(
  tx: Queryable,
  membershipId: string,
  setIds: readonly string[],
): ReadonlyMap<string, number> {
  const rows = tx
    .select({ setId: scripts.setId, at: sql<number>`max(${submissions.at})` })
    .from(scripts)
    .innerJoin(submissions, eq(submissions.scriptId, scripts.id))
    .where(and(eq(scripts.membershipId, membershipId), inArray(scripts.setId, [...setIds])))
    .groupBy(scripts.setId)
    .all();
  return new Map(rows.map(({ setId, at }) => [setId, at]));
}

/** How many answers of a pile wait, pile by pile, the longest first. */
export function waitingPiles(tx: Queryable, setId: string): { pileId: string; waits: number }[] {
  return tx
    .select({ pileId: piles.id, waits: count() })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .where(and(eq(piles.setId, setId), eq(answers.state, 'waits')))
    .groupBy(piles.id)
    .orderBy(desc(count()))
    .all();
}
