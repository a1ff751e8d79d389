import type { CheckResult } from '@shared/checks';
import type { CorrectionDeed } from '@shared/corrections';
import type { MarkedCriterion } from '@shared/marking';
import type { Part } from '@shared/problems';
import { totalOf } from '../marking/bench-deeds';
import { proposedCriteria, standsAlone } from '../scripts/standing-checks';

/** How an answer stands when a correction reaches it. */
export interface AnswerNow {
  /** Null: handed in, and not yet on its pile. */
  readonly state: 'waits' | 'marked' | 'set aside' | null;
  /** The mark that stands; `byPerson` false: the check gave it alone. */
  readonly mark: {
    readonly byPerson: boolean;
    readonly total: number;
    readonly criteria: readonly MarkedCriterion[];
  } | null;
  /** Whether somebody has it in hand at the moment. */
  readonly held: boolean;
  readonly hasPages: boolean;
  /** Whether marks of its set are still given. */
  readonly marksAreGiven: boolean;
  readonly check: CheckResult | null;
}

/** What becomes of an answer's mark. */
export interface MarkPlan {
  readonly deed: CorrectionDeed;
  /** The mark that the check gives now; null where none is given. */
  readonly mark: { readonly criteria: readonly MarkedCriterion[]; readonly total: number } | null;
  /** The total that stands afterwards. */
  readonly total: number | null;
  readonly anotherLook: boolean;
}

/**
 * Decides what a new check does to an answer's mark. A mark that a person gave is never touched: where the check says
 * something else now, it is to be looked at again. A mark that a check gave alone follows the check, or the answer goes
 * back to its pile; once marks are out it is replaced and looked at again.
 */
export function planMark(
  now: AnswerNow,
  after: CheckResult | null,
  part: Pick<Part, 'criteria' | 'standsAlone'>,
): MarkPlan {
  const keep = (deed: CorrectionDeed): MarkPlan => ({
    deed,
    mark: null,
    total: now.mark?.total ?? null,
    anotherLook: deed === 'another look',
  });
  const alone = after !== null && standsAlone({ part, hasPages: now.hasPages }, after);
  const given = () => {
    const criteria = proposedCriteria(part, after);
    return { criteria, total: totalOf(criteria, part.criteria) };
  };

  if (now.state === 'waits' && alone && now.marksAreGiven && !now.held) {
    const mark = given();
    return { deed: 'mark given', mark, total: mark.total, anotherLook: false };
  }
  if (now.state !== 'marked' || !now.mark) return keep('check alone');
  if (saysTheSame(now.check, after)) return keep('check alone');
  if (now.mark.byPerson) return keep('another look');
  if (!alone && now.marksAreGiven) return { deed: 'returned to the pile', mark: null, total: null, anotherLook: false };
  const mark = given();
  const isSame = JSON.stringify(mark.criteria) === JSON.stringify(now.mark.criteria);
  if (isSame) return keep('check alone');
  return { deed: 'mark replaced', mark, total: mark.total, anotherLook: !alone };
}

/** Whether two checks come to the same for a marker and for the feedback. */
export function saysTheSame(before: CheckResult | null, after: CheckResult | null): boolean {
  const words = (check: CheckResult | null) =>
    check && [check.verdict, check.fraction, relationOf(check), [...check.proposed].sort()];
  return JSON.stringify(words(before)) === JSON.stringify(words(after));
}

/** How an answer stands to its key, where the verdict alone does not say it. */
export function relationOf(check: CheckResult | null): string {
  return check?.verdict === 'slip' || check?.verdict === 'wrong' ? check.relation.name : '';
}
