import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Database, Queryable } from '@drizzle/client';
import { problemComments, problems, users } from '@drizzle/schema';
import { linesOfPart, placeOfLine, replaceLines } from '@shared/comment-place';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { partLabel } from '@shared/problems';
import type { CommentAnchor, ProblemComment } from '@shared/review';
import { conflict, invalidField, notAllowed, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { followLines } from './comment-lines';
import type { ProblemRow } from './problem-queries';
import { demandCurrent, readProblem, type Deed } from './problem-rules';

type CommentRow = typeof problemComments.$inferSelect;

/** A comment as it is written. */
export interface NewComment {
  readonly anchor: CommentAnchor;
  readonly text: string;
  readonly wording?: string | undefined;
}

const [author, settler, accepter] = [alias(users, 'author'), alias(users, 'settler'), alias(users, 'accepter')];

/** The comments on a problem with their replies, oldest first. */
export function commentsOf(tx: Queryable, problemId: string): ProblemComment[] {
  const rows = tx
    .select({ row: problemComments, by: author.name, settledBy: settler.name, acceptedBy: accepter.name })
    .from(problemComments)
    .innerJoin(author, eq(author.id, problemComments.byId))
    .leftJoin(settler, eq(settler.id, problemComments.settledById))
    .leftJoin(accepter, eq(accepter.id, problemComments.acceptedById))
    .where(eq(problemComments.problemId, problemId))
    .orderBy(asc(problemComments.at), sql`${problemComments}.rowid`)
    .all();
  return rows.flatMap(({ row, by, settledBy, acceptedBy }): ProblemComment[] => {
    if (row.repliesToId !== null) return [];
    const replies = rows
      .filter((other) => other.row.repliesToId === row.id)
      .map((other) => ({
        id: other.row.id,
        by: { id: other.row.byId, name: other.by },
        at: other.row.at,
        text: other.row.text,
      }));
    return [
      {
        id: row.id,
        anchor: row.anchor,
        by: { id: row.byId, name: by },
        at: row.at,
        text: row.text,
        suggestion:
          row.wording === null
            ? null
            : {
                wording: row.wording,
                instead: row.instead ?? '',
                accepted: deedOf(row.acceptedById, acceptedBy, row.acceptedAt),
              },
        settled: deedOf(row.settledById, settledBy, row.settledAt),
        replies,
      },
    ];
  });
}

function deedOf(id: string | null, name: string | null, at: number | null) {
  return id === null || name === null || at === null ? null : { by: { id, name }, at };
}

function presentComment(tx: Queryable, row: CommentRow): ProblemComment {
  const found = commentsOf(tx, row.problemId).find(({ id }) => id === row.id);
  if (!found) throw notFound('comment');
  return found;
}

/** @throws RequestError 404 */
function demandComment(tx: Queryable, problemId: string, commentId: string): CommentRow {
  const row = tx
    .select()
    .from(problemComments)
    .where(and(eq(problemComments.id, commentId), eq(problemComments.problemId, problemId)))
    .get();
  if (row?.repliesToId !== null) throw notFound('comment');
  return row;
}

/**
 * Writes a comment; the same key twice is one comment.
 *
 * @throws RequestError 400 where neither words nor wording are there, or what it is about is not
 */
export function writeComment(
  db: Database,
  problem: ProblemRow,
  comment: NewComment,
  idempotencyKey: string,
  deed: Deed,
): ProblemComment {
  if (comment.text === '' && comment.wording === undefined) throw invalidField(['text'], 'Write a comment.');
  return db.transaction(
    (tx) => {
      const again = byKey(tx, problem.id, idempotencyKey, deed.personId);
      if (again) return presentComment(tx, again);
      const anchor = placed(comment.anchor, problem.draft);
      const instead = comment.wording === undefined ? null : replacedBy(anchor, problem.draft);
      if (instead !== null && instead === comment.wording)
        throw invalidField(['wording'], 'The wording is what stands there already.');
      const row: CommentRow = {
        ...unanswered,
        id: newId(),
        problemId: problem.id,
        anchor,
        text: comment.text,
        wording: comment.wording ?? null,
        instead,
        byId: deed.personId,
        at: deed.now,
        idempotencyKey,
      };
      tx.insert(problemComments).values(row).run();
      return presentComment(tx, row);
    },
    { behavior: 'immediate' },
  );
}

const unanswered = {
  repliesToId: null,
  acceptedAt: null,
  acceptedById: null,
  settledAt: null,
  settledById: null,
} as const;

function byKey(tx: Queryable, problemId: string, idempotencyKey: string, byId: string): CommentRow | undefined {
  return tx
    .select()
    .from(problemComments)
    .where(
      and(
        eq(problemComments.problemId, problemId),
        eq(problemComments.byId, byId),
        eq(problemComments.idempotencyKey, idempotencyKey),
      ),
    )
    .get();
}

/** The anchor at its place in the saved draft: a line is looked for by its words where it is not at its number. */
function placed(anchor: CommentAnchor, draft: ProblemDraft): CommentAnchor {
  if (anchor.kind === 'problem') return anchor;
  if (anchor.kind === 'line') {
    const lines = draft.statement.split('\n');
    if (lines[anchor.line - 1] === anchor.text) return anchor;
    const elsewhere = lines.indexOf(anchor.text);
    return { ...anchor, line: elsewhere < 0 ? Math.min(anchor.line, lines.length) : elsewhere + 1 };
  }
  const part = draft.parts.find(({ id }) => id === anchor.partId);
  if (!part) throw invalidField(['anchor', 'partId'], 'This part is not in the draft any more.');
  if (anchor.kind === 'criterion' && !part.criteria.some(({ id }) => id === anchor.criterionId))
    throw invalidField(['anchor', 'criterionId'], 'This criterion is not in the draft any more.');
  return anchor;
}

/** What suggested wording takes the place of. */
function replacedBy(anchor: CommentAnchor, draft: ProblemDraft): string {
  if (anchor.kind === 'line') return anchor.text;
  const lines = anchor.kind === 'part' ? partLines(anchor.partId, draft) : null;
  if (!lines) throw invalidField(['wording'], 'Wording can be suggested for a line, or for a part of the statement.');
  return lines.text;
}

function partLines(partId: string, draft: ProblemDraft): ReturnType<typeof linesOfPart> {
  const index = draft.parts.findIndex(({ id }) => id === partId);
  return index < 0 ? null : linesOfPart(draft.statement, partLabel(index));
}

/** Answers a comment; the same key twice is one answer. @throws RequestError 404 */
export function replyTo(
  db: Database,
  problemId: string,
  commentId: string,
  reply: { readonly text: string; readonly idempotencyKey: string },
  deed: Deed,
): ProblemComment['replies'][number] {
  return db.transaction(
    (tx) => {
      const { anchor } = demandComment(tx, problemId, commentId);
      const row: CommentRow = byKey(tx, problemId, reply.idempotencyKey, deed.personId) ?? {
        ...unanswered,
        id: newId(),
        problemId,
        repliesToId: commentId,
        anchor,
        text: reply.text,
        wording: null,
        instead: null,
        byId: deed.personId,
        at: deed.now,
        idempotencyKey: reply.idempotencyKey,
      };
      tx.insert(problemComments).values(row).onConflictDoNothing().run();
      const found = presentComment(tx, demandComment(tx, problemId, commentId)).replies.find(({ id }) => id === row.id);
      if (!found) throw conflict('This key was used for another comment.');
      return found;
    },
    { behavior: 'immediate' },
  );
}

/**
 * Settles a comment or opens it again.
 *
 * @param mayWrite whether the person writes problems; others settle their own comments only
 * @throws RequestError 403, 404
 */
export function settleComment(
  db: Database,
  problemId: string,
  commentId: string,
  settled: boolean,
  mayWrite: boolean,
  deed: Deed,
): ProblemComment {
  return db.transaction(
    (tx) => {
      const row = demandComment(tx, problemId, commentId);
      if (!mayWrite && row.byId !== deed.personId) throw notAllowed('You can settle your own comments only.');
      if ((row.settledAt !== null) !== settled)
        tx.update(problemComments)
          .set({ settledAt: settled ? deed.now : null, settledById: settled ? deed.personId : null })
          .where(eq(problemComments.id, commentId))
          .run();
      return presentComment(tx, row);
    },
    { behavior: 'immediate' },
  );
}

/**
 * Puts suggested wording into the draft and settles the comment.
 *
 * @throws RequestError 404; 409 where none is suggested, it was accepted, or the line has changed; 412
 */
export function acceptWording(
  db: Database,
  problemId: string,
  commentId: string,
  version: number,
  deed: Deed,
): ProblemDetail {
  return db.transaction(
    (tx) => {
      const problem = demandCurrent(tx, problemId, version, deed.personId);
      const row = demandComment(tx, problemId, commentId);
      if (problem.status === 'retired') throw conflict('A retired problem is not changed any more.');
      if (row.wording === null) throw conflict('No wording is suggested here.');
      if (row.acceptedAt !== null) throw conflict('This wording was accepted before.');
      const { from, to } = demandUnchanged(row, problem.draft);
      const before = problem.draft.statement;
      const statement = replaceLines(before, from, to, row.wording);
      tx.update(problems)
        .set({ draft: { ...problem.draft, statement }, draftSavedAt: deed.now, version: version + 1 })
        .where(eq(problems.id, problemId))
        .run();
      followLines(tx, problemId, before, statement);
      const settling = row.settledAt === null ? { settledAt: deed.now, settledById: deed.personId } : {};
      tx.update(problemComments)
        .set({ acceptedAt: deed.now, acceptedById: deed.personId, ...settling })
        .where(inArray(problemComments.id, [commentId]))
        .run();
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        action: 'wording accepted',
        thing: 'problem',
        thingId: problemId,
        sentence: `Suggested wording was taken into the draft of “${problem.draft.title}”.`,
        before: row.instead,
        after: row.wording,
      });
      return readProblem(tx, problemId, deed.personId);
    },
    { behavior: 'immediate' },
  );
}

function demandUnchanged(
  { anchor, instead }: CommentRow,
  draft: ProblemDraft,
): { readonly from: number; readonly to: number } {
  if (anchor.kind === 'line') {
    const { line, hasChanged } = placeOfLine(draft.statement, anchor);
    if (!hasChanged) return { from: line - 1, to: line };
  } else if (anchor.kind === 'part') {
    const lines = partLines(anchor.partId, draft);
    if (lines !== null && lines.text === instead) return lines;
  }
  throw conflict(
    'The text has changed since this wording was suggested, so it is not put in its place. Copy what you need of it.',
  );
}
