import { eq } from 'drizzle-orm';
import { answers, checks } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { Criterion } from '@shared/problems';
import type { SignedIn } from '../server/access/policy';
import type { Context } from '../server/context';
import { markAnswer, setAside } from '../server/marking/bench-deeds';
import { letGo, takeHolds } from '../server/marking/holds';
import { doerAt } from '../server/marking/marking-routes';
import { newId } from '../server/http/new-id';
import { seededSource, type RandomSource } from '../server/keys/random-source';
import type { DemoClock } from './demo-clock';

/** What markers write, by how the answer stands to its key. */
const remarks: readonly (readonly [RegExp, readonly string[]])[] = [
  [/twice|× ?2|double/i, ['Just twice the key: look where a factor $2$ came in.', 'A factor of two too many; with $[x,p]=i$ it goes away.']],
  [/half|½/i, ['Half the key. Which factor did you lose on the way?', 'You have half of it: count both contributions.']],
  [/sign/i, ['The size is right, the sign is not. Could it be negative at all?']],
  [/root/i, ['This is the amplitude. Its square is what is asked for.', 'Square it: $|\\langle 0|\\beta\\rangle|^2$ is the probability.']],
  [/power of ten|10/i, ['Right figures, wrong power of ten. Carry the units along.']],
  [/unreadable|no number/i, ['I could not read a number here; what stands on the page counts.']],
  [/./, ['Show where each term comes from; then it is easy to see which one is missing.', 'The approach is fine, the last step is not.', 'Try the limits first: what must come out if there is no loss at all?']],
]; // prettier-ignore

const reasons = [
  'The page seems to belong to another part.',
  'Is a page without the number enough for M1?',
  'Two answers on one page; which one counts?',
];

/**
 * A team marks a share of a pile, in turn, through holds, as at the bench. What the check decides they follow; what a
 * person must see they judge, each with a severity of their own.
 */
export function markPile(
  context: Context,
  clock: DemoClock,
  team: readonly SignedIn[],
  pileId: string,
  job: { readonly share: number; readonly setAside: number; readonly seed: string },
): void {
  const { db } = context;
  const source = seededSource(`marking ${job.seed}`);
  const waiting = db.select().from(answers).where(eq(answers.pileId, pileId)).all();
  const benches = team.map(() => newId());
  let toMark = Math.round(waiting.filter((row) => row.state === 'waits').length * job.share);
  let toSetAside = job.setAside;
  while (toMark > 0) {
    const turn = source.below(team.length);
    const [marker, benchId] = [team[turn], benches[turn]];
    if (!marker || !benchId) return;
    clock.moveOn(12_000 + source.below(20_000));
    const now = clock.now();
    const done = db.transaction(
      (tx) => {
        const doer = doerAt(tx, marker, pileId, benchId);
        const { inHand } = takeHolds(tx, doer, {}, now).held;
        if (inHand === null) return false;
        const row = tx.select().from(answers).where(eq(answers.id, inHand)).get();
        if (!row) return false;
        const write = { answerId: row.id, version: row.version, now };
        // The next turn is a colleague's: nothing stays reserved.
        const leave = () => letGo(tx, doer);
        if (toSetAside > 0 && source.below(9) === 0) {
          toSetAside -= 1;
          setAside(tx, doer, write, pick(source, reasons), false);
          leave();
          return true;
        }
        const check =
          row.checkId === null ? undefined : tx.select().from(checks).where(eq(checks.id, row.checkId)).get();
        const judged = judge(source, doer.found.part.criteria, check?.result, turn);
        markAnswer(tx, doer, { ...write, idempotencyKey: `demo ${row.id}` }, { ...judged, takeNext: false });
        leave();
        return true;
      },
      { behavior: 'immediate' },
    );
    if (!done) return;
    toMark -= 1;
  }
}

function judge(source: RandomSource, scheme: readonly Criterion[], check: CheckResult | undefined, severity: number) {
  const proposed = new Set(check?.proposed ?? []);
  const criteria = scheme.map(({ id, kind }) => {
    // A method can be right without the number; the third and fourth marker of the team are a little harder to please.
    const forMethod = kind === 'M' && source.below(100) < 46 - 8 * severity;
    return { criterionId: id, awarded: proposed.has(id) || (check?.verdict !== 'unanswered' && forMethod) };
  });
  const lost = criteria.some((each) => !each.awarded);
  const words = check ? (check.verdict === 'unreadable' ? 'unreadable' : check.relation.name) : '';
  const fitting = remarks.find(([pattern]) => pattern.test(words))?.[1] ?? [];
  return { criteria, remark: lost && fitting.length > 0 ? pick(source, fitting) : '' };
}

function pick<T>(source: RandomSource, items: readonly T[]): T {
  return items[source.below(items.length)] as T;
}
