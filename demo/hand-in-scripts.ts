import { eq } from 'drizzle-orm';
import { answers, piles, scripts, variants } from '@drizzle/schema';
import { isComputed } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import type { GivenValues } from '@shared/variants';
import type { SignedIn } from '../server/access/policy';
import type { Context } from '../server/context';
import { checkSubmission } from '../server/scripts/check-submission';
import { openSheet } from '../server/scripts/open-sheet';
import { saveAnswer } from '../server/scripts/save-answer';
import { submitSheet } from '../server/scripts/submit-sheet';
import { addPage } from '../server/scripts/worked-pages';
import { problemsOfSet } from '../server/sets/set-queries';
import { evaluateVariantKeys, evaluateWithEarlier, partName } from '../server/variants/evaluate-variant-keys';
import { seededSource } from '../server/keys/random-source';
import type { DemoClock } from './demo-clock';
import type { DemonstrationProblem } from './make-course';
import { simulateAnswer, type SimulatedAnswer } from './simulated-answer';
import { drawWorkedPage } from './worked-page';
import { workedLines } from './worked-lines';

/** How far a simulated student goes. */
export interface Effort {
  /** How many parts they answer, from the first. */
  readonly parts: number;
  readonly submits: boolean;
}

/** A set that is open, with what its problems are. */
export interface OpenSet {
  readonly setId: string;
  readonly number: number;
  readonly problems: readonly DemonstrationProblem[];
}

/** What a number reads as; undefined where it cannot be read. */
function valueOf(text: string): number | undefined {
  const value = Number(text.replace(',', '.').replace(' x 10^', 'e'));
  return text === '' || !Number.isFinite(value) ? undefined : value;
}

/**
 * What a simulated student writes for every part of a problem. Later parts are computed from their own earlier answers,
 * as people do. Fixed by set, problem and the student's place in the roster.
 */
export async function simulateProblem(
  context: Pick<Context, 'keys'>,
  problem: DemonstrationProblem,
  givens: GivenValues,
  student: number,
): Promise<SimulatedAnswer[]> {
  const source = seededSource(`answers ${problem.name} ${String(student)}`);
  const ability = abilityOf(student);
  const computed = await evaluateVariantKeys(context.keys, problem.content, givens);
  const written: SimulatedAnswer[] = [];
  const earlier: Record<string, number> = {};
  let strayed = false;
  for (const [index, part] of problem.content.parts.entries()) {
    const uses = isComputed(part.answer) && part.answer.key.includes('part_');
    const keys =
      strayed && uses
        ? await evaluateWithEarlier(context.keys, problem.content, givens, index, earlier)
        : computed[index];
    const key = keys?.key?.key?.value;
    const slips = (keys?.slips ?? []).flatMap((slip) => (typeof slip.key?.value === 'number' ? [slip.key.value] : []));
    const answer: SimulatedAnswer =
      typeof key === 'number' ? simulateAnswer(source, ability, key, slips) : { mistake: 'nothing', text: '' };
    written.push(answer);
    const own = valueOf(answer.text);
    const right = computed[index]?.key?.key?.value;
    earlier[partName(index)] = own ?? (typeof right === 'number' ? right : 0);
    strayed ||= answer.mistake !== 'none' && own !== undefined;
  }
  return written;
}

/** A student's ability, 0 to 1, by their place in the roster: most lie in the middle. */
function abilityOf(student: number): number {
  const source = seededSource(`ability ${String(student)}`);
  return (source.below(1000) + source.below(1000) + source.below(1000)) / 3000;
}

/** One student works on an open set: saves, worked pages, and where they get so far the submission with its checks. */
export async function workOnSheet(
  context: Context,
  clock: DemoClock,
  set: OpenSet,
  student: SignedIn,
  place: number,
  effort: Effort,
): Promise<void> {
  const { db } = context;
  const membership = [...student.memberships.values()][0];
  if (!membership) return;
  const script = await openSheet(context, set.setId, membership.id);
  let left = effort.parts;
  for (const [position, { setProblem }] of problemsOfSet(db, set.setId).entries()) {
    const problem = set.problems[position];
    if (!problem || left <= 0) break;
    const written = await simulateProblem(context, problem, givensOf(context, setProblem.id, membership.id), place);
    for (const [index, part] of problem.content.parts.entries()) {
      if (left <= 0) break;
      left -= 1;
      const answerId = answerOf(context, script.id, setProblem.id, part.id);
      const text = written[index]?.text ?? '';
      clock.moveOn(90_000);
      if (text !== '')
        saveAnswer(db, student, { answerId, text, version: 0, idempotencyKey: `demo ${answerId}`, now: clock.now() });
      if (!part.workedPage || written[index]?.mistake === 'nothing') continue;
      const source = seededSource(`page ${problem.name} ${partLabel(index)} ${String(place)}`);
      const givens = givensOf(context, setProblem.id, membership.id);
      const lines = workedLines(problem.name, partLabel(index), givens, text, source.below(6));
      const page = await drawWorkedPage(lines, source);
      await addPage(context, student, answerId, () => Promise.resolve(Buffer.from(page)), `demo page ${answerId}`);
    }
  }
  if (!effort.submits) return;
  const submission = submitSheet(db, script, { idempotencyKey: `demo ${script.id}`, now: clock.now() });
  await checkSubmission(context, submission.id);
}

function givensOf({ db }: Context, setProblemId: string, membershipId: string): GivenValues {
  const rows = db.select().from(variants).where(eq(variants.setProblemId, setProblemId)).all();
  return (rows.find((row) => row.membershipId === membershipId) ?? rows[0])?.givens ?? {};
}

function answerOf({ db }: Context, scriptId: string, setProblemId: string, partId: string): string {
  const rows = db
    .select({ id: answers.id, setProblemId: piles.setProblemId, partId: piles.partId })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(eq(answers.scriptId, scriptId))
    .all();
  const found = rows.find((row) => row.setProblemId === setProblemId && row.partId === partId);
  if (!found) throw new Error('A sheet lacks an answer.');
  return found.id;
}
