import { and, asc, eq, inArray, isNull, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Database, Queryable } from '@drizzle/client';
import { memberships, problems, reviewDecisions, reviewRequests, setProblems, sets, users } from '@drizzle/schema';
import type { ProblemReview, ReviewRequest } from '@shared/review';
import { mayReadProblem } from '../access/problem-readers';
import { demand, type SignedIn } from '../access/policy';
import { conflict, invalidField, notAllowed } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { findProblem, latestRevision, type ProblemRow } from './problem-queries';
import { demandProblem, type Deed } from './problem-rules';
import { commentsOf } from './review-comments';
import { decisionsOf, letsUse, signOffOf } from './sign-off';

/**
 * The problem, for those who may read it: the team that owns the bank, and markers who were asked.
 *
 * @throws RequestError 403 for others, 404 for a colleague's draft
 */
export function demandReader(tx: Queryable, person: SignedIn, problemId: string): ProblemRow {
  const row = mayReadProblem(tx, person, problemId) ? findProblem(tx, problemId, person.id) : undefined;
  if (row) return row;
  demand(person, 'read problems');
  return demandProblem(tx, problemId, person.id);
}

/** All that colleagues have said about a problem, as one of them sees it. */
export function presentReview(tx: Queryable, problemId: string, personId: string): ProblemReview {
  const { draft } = demandProblem(tx, problemId, personId);
  const whyNot = whyNoDecision(tx, problemId, personId);
  return {
    statement: draft.statement,
    comments: commentsOf(tx, problemId),
    requests: requestsOf(tx, problemId),
    decisions: decisionsOf(tx, problemId).map(({ id, revision, kind, byId, by, at, words }) => ({
      id,
      revision,
      kind,
      by: { id: byId, name: by },
      at,
      words,
    })),
    standing: signOffOf(tx, problemId),
    mayDecide: whyNot === '',
    whyNot,
  };
}

function whyNoDecision(tx: Queryable, problemId: string, personId: string): string {
  const latest = latestRevision(tx, problemId);
  if (!latest) return 'There is no revision yet.';
  return latest.authorId === personId
    ? `You made revision ${String(latest.number)}, so another person signs it off.`
    : '';
}

function requestsOf(tx: Queryable, problemId: string): ReviewRequest[] {
  const asker = alias(users, 'asker');
  return tx
    .select({ row: reviewRequests, colleague: users.name, askedBy: asker.name })
    .from(reviewRequests)
    .innerJoin(users, eq(users.id, reviewRequests.colleagueId))
    .innerJoin(asker, eq(asker.id, reviewRequests.askedById))
    .where(eq(reviewRequests.problemId, problemId))
    .orderBy(asc(reviewRequests.at), sql`${reviewRequests}.rowid`)
    .all()
    .map(({ row, colleague, askedBy }) => ({
      id: row.id,
      colleague: { id: row.colleagueId, name: colleague },
      askedBy: { id: row.askedById, name: askedBy },
      at: row.at,
      dueAt: row.dueAt,
      note: row.note,
      answeredAt: row.answeredAt,
    }));
}

/** Somebody who can be asked to review. */
export interface Reviewer {
  readonly id: string;
  readonly name: string;
  readonly role: 'lead' | 'marker';
}

/**
 * Who can be asked to review a problem: every lead, and the markers of the courses that the person leads; never the
 * person, and never a student of a course with a set that uses it.
 */
export function reviewersFor(tx: Queryable, problemId: string, person: SignedIn): Reviewer[] {
  const led = [...person.memberships.values()].filter(({ role }) => role === 'lead').map(({ courseId }) => courseId);
  const using = tx
    .select({ courseId: sets.courseId })
    .from(setProblems)
    .innerJoin(sets, eq(sets.id, setProblems.setId))
    .where(eq(setProblems.problemId, problemId))
    .all()
    .map(({ courseId }) => courseId);
  const rows = tx
    .select({ id: users.id, name: users.name, role: memberships.role, courseId: memberships.courseId })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(isNull(memberships.removedAt))
    .orderBy(asc(users.name))
    .all();
  const meets = new Set(
    rows.filter(({ role, courseId }) => role === 'student' && using.includes(courseId)).map(({ id }) => id),
  );
  const found = new Map<string, Reviewer>();
  for (const { id, name, role, courseId } of rows) {
    if (id === person.id || meets.has(id)) continue;
    if (role === 'lead') found.set(id, { id, name, role });
    else if (role === 'marker' && led.includes(courseId) && !found.has(id)) found.set(id, { id, name, role });
  }
  return [...found.values()].sort((a, b) => a.name.localeCompare(b.name, 'en'));
}

/** What a lead asks of colleagues. */
export interface Asking {
  readonly colleagueIds: readonly string[];
  readonly dueAt: number;
  readonly note: string;
}

/**
 * Asks colleagues to review the latest revision. Who is waited for already gets the new date; a draft becomes visible to
 * the team.
 *
 * @throws RequestError 400 for somebody who cannot be asked or a date that is past; 404; 409 without a revision
 */
export function askForReview(db: Database, problemId: string, asking: Asking, person: SignedIn, now: number): void {
  db.transaction(
    (tx) => {
      const problem = demandProblem(tx, problemId, person.id);
      const latest = latestRevision(tx, problemId);
      if (!latest) throw conflict('Save a revision first: what others review is a revision, never the draft.');
      if (problem.status === 'retired') throw conflict('A retired problem is not reviewed. Bring it back first.');
      if (asking.dueAt <= now) throw invalidField(['dueAt'], 'Give a date that is still to come.');
      const reviewers = reviewersFor(tx, problemId, person);
      const asked = asking.colleagueIds.map((id, index) => {
        const found = reviewers.find((each) => each.id === id);
        if (!found) throw invalidField(['colleagueIds', index], 'This person cannot be asked to review this problem.');
        return found;
      });
      tx.update(reviewRequests)
        .set({ dueAt: asking.dueAt, note: asking.note })
        .where(
          and(
            eq(reviewRequests.problemId, problemId),
            isNull(reviewRequests.answeredAt),
            inArray(reviewRequests.colleagueId, ['', ...asking.colleagueIds]),
          ),
        )
        .run();
      for (const { id: colleagueId } of asked)
        tx.insert(reviewRequests)
          .values({
            id: newId(),
            problemId,
            colleagueId,
            askedById: person.id,
            at: now,
            dueAt: asking.dueAt,
            note: asking.note,
          })
          .onConflictDoNothing()
          .run();
      const title = latest.content.title;
      enter(tx, {
        at: now,
        actorId: person.id,
        action: 'review asked',
        thing: 'problem',
        thingId: problemId,
        sentence: `${asked.map(({ name }) => name).join(', ')} asked to review revision ${String(latest.number)} of “${title}”.`,
      });
      if (problem.status !== 'draft') return;
      tx.update(problems)
        .set({ status: 'in review', version: problem.version + 1 })
        .where(eq(problems.id, problemId))
        .run();
      enter(tx, {
        at: now,
        actorId: person.id,
        action: 'problem status changed',
        thing: 'problem',
        thingId: problemId,
        sentence: `“${title}” went from draft to in review.`,
        before: 'draft',
        after: 'in review',
      });
    },
    { behavior: 'immediate' },
  );
}

/** What somebody decides about a revision. */
export interface Decision {
  readonly revision: number;
  readonly kind: 'signed off' | 'changes asked';
  readonly words: string;
}

/**
 * Signs off the latest revision, or asks for changes to it.
 *
 * @throws RequestError 403 for the revision's author; 409 where there is a later revision
 */
export function decide(db: Database, problemId: string, decision: Decision, deed: Deed): void {
  db.transaction(
    (tx) => {
      const latest = demandLatest(tx, problemId, decision.revision);
      const whyNot = whyNoDecision(tx, problemId, deed.personId);
      if (whyNot !== '') throw notAllowed(whyNot);
      insertDecision(tx, problemId, latest.id, decision, deed);
      tx.update(reviewRequests)
        .set({ answeredAt: deed.now })
        .where(
          and(
            eq(reviewRequests.problemId, problemId),
            eq(reviewRequests.colleagueId, deed.personId),
            isNull(reviewRequests.answeredAt),
          ),
        )
        .run();
      const name = `revision ${String(decision.revision)} of “${latest.content.title}”`;
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        action: decision.kind === 'signed off' ? 'revision signed off' : 'changes asked',
        thing: 'problem',
        thingId: problemId,
        sentence: decision.kind === 'signed off' ? `Signed off ${name}.` : `Asked for changes to ${name}.`,
        ...(decision.words === '' ? {} : { reason: decision.words }),
      });
    },
    { behavior: 'immediate' },
  );
}

/**
 * Lets the latest revision be used without a sign-off.
 *
 * @throws RequestError 409 where there is a later revision, or nothing to overrule
 */
export function overrule(
  db: Database,
  problemId: string,
  { revision, reason, courseId }: { readonly revision: number; readonly reason: string; readonly courseId: string },
  deed: Deed,
): void {
  db.transaction(
    (tx) => {
      const latest = demandLatest(tx, problemId, revision);
      const standing = signOffOf(tx, problemId);
      if (letsUse(standing)) throw conflict(`There is nothing to overrule. ${standing.sentence}`);
      insertDecision(tx, problemId, latest.id, { kind: 'overruled', words: reason }, deed);
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        courseId,
        action: 'sign-off overruled',
        thing: 'problem',
        thingId: problemId,
        sentence: `Revision ${String(revision)} of “${latest.content.title}” may be used without a sign-off.`,
        before: standing.sentence,
        reason,
      });
    },
    { behavior: 'immediate' },
  );
}

function demandLatest(tx: Queryable, problemId: string, revision: number) {
  const latest = latestRevision(tx, problemId);
  if (!latest) throw conflict('There is no revision yet.');
  if (latest.number !== revision)
    throw conflict(`There is a revision ${String(latest.number)} by now. Look at what it changes first.`);
  return latest;
}

function insertDecision(
  tx: Queryable,
  problemId: string,
  revisionId: string,
  { kind, words }: Pick<typeof reviewDecisions.$inferInsert, 'kind'> & { readonly words: string },
  { personId, now }: Deed,
): void {
  tx.insert(reviewDecisions).values({ id: newId(), problemId, revisionId, kind, byId: personId, at: now, words }).run();
}
