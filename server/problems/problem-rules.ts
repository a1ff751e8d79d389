import { and, eq } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { problems, revisions } from '@drizzle/schema';
import { defaultConvention, type Convention } from '@shared/primitives';
import { draftOf, readDraft } from '@shared/read-draft';
import { emptyDraft, type ProblemDraft } from '@shared/problem-draft';
import type { ProblemContent, ProblemStatus } from '@shared/problems';
import type { ProblemDetail } from '@shared/problem-routes';
import { conflict, invalidInput, notFound, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import type { Keys } from '../variants/evaluate-outcomes';
import { demandCleanAudit } from './audit-rules';
import { followLines } from './comment-lines';
import { keyFaults } from './key-faults';
import { findProblem, latestRevision, presentSummary, type ProblemRow } from './problem-queries';
import { demandSignOff, letsUse, signOffOf } from './sign-off';

/** Who does it, and when. */
export interface Deed {
  readonly personId: string;
  readonly now: number;
}

/** The states that follow each state. A draft alone is private, so only its author can make one of it again. */
const nextStatuses: Readonly<Record<ProblemStatus, readonly ProblemStatus[]>> = {
  draft: ['in review', 'ready', 'retired'],
  'in review': ['draft', 'ready', 'retired'],
  ready: ['in review', 'retired'],
  retired: ['draft', 'in review', 'ready'],
};

/** The problem as the person sees it. @throws RequestError 404 where they may not */
export function readProblem(tx: Queryable, problemId: string, personId: string): ProblemDetail {
  return presentProblem(tx, demandProblem(tx, problemId, personId), personId);
}

/** @throws RequestError 404 where there is no such problem, or it is somebody else's draft */
export function demandProblem(tx: Queryable, problemId: string, personId: string): ProblemRow {
  const row = findProblem(tx, problemId, personId);
  if (!row) throw notFound('problem');
  return row;
}

function presentProblem(tx: Queryable, row: ProblemRow, personId: string): ProblemDetail {
  const latest = latestRevision(tx, row.id);
  const mine = row.authorId === personId;
  return {
    ...presentSummary(row, latest),
    draft: row.draft,
    mine,
    nextStatuses: nextStatuses[row.status].filter((status) =>
      status === 'draft' ? mine : latest !== undefined || status === 'retired',
    ),
  };
}

/** Begins a problem. */
export function beginProblem(
  db: Database,
  begin: { readonly title: string; readonly convention?: Convention },
  deed: Deed,
): ProblemDetail {
  return createProblem(db, emptyDraft(begin.title, begin.convention ?? defaultConvention), 'problem begun', deed);
}

/** Stores a new problem that consists of a draft, and enters in the record how it came about. */
export function createProblem(
  db: Database,
  draft: ProblemDraft,
  action: 'problem begun' | 'problem copied' | 'problem read from a file',
  deed: Deed,
): ProblemDetail {
  return db.transaction(
    (tx) => {
      const id = newId();
      tx.insert(problems)
        .values({ id, authorId: deed.personId, draft, draftSavedAt: deed.now, createdAt: deed.now })
        .run();
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        action,
        thing: 'problem',
        thingId: id,
        sentence: `${action.replace('problem', 'Problem')}: “${draft.title}”.`,
      });
      return readProblem(tx, id, deed.personId);
    },
    { behavior: 'immediate' },
  );
}

/** Keeps a draft as it is typed. @throws RequestError 404; 412 with the current state; 409 for a retired problem */
export function saveDraft(
  db: Database,
  problemId: string,
  draft: ProblemDraft,
  version: number,
  deed: Deed,
): ProblemDetail {
  return db.transaction(
    (tx) => {
      const row = demandCurrent(tx, problemId, version, deed.personId);
      if (row.status === 'retired')
        throw conflict('A retired problem is not changed any more. Bring it back first, or copy it.');
      tx.update(problems)
        .set({ draft, draftSavedAt: deed.now, version: version + 1 })
        .where(and(eq(problems.id, problemId), eq(problems.version, version)))
        .run();
      followLines(tx, problemId, row.draft.statement, draft.statement);
      return readProblem(tx, problemId, deed.personId);
    },
    { behavior: 'immediate' },
  );
}

/** @throws RequestError 404; 412 with the current state */
export function demandCurrent(tx: Queryable, problemId: string, version: number, personId: string): ProblemRow {
  const row = demandProblem(tx, problemId, personId);
  if (row.version !== version) {
    throw stale(
      'This problem was changed in another place meanwhile. What you typed is kept; choose which of the two goes on.',
      presentProblem(tx, row, personId),
    );
  }
  return row;
}

/**
 * Makes a revision of the draft.
 *
 * @throws RequestError 400 with every fault, those of key expressions with their character; 404; 412; 409 where
 *   nothing is new
 */
export async function makeRevision(
  db: Database,
  keys: Keys,
  problemId: string,
  revise: { readonly reason: string; readonly version: number },
  deed: Deed,
): Promise<ProblemDetail> {
  const before = demandCurrent(db, problemId, revise.version, deed.personId);
  const content = await demandContent(keys, before.draft);
  return db.transaction(
    (tx) => {
      const row = demandCurrent(tx, problemId, revise.version, deed.personId);
      if (row.status === 'retired') throw conflict('A retired problem gets no revisions. Bring it back first.');
      const latest = latestRevision(tx, problemId);
      if (latest && !presentSummary(row, latest).changed)
        throw conflict(`Nothing has changed since revision ${String(latest.number)}.`);
      const number = (latest?.number ?? 0) + 1;
      tx.insert(revisions)
        .values({
          id: newId(),
          problemId,
          number,
          content,
          authorId: deed.personId,
          reason: revise.reason,
          createdAt: deed.now,
        })
        .run();
      // What was signed off is used no further once its sign-off is void; sets keep the revision they have.
      const goesBack = row.status === 'ready' && !letsUse(signOffOf(tx, problemId));
      tx.update(problems)
        .set({ version: row.version + 1, ...(goesBack ? { status: 'in review' as const } : {}) })
        .where(eq(problems.id, problemId))
        .run();
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        action: 'revision made',
        thing: 'problem',
        thingId: problemId,
        sentence: `Revision ${String(number)} of “${content.title}” made.${goesBack ? ' It needs a fresh sign-off, so the problem is in review again.' : ''}`,
        reason: revise.reason,
      });
      return readProblem(tx, problemId, deed.personId);
    },
    { behavior: 'immediate' },
  );
}

async function demandContent(keys: Keys, draft: ProblemDraft): Promise<ProblemContent> {
  const { content, faults } = readDraft(draft);
  if (!content) throw invalidInput(faults, 'The draft is kept, but it cannot become a revision yet.');
  const wrong = await keyFaults(keys, content);
  if (wrong.length > 0) throw invalidInput(wrong, 'The draft is kept, but a key of it has no value yet.');
  return content;
}

/**
 * Puts a problem in another state.
 *
 * @throws RequestError 404; 412; 409 where that state does not follow, where there is no revision, or where the key audit of
 *   the latest revision found something that stops use, or was not made (`auditForUse` makes it), or where that revision
 *   is neither signed off nor overruled
 */
export function setProblemStatus(
  db: Database,
  problemId: string,
  change: { readonly status: ProblemStatus; readonly version: number },
  deed: Deed,
): ProblemDetail {
  return db.transaction(
    (tx) => {
      const row = demandCurrent(tx, problemId, change.version, deed.personId);
      const { nextStatuses: allowed, latestRevision: latest } = presentProblem(tx, row, deed.personId);
      if (!allowed.includes(change.status)) {
        throw conflict(
          latest === null && change.status !== 'draft'
            ? 'Save a revision first: what others review or use is a revision, never the draft.'
            : `A problem that is ${row.status} cannot become ${change.status}${change.status === 'draft' && row.authorId !== deed.personId ? ' by anyone but its author' : ''}.`,
        );
      }
      const revision = latestRevision(tx, problemId);
      if (change.status === 'ready' && revision) {
        demandCleanAudit(tx, problemId, revision.content);
        demandSignOff(tx, problemId);
      }
      tx.update(problems)
        .set({ status: change.status, version: row.version + 1 })
        .where(eq(problems.id, problemId))
        .run();
      enter(tx, {
        at: deed.now,
        actorId: deed.personId,
        action: 'problem status changed',
        thing: 'problem',
        thingId: problemId,
        sentence: `“${row.draft.title}” went from ${row.status} to ${change.status}.`,
        before: row.status,
        after: change.status,
      });
      return readProblem(tx, problemId, deed.personId);
    },
    { behavior: 'immediate' },
  );
}

/** Begins a problem with the draft of another. */
export function copyProblem(db: Database, problemId: string, deed: Deed): ProblemDetail {
  const { draft } = demandProblem(db, problemId, deed.personId);
  const title = `${draft.title} (copy)`;
  return createProblem(db, { ...draft, title }, 'problem copied', deed);
}

/** Begins a problem with finished content, for example of a problem file. */
export function createFromContent(db: Database, content: ProblemContent, deed: Deed): ProblemDetail {
  return createProblem(db, draftOf(content), 'problem read from a file', deed);
}
