import { and, eq, isNotNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import {
  answers,
  corrections,
  memberships,
  piles,
  revisions,
  scripts,
  setProblems,
  sets,
  users,
} from '@drizzle/schema';
import type { Colleague } from '@shared/live';
import type { SetStage } from '@shared/primitives';
import { partLabel, type Part } from '@shared/problems';
import { correctedContent, holdsInSet } from '../corrections/corrected-content';
import { notFound } from '../http/errors';
import { inPatternOrder, type Seen } from './patterns';
import { seenChecks } from './seen-checks';

/** The stages in which marks are given. */
const markingStages: ReadonlySet<SetStage> = new Set(['closed', 'marking', 'moderation']);

/** Whether marks can be given in a stage. */
export function marksAreGiven(stage: SetStage): boolean {
  return markingStages.has(stage);
}

/** A pile with what it is of. @throws RequestError 404 */
export function findPile(tx: Queryable, pileId: string) {
  const row = selectPiles(tx).where(eq(piles.id, pileId)).get();
  if (!row) throw notFound('pile');
  return withPart(row);
}

/** The piles of a set in the order of its problems and parts. */
export function pilesOfSet(tx: Queryable, setId: string) {
  return selectPiles(tx)
    .where(eq(piles.setId, setId))
    .all()
    .map(withPart)
    .sort((one, other) => one.setProblem.position - other.setProblem.position || one.partIndex - other.partIndex);
}

function selectPiles(tx: Queryable) {
  return tx
    .select({ pile: piles, set: sets, setProblem: setProblems, content: correctedContent })
    .from(piles)
    .innerJoin(sets, eq(sets.id, piles.setId))
    .innerJoin(setProblems, eq(setProblems.id, piles.setProblemId))
    .innerJoin(revisions, eq(revisions.id, setProblems.revisionId))
    .leftJoin(corrections, holdsInSet);
}

type Row = NonNullable<ReturnType<ReturnType<typeof selectPiles>['get']>>;

/** A pile, its set, its problem and its part. */
export type FoundPile = Row & { readonly part: Part; readonly partIndex: number; readonly partLabel: string };

function withPart(row: Row): FoundPile {
  const partIndex = row.content.parts.findIndex((part) => part.id === row.pile.partId);
  const part = row.content.parts[partIndex];
  if (!part) throw new Error('A pile names a part that its revision does not have.');
  return { ...row, part, partIndex, partLabel: partLabel(partIndex) };
}

/** An answer on its way through a pile. */
export interface PiledAnswer {
  readonly id: string;
  readonly code: string;
  readonly version: number;
  readonly state: 'waits' | 'marked' | 'set aside';
  readonly standingMarkId: string | null;
  readonly seen: Seen;
  /** The key of its pattern among all of the pile. */
  readonly pattern: string;
}

/** The answers of a pile that were handed in, in pattern order. */
export function answersInOrder(tx: Queryable, pileId: string) {
  const rows = tx
    .select({
      id: answers.id,
      code: scripts.code,
      version: answers.version,
      state: answers.state,
      checkId: answers.checkId,
      standingMarkId: answers.standingMarkId,
    })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(answers.pileId, pileId), isNotNull(answers.state)))
    .all();
  const seen = seenChecks(
    tx,
    rows.map((row) => row.checkId),
  );
  const ordered = inPatternOrder(
    rows.flatMap(({ checkId, state, ...row }) => (state === null ? [] : [{ ...row, state, seen: seen(checkId) }])),
  );
  rememberPatterns(pileId, rows, ordered.answers);
  return ordered;
}

/** Most piles whose patterns are remembered. */
const mostPiles = 200;

/** Patterns by answer, with the check that they were told by. */
const remembered = new Map<
  string,
  ReadonlyMap<string, { readonly checkId: string | null; readonly pattern: string }>
>();

function rememberPatterns(
  pileId: string,
  rows: readonly { readonly id: string; readonly checkId: string | null }[],
  answersOfPile: readonly PiledAnswer[],
): void {
  const checkIds = new Map(rows.map(({ id, checkId }) => [id, checkId]));
  if (remembered.size >= mostPiles) remembered.clear();
  remembered.set(
    pileId,
    new Map(answersOfPile.map(({ id, pattern }) => [id, { checkId: checkIds.get(id) ?? null, pattern }])),
  );
}

/** The key of an answer's pattern among all of its pile, without putting the pile in order again where that was done. */
export function patternOfAnswer(
  tx: Queryable,
  answer: { readonly id: string; readonly pileId: string; readonly checkId: string | null },
): string {
  const known = remembered.get(answer.pileId)?.get(answer.id);
  if (known?.checkId === answer.checkId) return known.pattern;
  return answersInOrder(tx, answer.pileId).answers.find(({ id }) => id === answer.id)?.pattern ?? '';
}

/** An answer that was handed in, with its script's code. @throws RequestError 404 */
export function findAnswer(tx: Queryable, answerId: string) {
  const row = tx
    .select({ answer: answers, code: scripts.code, script: scripts })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(answers.id, answerId), isNotNull(answers.state)))
    .get();
  if (!row?.answer.state) throw notFound('answer');
  return { ...row, state: row.answer.state };
}

/** Those who mark in a course, now and before. */
export function teamOf(tx: Queryable, courseId: string): Colleague[] {
  return tx
    .select({
      membershipId: memberships.id,
      name: users.name,
      initials: memberships.initials,
      hue: memberships.hue,
      role: memberships.role,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.courseId, courseId), isNotNull(memberships.initials)))
    .all()
    .map(({ membershipId, name, initials, hue }) => ({ membershipId, name, initials: initials ?? '?', hue: hue ?? 1 }));
}
