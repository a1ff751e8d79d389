import { desc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, marks } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { MarkedCriterion } from '@shared/marking';
import type { Part } from '@shared/problems';
import { newId } from '../http/new-id';
import { totalOf } from '../marking/bench-deeds';

/** An answer on its way to its pile. */
export interface EnteringAnswer {
  readonly answerId: string;
  readonly part: Pick<Part, 'criteria' | 'standsAlone'>;
  /** Null where no check could be made: a person looks. */
  readonly check: { readonly id: string; readonly result: CheckResult } | null;
  readonly hasPages: boolean;
  readonly now: number;
}

/**
 * Puts an answer that was handed in on its pile: where the part lets the check stand alone it gets its mark at once,
 * otherwise it waits for a person. An answer that is on its pile already is left as it is.
 *
 * @returns where it stands now
 */
export function enterPile(tx: Queryable, entering: EnteringAnswer): 'waits' | 'marked' | 'there already' {
  const { answerId, part, check, now } = entering;
  const row = tx.select().from(answers).where(eq(answers.id, answerId)).get();
  if (row?.state !== null) return 'there already';
  const version = row.version + 1;
  if (!check || !standsAlone(entering, check.result)) {
    tx.update(answers).set({ state: 'waits', version }).where(eq(answers.id, answerId)).run();
    return 'waits';
  }
  const criteria = proposedCriteria(part, check.result);
  const before = tx.select().from(marks).where(eq(marks.answerId, answerId)).orderBy(desc(marks.at)).limit(1).get();
  const mark = {
    id: newId(),
    answerId,
    kind: 'first' as const,
    markerId: null,
    criteria,
    total: totalOf(criteria, part.criteria),
    at: now,
    replacesId: before?.id ?? null,
    // A script that was given more time comes back, perhaps as it was.
    idempotencyKey: before ? `check ${check.id} after ${before.id}` : `check ${check.id}`,
  };
  tx.insert(marks).values(mark).run();
  tx.update(answers).set({ state: 'marked', standingMarkId: mark.id, version }).where(eq(answers.id, answerId)).run();
  return 'marked';
}

/** The mark scheme as a check proposes it; nothing is awarded where there is none. */
export function proposedCriteria(
  part: Pick<Part, 'criteria'>,
  check: Pick<CheckResult, 'proposed'> | null,
): MarkedCriterion[] {
  return part.criteria.map(({ id }) => ({ criterionId: id, awarded: check?.proposed.includes(id) === true }));
}

/** Whether a check stands without a person. An empty field beside a worked page is no empty answer: somebody looks at it. */
export function standsAlone(
  { part, hasPages }: Pick<EnteringAnswer, 'part' | 'hasPages'>,
  { verdict }: CheckResult,
): boolean {
  if (verdict === 'right') return part.standsAlone.includes('right');
  return verdict === 'unanswered' && !hasPages && part.standsAlone.includes('unanswered');
}
