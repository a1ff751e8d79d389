import { and, desc, eq, isNotNull, notInArray, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, checks, correctionChanges, marks } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { CorrectionStep } from '@shared/corrections';
import { partLabel, type Part } from '@shared/problems';
import { newId } from '../http/new-id';
import { marksAreGiven } from '../marking/find-pile';
import { activeHold } from '../marking/holds';
import { enter } from '../record/enter';
import { handedInPart, type CorrectionRow, type HandedInScript } from './judge-scripts';
import { planMark, relationOf, saysTheSame, type MarkPlan } from './plan-mark';

type AnswerRow = typeof answers.$inferSelect;

/** One answer on its way through a correction. */
export interface CorrectedAnswer {
  readonly handed: HandedInScript;
  readonly answer: AnswerRow;
  readonly part: Part;
  readonly partIndex: number;
  readonly before: CheckResult | null;
  readonly after: CheckResult | null;
  readonly plan: MarkPlan;
  readonly totalBefore: number | null;
}

/**
 * What a correction does to every answer of a script, as the rows are at this moment.
 *
 * @param judged the new checks, by the problem's parts
 */
export function correctedAnswers(
  tx: Queryable,
  correction: Pick<CorrectionRow, 'content'>,
  handed: HandedInScript,
  judged: readonly (CheckResult | null)[],
  now: number,
): CorrectedAnswer[] {
  return correction.content.parts.flatMap((part, partIndex): CorrectedAnswer[] => {
    const seen = handed.answers.get(part.id);
    const answer = seen && tx.select().from(answers).where(eq(answers.id, seen.id)).get();
    if (!answer) return [];
    const before = checkOf(tx, answer.checkId);
    const after = judged[partIndex] ?? null;
    const mark =
      answer.standingMarkId === null
        ? undefined
        : tx.select().from(marks).where(eq(marks.id, answer.standingMarkId)).get();
    const plan = planMark(
      {
        state: answer.state,
        mark: mark ? { byPerson: mark.markerId !== null, total: mark.total, criteria: mark.criteria } : null,
        held: activeHold(tx, answer.id, now) !== undefined,
        hasPages: handedInPart(handed, part.id).hasPages,
        marksAreGiven: marksAreGiven(handed.use.set.stage),
        check: before,
      },
      after,
      part,
    );
    return [{ handed, answer, part, partIndex, before, after, plan, totalBefore: mark?.total ?? null }];
  });
}

function checkOf(tx: Queryable, checkId: string | null): CheckResult | null {
  if (checkId === null) return null;
  return tx.select().from(checks).where(eq(checks.id, checkId)).get()?.result ?? null;
}

/** Whether a lead has to see it: the verdict, what it rests on, or the mark is another one. */
export function isChange({ before, after, plan }: CorrectedAnswer): boolean {
  return plan.deed !== 'check alone' || !saysTheSame(before, after);
}

/** Notes the changes of a correction, instead of those that were noted before. */
export function noteChanges(tx: Queryable, correctionId: string, changed: readonly CorrectedAnswer[]): void {
  tx.delete(correctionChanges).where(eq(correctionChanges.correctionId, correctionId)).run();
  for (const each of changed) {
    tx.insert(correctionChanges)
      .values({
        id: newId(),
        correctionId,
        answerId: each.answer.id,
        before: stepOf(each.before, each.totalBefore),
        after: stepOf(each.after, each.plan.total),
        deed: each.plan.deed,
      })
      .run();
  }
}

function stepOf(check: CheckResult | null, total: number | null): CorrectionStep {
  return { verdict: check?.verdict ?? null, relation: relationOf(check), total };
}

/** Writes what a correction does to one answer: a new check, a new mark beside the old one, and the record's entry. */
export function writeCorrected(
  tx: Queryable,
  correction: Pick<CorrectionRow, 'id' | 'reason' | 'byId'>,
  each: CorrectedAnswer,
  now: number,
): void {
  const { answer, after, plan, handed } = each;
  const isNew = JSON.stringify(each.before) !== JSON.stringify(after);
  const change: Partial<AnswerRow> = {};
  if (isNew && after) {
    const checkId = newId();
    tx.insert(checks)
      .values({ id: checkId, answerId: answer.id, submissionId: handed.submission.id, result: after, at: now })
      .run();
    change.checkId = checkId;
  }
  if (plan.mark) {
    const mark = {
      id: newId(),
      answerId: answer.id,
      kind: 'first' as const,
      markerId: null,
      criteria: [...plan.mark.criteria],
      total: plan.mark.total,
      at: now,
      replacesId: lastFirstMark(tx, answer.id),
      reason: `The key was corrected: ${correction.reason}`,
      idempotencyKey: `correction ${correction.id}`,
    };
    tx.insert(marks).values(mark).run();
    Object.assign(change, { state: 'marked', standingMarkId: mark.id, setAsideReason: null, setAsideById: null });
  }
  if (plan.deed === 'returned to the pile') Object.assign(change, { state: 'waits', standingMarkId: null });
  if (plan.anotherLook) change.anotherLook = `A correction changed what the check says: ${correction.reason}`;
  if (Object.keys(change).length === 0) return;
  tx.update(answers)
    .set({ ...change, version: answer.version + 1 })
    .where(eq(answers.id, answer.id))
    .run();
  if (plan.deed !== 'check alone') enterChange(tx, correction, each, now);
}

/** The end of the chain of first marks, which a new one takes the place of. */
function lastFirstMark(tx: Queryable, answerId: string): string | null {
  const replaced = tx
    .select({ id: sql<string>`${marks.replacesId}` })
    .from(marks)
    .where(and(eq(marks.answerId, answerId), isNotNull(marks.replacesId)));
  const last = tx
    .select({ id: marks.id })
    .from(marks)
    .where(and(eq(marks.answerId, answerId), eq(marks.kind, 'first'), notInArray(marks.id, replaced)))
    .orderBy(desc(marks.at))
    .get();
  return last?.id ?? null;
}

const words: Readonly<Record<MarkPlan['deed'], (before: string, after: string) => string>> = {
  'mark replaced': (before, after) => `the mark that its check gave, ${before}, became ${after}`,
  'mark given': (_before, after) => `its check gives the mark ${after}`,
  'returned to the pile': (before) =>
    `the mark that its check gave, ${before}, was taken back, and it waits for a person`,
  'another look': (before) => `its mark, ${before}, was given by a person and stands; it is to be looked at again`,
  'check alone': () => 'its check is another one',
};

function enterChange(
  tx: Queryable,
  correction: Pick<CorrectionRow, 'id' | 'reason' | 'byId'>,
  { handed, answer, partIndex, plan, totalBefore }: CorrectedAnswer,
  now: number,
): void {
  const { set, setProblem } = handed.use;
  const name = `Answer ${handed.script.code} to set ${String(set.number)}, ${String(setProblem.position)} (${partLabel(partIndex)})`;
  enter(tx, {
    at: now,
    actorId: correction.byId,
    courseId: set.courseId,
    action: plan.mark || plan.deed === 'returned to the pile' ? 'mark changed' : 'mark to be looked at again',
    thing: 'answer',
    thingId: answer.id,
    sentence: `${name}: ${words[plan.deed](String(totalBefore), String(plan.total))}.`,
    before: { markId: answer.standingMarkId, total: totalBefore },
    after: { correctionId: correction.id, total: plan.total },
    reason: correction.reason,
  });
}
