import { and, asc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { allowances, answers, answerVersions, memberships, pages, scripts, sets, submissions } from '@drizzle/schema';
import type { OwnScript } from '@shared/own-data';
import { pilesOfSet } from '../marking/find-pile';
import { presentOwnQueries } from '../queries/ask-query';
import { receiptOf } from '../receipts/receipt-of';
import { presentFeedback } from '../results/feedback';
import { isReleasedTo } from '../results/find-set';

/** The scripts of a person with their sets, whether or not they are still in the course. */
export function scriptsOfPerson(tx: Queryable, userId: string) {
  return tx
    .select({ script: scripts, set: sets })
    .from(scripts)
    .innerJoin(memberships, eq(memberships.id, scripts.membershipId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .where(eq(memberships.userId, userId))
    .orderBy(asc(scripts.createdAt))
    .all();
}

export type PersonsScript = ReturnType<typeof scriptsOfPerson>[number];

/** What a script holds of its student's, with marks, feedback and queries once they are released. */
export function presentOwnScript(tx: Queryable, { script, set }: PersonsScript, now: number): OwnScript {
  const released = isReleasedTo(set, script);
  const whose = { setId: set.id, membershipId: script.membershipId, now };
  return {
    courseId: set.courseId,
    setId: set.id,
    setNumber: set.number,
    setTitle: set.title,
    code: script.code,
    begunAt: script.createdAt,
    answers: ownAnswers(tx, script.id, set.id),
    submissions: tx
      .select()
      .from(submissions)
      .where(eq(submissions.scriptId, script.id))
      .orderBy(asc(submissions.number))
      .all()
      .map((row) => ({ number: row.number, at: row.at, by: row.by, receipt: receiptOf(script, row) })),
    allowances: tx
      .select({
        closesAt: allowances.closesAt,
        waivesLateRule: allowances.waivesLateRule,
        givenAt: allowances.createdAt,
        withdrawnAt: allowances.withdrawnAt,
      })
      .from(allowances)
      .where(and(eq(allowances.setId, set.id), eq(allowances.membershipId, script.membershipId)))
      .all(),
    feedback: released ? presentFeedback(tx, set.id, script.membershipId, now) : null,
    queries: released ? presentOwnQueries(tx, whose).items : [],
  };
}

function ownAnswers(tx: Queryable, scriptId: string, setId: string): OwnScript['answers'] {
  const rows = tx
    .select({ id: answers.id, pileId: answers.pileId })
    .from(answers)
    .where(eq(answers.scriptId, scriptId))
    .all();
  return pilesOfSet(tx, setId).flatMap(({ pile, setProblem, partLabel }) => {
    const answer = rows.find(({ pileId }) => pileId === pile.id);
    if (!answer) return [];
    return [
      {
        part: `${String(setProblem.position)} (${partLabel})`,
        versions: tx
          .select({ number: answerVersions.number, text: answerVersions.text, savedAt: answerVersions.savedAt })
          .from(answerVersions)
          .where(eq(answerVersions.answerId, answer.id))
          .orderBy(asc(answerVersions.number))
          .all(),
        pages: tx
          .select({
            id: pages.id,
            mediaType: pages.mediaType,
            bytes: pages.bytes,
            pageCount: pages.pageCount,
            sha256: pages.sha256,
            addedAt: pages.addedAt,
            removedAt: pages.removedAt,
          })
          .from(pages)
          .where(eq(pages.answerId, answer.id))
          .orderBy(asc(pages.addedAt))
          .all(),
      },
    ];
  });
}
