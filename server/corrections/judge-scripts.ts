import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, type corrections, memberships, piles, scripts, setProblems, sets } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { ProblemContent } from '@shared/problems';
import { checkProblem } from '../scripts/check-problem';
import { lastSubmission, type SubmissionRow } from '../scripts/hand-in';
import { variantsOfStudent } from '../sets/draw-set-variants';
import type { Keys } from '../variants/evaluate-outcomes';

export type CorrectionRow = typeof corrections.$inferSelect;

/** The courses that a person leads. */
function ledCourses(tx: Queryable, userId: string): readonly string[] {
  return tx
    .select({ courseId: memberships.courseId })
    .from(memberships)
    .where(and(eq(memberships.userId, userId), eq(memberships.role, 'lead'), isNull(memberships.removedAt)))
    .all()
    .map((row) => row.courseId);
}

/** Where a revision stands in sets, with the set; drafts of sets too. */
export function usesOf(tx: Queryable, revisionId: string) {
  return tx
    .select({ setProblem: setProblems, set: sets })
    .from(setProblems)
    .innerJoin(sets, eq(sets.id, setProblems.setId))
    .where(eq(setProblems.revisionId, revisionId))
    .orderBy(sets.number)
    .all();
}

export type Use = ReturnType<typeof usesOf>[number];

/** The sets that a correction reaches: those of the courses that the person who asked for it leads. */
export function reachedBy(tx: Queryable, correction: Pick<CorrectionRow, 'revisionId' | 'byId'>): Use[] {
  const led = new Set(ledCourses(tx, correction.byId));
  return usesOf(tx, correction.revisionId).filter(({ set }) => led.has(set.courseId));
}

/** What one script handed in for a problem. */
export interface HandedInScript {
  readonly use: Use;
  readonly script: typeof scripts.$inferSelect;
  readonly submission: SubmissionRow;
  /** The answers by part. */
  readonly answers: ReadonlyMap<string, typeof answers.$inferSelect>;
}

/** All that was handed in last, of the sets that a correction reaches. */
export function handedInScripts(tx: Queryable, uses: readonly Use[]): HandedInScript[] {
  return uses.flatMap((use) => {
    const rows = tx
      .select({ answer: answers, script: scripts, partId: piles.partId })
      .from(answers)
      .innerJoin(piles, eq(piles.id, answers.pileId))
      .innerJoin(scripts, eq(scripts.id, answers.scriptId))
      .where(eq(piles.setProblemId, use.setProblem.id))
      .all();
    const byScript = new Map<
      string,
      { script: HandedInScript['script']; answers: Map<string, (typeof rows)[0]['answer']> }
    >();
    for (const { script, answer, partId } of rows) {
      const its = byScript.get(script.id) ?? { script, answers: new Map() };
      its.answers.set(partId, answer);
      byScript.set(script.id, its);
    }
    return [...byScript.values()].flatMap((each) => {
      const submission = lastSubmission(tx, each.script.id);
      return submission ? [{ use, ...each, submission }] : [];
    });
  });
}

/** What was handed in for a part. */
export function handedInPart({ use, submission }: Pick<HandedInScript, 'use' | 'submission'>, partId: string) {
  const own = submission.content.find((each) => each.setProblemId === use.setProblem.id && each.partId === partId);
  return { text: own?.text ?? '', hasPages: (own?.pages.length ?? 0) > 0 };
}

/** Judges what a script handed in for a problem by some content of it. @returns by the parts of the problem */
export async function judgeScript(
  tx: Queryable,
  keys: Keys,
  content: ProblemContent,
  handed: HandedInScript,
): Promise<readonly (CheckResult | null)[]> {
  const { use, script } = handed;
  const givens = variantsOfStudent(tx, use.set.id, script.membershipId).get(use.setProblem.id)?.givens ?? {};
  const parts = content.parts.map((part) => handedInPart(handed, part.id));
  return checkProblem(keys, content, givens, parts);
}
