import { hour } from './demo-clock';
import type { SignedIn } from '../server/access/policy';
import type { Context } from '../server/context';
import { newId } from '../server/http/new-id';
import { replyTo, writeComment } from '../server/problems/review-comments';
import { demandProblem } from '../server/problems/problem-rules';
import { askForReview, decide } from '../server/problems/review-rules';
import { beginTryOut, handInTryOut } from '../server/problems/try-out-rules';

/** Who asks for a review, whom, and when they answer. */
export interface DemonstrationReview {
  readonly author: SignedIn;
  readonly colleague: SignedIn;
  readonly problemId: string;
}

/** Asks a colleague to review a problem, who signs it off some hours later. @returns when */
export function signOff({ db, clock }: Context, { author, colleague, problemId }: DemonstrationReview): number {
  const asked = clock.now();
  askForReview(db, problemId, { colleagueIds: [colleague.id], dueAt: asked + 72 * hour, note: '' }, author, asked);
  const signedAt = asked + 4 * hour;
  decide(db, problemId, { revision: 1, kind: 'signed off', words: '' }, { personId: colleague.id, now: signedAt });
  return signedAt;
}

/** What a colleague says about a line: the words that the line is found by, and theirs. */
export interface DemonstrationComment {
  readonly colleague: SignedIn;
  readonly at: number;
  readonly lineWith: string;
  readonly text: string;
  /** A word of the line and what it is to be instead, where wording is suggested. */
  readonly instead?: readonly [string, string];
  readonly reply?: string;
}

/** Lets a colleague comment on the line of a problem that holds some words, and its author answer. */
export function commentOn(
  { db }: Context,
  author: SignedIn,
  problemId: string,
  { colleague, at, lineWith, text, instead, reply }: DemonstrationComment,
): void {
  const problem = demandProblem(db, problemId, author.id);
  const lines = problem.draft.statement.split('\n');
  const index = lines.findIndex((line) => line.includes(lineWith));
  const line = lines[index];
  if (line === undefined) throw new Error(`No line of the demonstration’s problem holds “${lineWith}”.`);
  const { id } = writeComment(
    db,
    problem,
    {
      anchor: { kind: 'line', line: index + 1, text: line },
      text,
      wording: instead ? line.replace(instead[0], instead[1]) : undefined,
    },
    newId(),
    { personId: colleague.id, now: at },
  );
  if (reply !== undefined)
    replyTo(db, problemId, id, { text: reply, idempotencyKey: newId() }, { personId: author.id, now: at + 2 * hour });
}

/**
 * Lets a colleague try a problem out.
 *
 * @param minutes how long they are at it
 * @param solve gives their answers, part by part, for the numbers that they got
 */
export async function tryOut(
  context: Context,
  problemId: string,
  colleague: SignedIn,
  begunAt: number,
  minutes: number,
  solve: (givens: Readonly<Record<string, number>>) => readonly string[],
): Promise<void> {
  const personId = colleague.id;
  const paper = await beginTryOut(context, problemId, { personId, now: begunAt });
  const givens = Object.fromEntries(Object.entries(paper.givens).map(([name, { printed }]) => [name, Number(printed)]));
  const solved = solve(givens);
  const answers = Object.fromEntries(paper.parts.map(({ partId }, index) => [partId, solved[index] ?? '']));
  const now = begunAt + minutes * 60_000;
  await handInTryOut(context, problemId, paper.id, { answers, activeSeconds: minutes * 60 }, { personId, now });
}
