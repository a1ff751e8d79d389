import { eq, inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { marks } from '@drizzle/schema';
import type { CurrentAnswer, Mark, PileAnswer } from '@shared/marking';
import { answersInOrder, findAnswer, patternOfAnswer, type PiledAnswer } from './find-pile';
import { activeHold, activeHolds } from './holds';
import { seenChecks } from './seen-checks';
import { sequenceOf } from './sequence';

/** Who looks, and what they may see. */
export interface Viewer {
  readonly membershipId: string;
  readonly seesAllMarks: boolean;
}

type MarkRow = typeof marks.$inferSelect;
type Hold = ReturnType<typeof activeHolds>[number];

/** Whether a mark is this person's to see: a lead sees all, a marker their own and those of the check. */
export function maySee(viewer: Viewer, mark: Pick<MarkRow, 'markerId'>): boolean {
  return viewer.seesAllMarks || mark.markerId === null || mark.markerId === viewer.membershipId;
}

/** A mark as it leaves the server, for those who may see it. */
export function presentMark(row: MarkRow): Mark {
  const { patternApplicationId, id, markerId, criteria, total, remark, at, replacesId, reason } = row;
  const notSeenSingly = patternApplicationId !== null;
  return { id, markerId, criteria: [...criteria], total, remark, at, replacesId, reason, notSeenSingly };
}

/** The answers of a pile as bars, in pattern order, and the patterns. */
export function presentAnswers(tx: Queryable, viewer: Viewer, pileId: string, now: number) {
  const { answers, patterns } = answersInOrder(tx, pileId);
  const holds = new Map(activeHolds(tx, pileId, now).map((hold) => [hold.answerId, hold]));
  const standing = standingMarks(tx, answers);
  return {
    patterns: [...patterns],
    answers: answers.map((answer) =>
      presentAnswer(viewer, answer, standing.get(answer.standingMarkId ?? ''), holds.get(answer.id)),
    ),
  };
}

/** One answer as it is now, for a write that was refused or done. */
export function presentCurrent(tx: Queryable, viewer: Viewer, answerId: string, now: number): CurrentAnswer {
  const { answer, code, state } = findAnswer(tx, answerId);
  const seen = seenChecks(tx, [answer.checkId])(answer.checkId);
  const mark =
    answer.standingMarkId === null
      ? undefined
      : tx.select().from(marks).where(eq(marks.id, answer.standingMarkId)).get();
  const { id, version, standingMarkId } = answer;
  const piled: PiledAnswer = { id, code, version, state, standingMarkId, seen, pattern: patternOfAnswer(tx, answer) };
  return {
    ...presentAnswer(viewer, piled, mark, activeHold(tx, answerId, now)),
    sequence: sequenceOf(tx, answer.pileId),
  };
}

function presentAnswer(
  viewer: Viewer,
  answer: PiledAnswer,
  mark: Pick<MarkRow, 'markerId' | 'total'> | undefined,
  hold: Hold | undefined,
): PileAnswer {
  return {
    id: answer.id,
    code: answer.code,
    version: answer.version,
    state: answer.state,
    pattern: answer.pattern,
    markerId: mark?.markerId ?? null,
    total: mark && maySee(viewer, mark) ? mark.total : null,
    ratio: answer.seen.ratio,
    hold: hold ? { holder: hold.membershipId, kind: hold.kind } : null,
  };
}

const batch = 500;

function standingMarks(tx: Queryable, answers: readonly PiledAnswer[]) {
  const ids = answers.flatMap((answer) => answer.standingMarkId ?? []);
  const found = new Map<string, Pick<MarkRow, 'markerId' | 'total'>>();
  for (let start = 0; start < ids.length; start += batch) {
    const rows = tx
      .select({ id: marks.id, markerId: marks.markerId, total: marks.total })
      .from(marks)
      .where(inArray(marks.id, ids.slice(start, start + batch)))
      .all();
    for (const row of rows) found.set(row.id, row);
  }
  return found;
}
