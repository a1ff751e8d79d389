import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, answerVersions, pages, piles, setProblems } from '@drizzle/schema';
import type { AnswerDigest } from '@shared/checks';
import { problemsOfSet } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';

export type AnswerVersionRow = typeof answerVersions.$inferSelect;
export type PageRow = typeof pages.$inferSelect;

/** An answer with all that is saved of it. */
export interface SavedPart {
  readonly answer: typeof answers.$inferSelect;
  readonly setProblemId: string;
  readonly partId: string;
  readonly latest: AnswerVersionRow | undefined;
  /** Those on the sheet now, in the order in which they were added. */
  readonly pages: readonly PageRow[];
}

/** The last saved text of an answer. */
export function latestVersion(tx: Queryable, answerId: string): AnswerVersionRow | undefined {
  return tx
    .select()
    .from(answerVersions)
    .where(eq(answerVersions.answerId, answerId))
    .orderBy(desc(answerVersions.number))
    .limit(1)
    .get();
}

/** The worked pages that are on the sheet. */
export function pagesOf(tx: Queryable, answerId: string): PageRow[] {
  return tx
    .select()
    .from(pages)
    .where(and(eq(pages.answerId, answerId), isNull(pages.removedAt)))
    .orderBy(asc(pages.addedAt), asc(pages.id))
    .all();
}

/** What is saved of a script, in the order of the set's problems and their parts. */
export function savedParts(tx: Queryable, script: Pick<ScriptRow, 'id' | 'setId'>): SavedPart[] {
  const rows = tx
    .select({ answer: answers, setProblemId: piles.setProblemId, partId: piles.partId })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .innerJoin(setProblems, eq(setProblems.id, piles.setProblemId))
    .where(eq(answers.scriptId, script.id))
    .all();
  const byPart = new Map(rows.map((row) => [`${row.setProblemId} ${row.partId}`, row]));
  return problemsOfSet(tx, script.setId).flatMap(({ setProblem, revision }) =>
    revision.content.parts.flatMap((part): SavedPart[] => {
      const row = byPart.get(`${setProblem.id} ${part.id}`);
      if (!row) return [];
      return [{ ...row, latest: latestVersion(tx, row.answer.id), pages: pagesOf(tx, row.answer.id) }];
    }),
  );
}

/** What would be handed in now. */
export function contentOf(parts: readonly SavedPart[]): AnswerDigest[] {
  return parts.map(({ setProblemId, partId, latest, pages: own }) => ({
    setProblemId,
    partId,
    text: latest?.text ?? '',
    pages: own.map(({ id, sha256 }) => ({ id, sha256 })),
  }));
}
