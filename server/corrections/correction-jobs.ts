import { eq } from 'drizzle-orm';
import * as z from 'zod';
import type { Queryable } from '@drizzle/client';
import { corrections, revisions, setProblems } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import { partLabel } from '@shared/problems';
import type { Context } from '../context';
import { defineJob, JobFailure, type JobAtWork } from '../jobs/job-kinds';
import { nextSequence } from '../marking/sequence';
import { tellPileChanged } from '../marking/tell-piles';
import { enter } from '../record/enter';
import { correctedAnswers, isChange, noteChanges, writeCorrected, type CorrectedAnswer } from './correct-answers';
import { standingCorrection } from './corrected-content';
import {
  handedInScripts,
  judgeScript,
  reachedBy,
  type CorrectionRow,
  type HandedInScript,
  type Use,
} from './judge-scripts';

const input = z.object({ correctionId: z.uuid() });

/** How many scripts are judged at once: enough to keep the pool of workers busy. */
const atOnce = 12;

/** So often is looked again whether something was handed in meanwhile. */
const mostRounds = 5;

type Judged = Map<string, { readonly submissionId: string; readonly results: readonly (CheckResult | null)[] }>;

/** Looks what a correction would change, and notes it. Nothing else changes. */
export const previewCorrectionJob = defineJob({
  kind: 'correction preview',
  input,
  run: (context, work) =>
    judgeAll(context, work, 'proposed', (tx, correction, answers) => {
      noteChanges(tx, correction.id, answers.filter(isChange));
      return [];
    }),
});

/** Makes a correction that was confirmed: all of it in one transaction. */
export const makeCorrectionJob = defineJob({
  kind: 'correction',
  input,
  run: (context, work) =>
    judgeAll(context, work, 'confirmed', (tx, correction, answers, uses) => {
      const now = context.clock.now();
      if ((standingCorrection(tx, correction.revisionId)?.id ?? null) !== correction.basedOnId)
        throw new JobFailure('Another correction of this revision was made meanwhile. Propose this one again.');
      for (const each of answers) writeCorrected(tx, correction, each, now);
      noteChanges(tx, correction.id, answers.filter(isChange));
      for (const { setProblem } of uses)
        tx.update(setProblems).set({ correctionId: correction.id }).where(eq(setProblems.id, setProblem.id)).run();
      tx.update(corrections)
        .set({ state: 'made', madeAt: now, version: correction.version + 1 })
        .where(eq(corrections.id, correction.id))
        .run();
      enterCorrection(tx, correction, uses, answers.filter(isChange).length, now);
      return [...new Set(answers.map(({ answer }) => answer.pileId))].map((pileId) => ({
        pileId,
        sequence: nextSequence(tx, pileId),
      }));
    }),
});

/**
 * Judges every script anew, as often as something is handed in meanwhile, and finishes in the transaction in which it is
 * certain that nothing was.
 */
async function judgeAll(
  context: Context,
  { input: { correctionId }, progress }: JobAtWork<z.output<typeof input>>,
  expected: CorrectionRow['state'],
  finish: (
    tx: Queryable,
    correction: CorrectionRow,
    answers: readonly CorrectedAnswer[],
    uses: readonly Use[],
  ) => readonly { readonly pileId: string; readonly sequence: number }[],
): Promise<void> {
  const { db } = context;
  const judged: Judged = new Map();
  for (let round = 0; round < mostRounds; round += 1) {
    const correction = demandInState(db, correctionId, expected);
    const scripts = handedInScripts(db, reachedBy(db, correction));
    await judgeMissing(context, correction, scripts, judged, progress);
    const told = db.transaction(
      (tx) => {
        const current = demandInState(tx, correctionId, expected);
        const uses = reachedBy(tx, current);
        const now = handedInScripts(tx, uses);
        if (now.some((handed) => !resultsFor(judged, handed))) return null;
        const answers = now.flatMap((handed) =>
          correctedAnswers(tx, current, handed, resultsFor(judged, handed) ?? [], context.clock.now()),
        );
        return finish(tx, current, answers, uses);
      },
      { behavior: 'immediate' },
    );
    if (told) {
      for (const { pileId, sequence } of told) tellPileChanged(context, pileId, sequence);
      return;
    }
  }
  throw new JobFailure('So much is being handed in that no moment without was found. Try it again later.');
}

function demandInState(tx: Queryable, correctionId: string, expected: CorrectionRow['state']): CorrectionRow {
  const row = tx.select().from(corrections).where(eq(corrections.id, correctionId)).get();
  if (row?.state !== expected) throw new JobFailure('The correction was withdrawn, or is made already.');
  return row;
}

const nameOf = ({ use, script }: HandedInScript) => `${use.setProblem.id} ${script.id}`;

function resultsFor(judged: Judged, handed: HandedInScript): readonly (CheckResult | null)[] | undefined {
  const its = judged.get(nameOf(handed));
  return its?.submissionId === handed.submission.id ? its.results : undefined;
}

async function judgeMissing(
  context: Context,
  correction: CorrectionRow,
  scripts: readonly HandedInScript[],
  judged: Judged,
  progress: (done: number, total: number) => void,
): Promise<void> {
  const missing = scripts.filter((handed) => !resultsFor(judged, handed));
  progress(scripts.length - missing.length, scripts.length);
  for (let at = 0; at < missing.length; at += atOnce) {
    const some = missing.slice(at, at + atOnce);
    await Promise.all(
      some.map(async (handed) => {
        const results = await judgeScript(context.db, context.keys, correction.content, handed);
        judged.set(nameOf(handed), { submissionId: handed.submission.id, results });
      }),
    );
    progress(scripts.length - missing.length + Math.min(at + atOnce, missing.length), scripts.length);
  }
}

/** Enters a correction in the record of each course that it reaches. */
function enterCorrection(
  tx: Queryable,
  correction: CorrectionRow,
  uses: readonly Use[],
  changed: number,
  now: number,
): void {
  const revision = tx.select().from(revisions).where(eq(revisions.id, correction.revisionId)).get();
  const before = standingContent(tx, correction) ?? revision?.content;
  const index = correction.content.parts.findIndex((part) => part.id === correction.partId);
  for (const courseId of new Set(uses.map(({ set }) => set.courseId))) {
    const sets = uses.filter(({ set }) => set.courseId === courseId).map(({ set }) => String(set.number));
    enter(tx, {
      at: now,
      actorId: correction.byId,
      courseId,
      action: 'key corrected',
      thing: 'problem',
      thingId: revision?.problemId ?? correction.revisionId,
      sentence: `“${correction.content.title}” (${partLabel(index)}) was corrected in revision ${String(revision?.number ?? 0)}, set ${sets.join(', ')}; ${String(changed)} ${changed === 1 ? 'answer' : 'answers'} of all sets changed by it.`,
      before: before?.parts[index]?.answer,
      after: correction.content.parts[index]?.answer,
      reason: correction.reason,
    });
  }
}

function standingContent(tx: Queryable, { basedOnId }: Pick<CorrectionRow, 'basedOnId'>) {
  if (basedOnId === null) return undefined;
  return tx.select().from(corrections).where(eq(corrections.id, basedOnId)).get()?.content;
}
