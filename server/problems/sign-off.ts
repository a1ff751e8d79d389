import { isDeepStrictEqual } from 'node:util';
import { desc, eq, sql } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { reviewDecisions, revisions, users } from '@drizzle/schema';
import { partLabel, type Part, type ProblemContent } from '@shared/problems';
import type { SignOffStanding } from '@shared/review';
import { namedGivens } from '@shared/statement';
import { conflict } from '../http/errors';
import { latestRevision } from './problem-queries';

/** A decision with what it was about. */
export type DecisionRow = typeof reviewDecisions.$inferSelect & {
  readonly by: string;
  readonly revision: number;
  readonly content: ProblemContent;
};

/** The decisions about a problem's revisions, newest first. */
export function decisionsOf(tx: Queryable, problemId: string): readonly DecisionRow[] {
  return tx
    .select({ decision: reviewDecisions, by: users.name, revision: revisions.number, content: revisions.content })
    .from(reviewDecisions)
    .innerJoin(users, eq(users.id, reviewDecisions.byId))
    .innerJoin(revisions, eq(revisions.id, reviewDecisions.revisionId))
    .where(eq(reviewDecisions.problemId, problemId))
    .orderBy(desc(reviewDecisions.at), sql`${reviewDecisions}.rowid desc`)
    .all()
    .map(({ decision, ...rest }) => ({ ...decision, ...rest }));
}

/**
 * What changed from one revision to another that a sign-off does not outlive, in words: keys, tolerances, slips, mark
 * schemes, and everything that gives students other numbers. Title, tags and wording alone are none of it.
 */
export function voidingChanges(before: ProblemContent, after: ProblemContent): string[] {
  const changed: string[] = [];
  const asks = ({ statement }: ProblemContent) => [...namedGivens(statement)].sort();
  if (!isSame(before.givens, after.givens) || !isSame(asks(before), asks(after))) changed.push('the givens');
  if (!isSame(before.convention, after.convention)) changed.push('the convention');
  if (!isSame(before.parts.map(idOf), after.parts.map(idOf))) changed.push('the parts and their order');
  for (const [index, part] of after.parts.entries()) {
    const old = before.parts.find((each) => each.id === part.id);
    if (old) changed.push(...changesOfPart(old, part).map((what) => `${what} of (${partLabel(index)})`));
  }
  return changed;
}

function changesOfPart(before: Part, after: Part): string[] {
  const { tolerance: toleranceBefore, slips: slipsBefore, ...keyBefore } = fieldsOf(before.answer);
  const { tolerance, slips, ...key } = fieldsOf(after.answer);
  return [
    ...(isSame(keyBefore, key) ? [] : ['the key']),
    ...(isSame(toleranceBefore, tolerance) ? [] : ['the tolerance']),
    ...(isSame(slipsBefore, slips) ? [] : ['the slips']),
    ...(isSame(schemeOf(before), schemeOf(after)) ? [] : ['the mark scheme']),
  ];
}

/** An answer's fields by name; forms differ in which they have. */
function fieldsOf(answer: Part['answer']): Readonly<Record<string, unknown>> {
  return { ...answer };
}

function schemeOf({ criteria, standsAlone, workedPage }: Part): unknown {
  return { criteria, standsAlone, workedPage };
}

const idOf = ({ id }: Part) => id;

/** By way of JSON, where a property that is absent and one that is undefined are alike. */
function isSame(one: unknown, other: unknown): boolean {
  const plain = (value: unknown): unknown => (value === undefined ? null : JSON.parse(JSON.stringify(value)));
  return isDeepStrictEqual(plain(one), plain(other));
}

/** Whether the latest revision of a problem is signed off, and in words why or why not. */
export function signOffOf(tx: Queryable, problemId: string): SignOffStanding {
  const latest = latestRevision(tx, problemId);
  const nothing = { lastRevision: null, changed: [] };
  if (!latest) return { ...nothing, state: 'no revision', sentence: 'Save a revision; it can then be signed off.' };
  const all = decisionsOf(tx, problemId);
  // A person's newest decision counts, and an overruling settles all before it.
  const overruledAt = all.findIndex(({ kind }) => kind === 'overruled');
  const own = all.filter(
    ({ byId, kind }, index) =>
      kind === 'overruled' || !all.slice(0, index).some((each) => each.byId === byId && each.kind !== 'overruled'),
  );
  const asked = own.find(
    (each) =>
      each.kind === 'changes asked' &&
      each.revisionId === latest.id &&
      (overruledAt < 0 || all.indexOf(each) < overruledAt),
  );
  const passing = own.filter(({ kind }) => kind !== 'changes asked');
  const lastRevision = passing[0]?.revision ?? null;
  const since = passing.map((each) => ({ each, changed: voidingChanges(each.content, latest.content) }));
  if (asked) {
    const sentence = `${asked.by} asks for changes to revision ${String(asked.revision)}.`;
    return { state: 'changes asked', sentence, lastRevision, changed: since[0]?.changed ?? [] };
  }
  const standing = since.find(({ changed }) => changed.length === 0)?.each;
  if (standing) {
    const wording = standing.revision === latest.number ? '' : ' Only wording has changed since.';
    const state = standing.kind === 'overruled' ? 'overruled' : 'signed off';
    return { state, sentence: `${said(standing)}${wording}`, lastRevision: standing.revision, changed: [] };
  }
  const [last] = since;
  if (!last) {
    const sentence = `Nobody has signed off revision ${String(latest.number)} yet.`;
    return { ...nothing, state: 'needed', sentence };
  }
  const list = listed(last.changed);
  const sentence = `${said(last.each)} ${list.charAt(0).toUpperCase()}${list.slice(1)} ${last.changed.length === 1 && !/s( of \(.\))?$/.test(list) ? 'has' : 'have'} changed since, so a fresh sign-off is needed.`;
  return { state: 'void', sentence, lastRevision, changed: last.changed };
}

function said({ by, kind, revision }: DecisionRow): string {
  return kind === 'overruled'
    ? `${by} let revision ${String(revision)} be used without a sign-off.`
    : `${by} signed off revision ${String(revision)}.`;
}

function listed(items: readonly string[]): string {
  return items.length < 2 ? (items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1) ?? ''}`;
}

/** Whether a standing lets a problem be used. */
export function letsUse({ state }: SignOffStanding): boolean {
  return state === 'signed off' || state === 'overruled';
}

/** @throws RequestError 409 where the latest revision is neither signed off nor overruled */
export function demandSignOff(tx: Queryable, problemId: string): void {
  const standing = signOffOf(tx, problemId);
  if (letsUse(standing)) return;
  throw conflict(
    `The problem cannot be ready: ${standing.sentence} Ask a colleague to sign it off, or overrule with a reason.`,
  );
}
