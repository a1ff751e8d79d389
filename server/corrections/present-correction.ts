import { and, asc, count, desc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import {
  answers,
  correctionChanges,
  corrections,
  piles,
  revisions,
  scripts,
  setProblems,
  sets,
  users,
} from '@drizzle/schema';
import type { AnswerSpecification } from '@shared/answer-forms';
import {
  changesPageSize,
  type Correction,
  type CorrectionChange,
  type CorrectionCounts,
  type CorrectionDeed,
} from '@shared/corrections';
import { partLabel, type ProblemContent } from '@shared/problems';
import { notFound } from '../http/errors';
import { findJob, presentJob } from '../jobs/job-queue';
import { handedInFor } from '../marking/bench-answer';
import { findPile } from '../marking/find-pile';
import { reachedBy, usesOf, type CorrectionRow } from './judge-scripts';

/** A correction's row. @throws RequestError 404 */
export function demandCorrection(tx: Queryable, correctionId: string): CorrectionRow {
  const row = tx.select().from(corrections).where(eq(corrections.id, correctionId)).get();
  if (!row) throw notFound('correction');
  return row;
}

/** What a correction builds on: the correction before it, or the revision. */
function contentBefore(tx: Queryable, row: Pick<CorrectionRow, 'basedOnId' | 'revisionId'>): ProblemContent {
  const before =
    row.basedOnId === null
      ? tx.select().from(revisions).where(eq(revisions.id, row.revisionId)).get()
      : tx.select().from(corrections).where(eq(corrections.id, row.basedOnId)).get();
  if (!before) throw notFound('revision');
  return before.content;
}

/** The part that a correction amends, before and after. */
export function amendedPart(tx: Queryable, row: CorrectionRow) {
  const index = row.content.parts.findIndex((part) => part.id === row.partId);
  const before = contentBefore(tx, row).parts[index]?.answer;
  const after = row.content.parts[index]?.answer;
  return { index, before, after };
}

const nothingYet: AnswerSpecification = { form: 'worked' };

/** A correction as leads see it. */
export function presentCorrection(tx: Queryable, row: CorrectionRow): Correction {
  const { index, before, after } = amendedPart(tx, row);
  const reached = reachedBy(tx, row);
  const own = reached.find(({ set }) => set.courseId === row.courseId);
  const pile =
    own &&
    tx
      .select()
      .from(piles)
      .where(and(eq(piles.setProblemId, own.setProblem.id), eq(piles.partId, row.partId)))
      .get();
  if (!own || !pile) throw notFound('correction');
  const revision = tx.select().from(revisions).where(eq(revisions.id, row.revisionId)).get();
  const by = tx.select().from(users).where(eq(users.id, row.byId)).get();
  const previewed = row.previewJobId === null ? undefined : findJob(tx, row.previewJobId);
  const job = row.jobId === null ? previewed : findJob(tx, row.jobId);
  return {
    id: row.id,
    courseId: row.courseId,
    pileId: pile.id,
    place: `Set ${String(own.set.number)}, ${String(own.setProblem.position)} (${partLabel(index)})`,
    problemTitle: row.content.title,
    revision: revision?.number ?? 0,
    state: row.state,
    reason: row.reason,
    note: row.note,
    by: by?.name ?? '',
    createdAt: row.createdAt,
    madeAt: row.madeAt,
    before: before ?? nothingYet,
    after: after ?? nothingYet,
    sets: reached.map(({ set }) => ({ setId: set.id, number: set.number, title: set.title, stage: set.stage })),
    setsElsewhere: usesOf(tx, row.revisionId).length - reached.length,
    job: job ? presentJob(job) : null,
    counts: previewed?.state === 'done' ? countsOf(tx, row.id) : null,
    version: row.version,
  };
}

function countsOf(tx: Queryable, correctionId: string): CorrectionCounts {
  const rows = tx
    .select({ deed: correctionChanges.deed, n: count() })
    .from(correctionChanges)
    .where(eq(correctionChanges.correctionId, correctionId))
    .groupBy(correctionChanges.deed)
    .all();
  const of = (deed: CorrectionDeed) => rows.find((row) => row.deed === deed)?.n ?? 0;
  return {
    changed: rows.reduce((sum, { n }) => sum + n, 0),
    replaced: of('mark replaced'),
    given: of('mark given'),
    returned: of('returned to the pile'),
    look: of('another look'),
    alone: of('check alone'),
  };
}

/** One page of what a correction changes: first what touches marks, then by script. */
export function listChanges(
  tx: Queryable,
  row: CorrectionRow,
  page: number,
): { readonly items: CorrectionChange[]; readonly total: number } {
  const mine = eq(correctionChanges.correctionId, row.id);
  const rows = tx
    .select({
      change: correctionChanges,
      answer: answers,
      script: scripts,
      set: sets,
      setProblem: setProblems,
      pile: piles,
    })
    .from(correctionChanges)
    .innerJoin(answers, eq(answers.id, correctionChanges.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .innerJoin(setProblems, eq(setProblems.id, piles.setProblemId))
    .where(mine)
    .orderBy(desc(correctionChanges.deed), asc(sets.number), asc(scripts.code), asc(piles.partId))
    .limit(changesPageSize)
    .offset((page - 1) * changesPageSize)
    .all();
  const total = tx.select({ n: count() }).from(correctionChanges).where(mine).get()?.n ?? 0;
  return {
    total,
    items: rows.map(({ change, answer, script, set, setProblem, pile }) => {
      const found = findPile(tx, pile.id);
      return {
        answerId: answer.id,
        pileId: pile.id,
        code: script.code,
        setNumber: set.number,
        part: `${String(setProblem.position)} (${found.partLabel})`,
        text: handedInFor(tx, script.id, found).text,
        before: change.before,
        after: change.after,
        deed: change.deed,
        awaitsLook: answer.anotherLook !== null,
      };
    }),
  };
}

/** The corrections of a part of a revision, the newest first; withdrawn ones are left out. */
export function listCorrections(tx: Queryable, revisionId: string, partId: string, courseId: string) {
  return tx
    .select({ correction: corrections, by: users.name })
    .from(corrections)
    .innerJoin(users, eq(users.id, corrections.byId))
    .where(
      and(eq(corrections.revisionId, revisionId), eq(corrections.partId, partId), eq(corrections.courseId, courseId)),
    )
    .orderBy(desc(corrections.createdAt))
    .all()
    .filter(({ correction }) => correction.state !== 'withdrawn')
    .map(({ correction: { id, state, reason, createdAt, madeAt }, by }) => ({
      id,
      state,
      reason,
      by,
      createdAt,
      madeAt,
    }));
}
