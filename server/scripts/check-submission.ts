import { asc, eq, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, checks, scripts, sets, submissions } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { Context } from '../context';
import { newId } from '../http/new-id';
import { marksAreGiven } from '../marking/find-pile';
import { variantsOfStudent } from '../sets/draw-set-variants';
import { problemsOfSet } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';
import { checkProblem } from './check-problem';
import { lastSubmission, type SubmissionRow } from './hand-in';
import { savedParts } from './saved-answers';
import { enterPile } from './standing-checks';

/**
 * Checks what was handed in, on the server, and keeps the results; nothing of them shows to the student. Once the set is
 * closed and the student's time is over, the answers enter their piles too. It may be called again at any time: a check that was made is not made again,
 * and an answer that is on its pile is left alone.
 */
export async function checkSubmission(context: Context, submissionId: string): Promise<void> {
  const { db, clock } = context;
  const found = db
    .select({ submission: submissions, script: scripts })
    .from(submissions)
    .innerJoin(scripts, eq(scripts.id, submissions.scriptId))
    .where(eq(submissions.id, submissionId))
    .get();
  if (!found || lastSubmission(db, found.script.id)?.id !== submissionId) return;
  const { submission, script } = found;
  // Keys take time; they are evaluated before the transaction.
  const under = correctionsIn(db, script.setId);
  const results = await resultsOf(context, script, submission);
  const isCorrected = db.transaction(
    (tx) => {
      if (lastSubmission(tx, script.id)?.id !== submissionId) return false;
      // A correction was made meanwhile: what was judged under the key before it must not be kept.
      if (correctionsIn(tx, script.setId) !== under) return true;
      const set = tx.select().from(sets).where(eq(sets.id, script.setId)).get();
      storeChecks(tx, script, submission, results, clock.now());
      if (set && marksAreGiven(set.stage) && isClosed(tx, script.id)) enterPiles(tx, script, submission, clock.now());
      return false;
    },
    { behavior: 'immediate' },
  );
  if (isCorrected) await checkSubmission(context, submissionId);
}

/** Whether its student's time is over: what is handed in before may still be replaced. */
function isClosed(tx: Queryable, scriptId: string): boolean {
  return tx.select().from(scripts).where(eq(scripts.id, scriptId)).get()?.closedAt != null;
}

/** The corrections that hold in a set, as one text. */
function correctionsIn(tx: Queryable, setId: string): string {
  return problemsOfSet(tx, setId)
    .map(({ setProblem }) => setProblem.correctionId ?? '')
    .join();
}

type Results = ReadonlyMap<string, CheckResult | null>;

const nameOf = (part: { readonly setProblemId: string; readonly partId: string }) =>
  `${part.setProblemId} ${part.partId}`;

/** How each part was judged, by problem and part; those that are checked already are left out. */
async function resultsOf(context: Context, script: ScriptRow, submission: SubmissionRow): Promise<Results> {
  const { db, keys } = context;
  const there = checksOf(db, script, submission.id);
  const variants = variantsOfStudent(db, script.setId, script.membershipId);
  const results = new Map<string, CheckResult | null>();
  for (const { setProblem, revision } of problemsOfSet(db, script.setId)) {
    const { content } = revision;
    const names = content.parts.map((part) => nameOf({ setProblemId: setProblem.id, partId: part.id }));
    if (names.every((name) => there.has(name))) continue;
    const handedIn = names.map((name) => {
      const own = submission.content.find((part) => nameOf(part) === name);
      return { text: own?.text ?? '', hasPages: (own?.pages.length ?? 0) > 0 };
    });
    const judged = await checkProblem(keys, content, variants.get(setProblem.id)?.givens ?? {}, handedIn);
    for (const [index, name] of names.entries()) if (!there.has(name)) results.set(name, judged[index] ?? null);
  }
  return results;
}

/** The checks that were made of a submission, by problem and part. */
function checksOf(tx: Queryable, script: ScriptRow, submissionId: string) {
  // Of several checks of one answer, which corrections make, the last counts.
  const rows = tx
    .select()
    .from(checks)
    .where(eq(checks.submissionId, submissionId))
    .orderBy(asc(checks.at), sql`rowid`)
    .all();
  const byAnswer = new Map(rows.map((row) => [row.answerId, row]));
  return new Map(
    savedParts(tx, script).flatMap((part) => {
      const row = byAnswer.get(part.answer.id);
      return row ? [[nameOf(part), row] as const] : [];
    }),
  );
}

function storeChecks(tx: Queryable, script: ScriptRow, submission: SubmissionRow, results: Results, now: number): void {
  const there = checksOf(tx, script, submission.id);
  for (const part of savedParts(tx, script)) {
    const result = results.get(nameOf(part));
    if (!result || there.has(nameOf(part))) continue;
    const id = newId();
    tx.insert(checks).values({ id, answerId: part.answer.id, submissionId: submission.id, result, at: now }).run();
    // Of an answer that somebody marks, the check stays the one that they saw.
    if (part.answer.state === null) tx.update(answers).set({ checkId: id }).where(eq(answers.id, part.answer.id)).run();
  }
}

function enterPiles(tx: Queryable, script: ScriptRow, submission: SubmissionRow, now: number): void {
  const there = checksOf(tx, script, submission.id);
  const content = new Map(submission.content.map((part) => [nameOf(part), part]));
  const parts = new Map(
    problemsOfSet(tx, script.setId).flatMap(({ setProblem, revision }) =>
      revision.content.parts.map((part) => [nameOf({ setProblemId: setProblem.id, partId: part.id }), part]),
    ),
  );
  for (const saved of savedParts(tx, script)) {
    const name = nameOf(saved);
    const part = parts.get(name);
    if (!part) continue;
    const check = there.get(name) ?? null;
    // A check of an earlier submission must not pass for one of this.
    if (!check && saved.answer.state === null && saved.answer.checkId !== null)
      tx.update(answers).set({ checkId: null }).where(eq(answers.id, saved.answer.id)).run();
    enterPile(tx, {
      answerId: saved.answer.id,
      part,
      check,
      hasPages: (content.get(name)?.pages.length ?? 0) > 0,
      now,
    });
  }
}
