import { and, desc, eq, isNotNull, isNull } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { revisions, tryOuts, users } from '@drizzle/schema';
import { partLabel, partMarks, type ProblemContent } from '@shared/problems';
import { splitStatement } from '@shared/statement';
import type { TryOut, TryOutPaper } from '@shared/try-outs';
import type { Context } from '../context';
import { conflict, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { checkProblem } from '../scripts/check-problem';
import { fieldOf, optionsOf, printedData, printedGivens } from '../scripts/present-sheet';
import { drawVariant } from '../variants/draw-variant';
import { latestRevision } from './problem-queries';
import type { Deed } from './problem-rules';

interface FoundTryOut {
  readonly row: typeof tryOuts.$inferSelect;
  readonly by: string;
  readonly revision: number;
  readonly content: ProblemContent;
}

/** What is typed, by the part's id, and how long somebody was at it. */
export interface TypedAnswers {
  readonly answers: Readonly<Record<string, string>>;
  readonly activeSeconds: number;
}

/** The try-outs of a problem that were handed in, newest first. */
export function listTryOuts(tx: Queryable, problemId: string): TryOut[] {
  return tryOutsWhere(tx)
    .where(and(eq(tryOuts.problemId, problemId), isNotNull(tryOuts.handedInAt)))
    .orderBy(desc(tryOuts.handedInAt))
    .all()
    .map(presentTryOut);
}

function tryOutsWhere(tx: Queryable) {
  return tx
    .select({ row: tryOuts, by: users.name, revision: revisions.number, content: revisions.content })
    .from(tryOuts)
    .innerJoin(users, eq(users.id, tryOuts.byId))
    .innerJoin(revisions, eq(revisions.id, tryOuts.revisionId))
    .$dynamic();
}

function presentTryOut({ row, by, revision, content }: FoundTryOut): TryOut {
  const answers = content.parts.map((part, index): TryOut['answers'][number] => {
    const result = row.results?.[index] ?? null;
    const slip = result?.slip === undefined || !('slips' in part.answer) ? undefined : part.answer.slips?.[result.slip];
    return {
      label: partLabel(index),
      answer: row.answers[part.id] ?? '',
      verdict: result?.verdict ?? null,
      relation: slip?.name ?? result?.problem ?? result?.relation.name ?? '',
      key: result?.key?.value ?? null,
      ...(result?.key?.unit === undefined ? {} : { unit: result.key.unit }),
    };
  });
  const checked = answers.filter(
    ({ verdict }, index) => verdict !== null && content.parts[index]?.answer.form !== 'worked',
  );
  return {
    id: row.id,
    by: { id: row.byId, name: by },
    revision,
    handedInAt: row.handedInAt ?? row.savedAt,
    activeMinutes: Math.max(1, Math.round(row.activeSeconds / 60)),
    right: checked.filter(({ verdict }) => verdict === 'right').length,
    checked: checked.length,
    answers,
  };
}

/**
 * Begins to try the latest revision out in a variant of its own, or goes on with what was begun.
 *
 * @throws RequestError 409 where there is no revision; VariantError where a variant cannot be drawn
 */
export async function beginTryOut({ db, keys }: Context, problemId: string, deed: Deed): Promise<TryOutPaper> {
  const latest = latestRevision(db, problemId);
  if (!latest) throw conflict('Save a revision first: what is tried out is a revision, never the draft.');
  const begun = openTryOut(db, latest.id, deed.personId);
  if (begun) return presentPaper(begun);
  const id = newId();
  const givens = await drawVariant(keys, latest.content, `try-out ${id}`);
  db.insert(tryOuts)
    .values({
      id,
      problemId,
      revisionId: latest.id,
      byId: deed.personId,
      givens,
      answers: {},
      startedAt: deed.now,
      savedAt: deed.now,
    })
    .onConflictDoNothing()
    .run();
  const made = openTryOut(db, latest.id, deed.personId);
  if (!made) throw notFound('try-out');
  return presentPaper(made);
}

function openTryOut(tx: Queryable, revisionId: string, personId: string): FoundTryOut | undefined {
  return tryOutsWhere(tx)
    .where(and(eq(tryOuts.revisionId, revisionId), eq(tryOuts.byId, personId), isNull(tryOuts.handedInAt)))
    .get();
}

/** What a student would see: named pieces only, so that nothing of keys or mark scheme can come along. */
function presentPaper({ row, revision, content }: FoundTryOut): TryOutPaper {
  const { stem, parts } = splitStatement(content.statement);
  return {
    id: row.id,
    revision,
    title: content.title,
    stem,
    safety: content.safety,
    givens: printedGivens(content, row.givens),
    data: printedData(content, row.givens),
    parts: content.parts.map((part, index) => {
      const label = partLabel(index);
      return {
        partId: part.id,
        label,
        text: parts.find((each) => each.label === label)?.text ?? '',
        marks: partMarks(part),
        field: fieldOf(part.answer, content),
        options: optionsOf(part),
        answer: row.answers[part.id] ?? '',
      };
    }),
    activeSeconds: row.activeSeconds,
  };
}

/** Keeps what is typed. @throws RequestError 404 where it is no try-out of the person's; 409 after it was handed in */
export function keepTryOut(db: Database, problemId: string, tryOutId: string, typed: TypedAnswers, deed: Deed): void {
  db.transaction(
    (tx) => {
      const { row } = demandOwn(tx, problemId, tryOutId, deed.personId);
      tx.update(tryOuts)
        .set({
          answers: typed.answers,
          activeSeconds: Math.max(row.activeSeconds, typed.activeSeconds),
          savedAt: deed.now,
        })
        .where(eq(tryOuts.id, tryOutId))
        .run();
    },
    { behavior: 'immediate' },
  );
}

function demandOwn(tx: Queryable, problemId: string, tryOutId: string, personId: string): FoundTryOut {
  const found = tryOutsWhere(tx)
    .where(and(eq(tryOuts.id, tryOutId), eq(tryOuts.problemId, problemId), eq(tryOuts.byId, personId)))
    .get();
  if (!found) throw notFound('try-out');
  if (found.row.handedInAt !== null) throw conflict('This try-out was handed in before. Begin another.');
  return found;
}

/**
 * Hands a try-out in, and checks it as a student's answers are checked.
 *
 * @throws RequestError 404 where it is no try-out of the person's; 409 where it was handed in before
 */
export async function handInTryOut(
  { db, keys }: Context,
  problemId: string,
  tryOutId: string,
  typed: TypedAnswers,
  deed: Deed,
): Promise<TryOut> {
  keepTryOut(db, problemId, tryOutId, typed, deed);
  const { row, content } = demandOwn(db, problemId, tryOutId, deed.personId);
  const handedIn = content.parts.map(({ id }) => ({ text: typed.answers[id] ?? '', hasPages: false }));
  const results = await checkProblem(keys, content, row.givens, handedIn);
  return db.transaction(
    (tx) => {
      demandOwn(tx, problemId, tryOutId, deed.personId);
      tx.update(tryOuts)
        .set({ answers: typed.answers, results: [...results], handedInAt: deed.now })
        .where(eq(tryOuts.id, tryOutId))
        .run();
      const made = listTryOuts(tx, problemId).find(({ id }) => id === tryOutId);
      if (!made) throw notFound('try-out');
      return made;
    },
    { behavior: 'immediate' },
  );
}
