import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, courses, memberships, pages, scripts, sets } from '@drizzle/schema';
import { fullMomentOf, secondOf } from '@shared/times';
import { membershipFor, type SignedIn } from '../access/policy';
import { conflict, notFound } from '../http/errors';
import { handInAtClosing } from './hand-in-at-closing';
import { ownTimes } from './own-times';
import { latestVersion, pagesOf } from './saved-answers';

/** An answer with its script, set and course, where it is the person's own. @throws RequestError 404 otherwise */
export function ownAnswer(tx: Queryable, person: SignedIn, answerId: string) {
  const row = tx
    .select({ answer: answers, script: scripts, set: sets, course: courses, userId: memberships.userId })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .innerJoin(memberships, eq(memberships.id, scripts.membershipId))
    .where(eq(answers.id, answerId))
    .get();
  if (row?.userId !== person.id) throw notFound('answer');
  membershipFor(person, 'answer a sheet', row.set.courseId);
  return row;
}

export type OwnAnswer = ReturnType<typeof ownAnswer>;

/** A page with its answer, where it is the person's own. @throws RequestError 404 otherwise */
export function ownPage(tx: Queryable, person: SignedIn, pageId: string) {
  const page = tx.select().from(pages).where(eq(pages.id, pageId)).get();
  if (!page) throw notFound('page');
  return { page, ...ownAnswer(tx, person, page.answerId) };
}

/**
 * Lets a change of an answer through while the sheet is open to its student. Once their closing time is over, what was
 * saved in time is handed in before anything late is saved.
 *
 * @throws RequestError 409 that says when the sheet closed and what of this answer was kept
 */
export function demandOpen(tx: Queryable, { set, course, script, answer }: OwnAnswer, now: number): void {
  const { isOpen, endsAt } = ownTimes(tx, set, script.membershipId, now);
  if (isOpen) {
    handInAtClosing(tx, set, script, now);
    return;
  }
  const zone = course.timeZone;
  const when = endsAt === null ? '' : ` ${fullMomentOf(endsAt, zone)}`;
  const latest = latestVersion(tx, answer.id);
  const pageCount = pagesOf(tx, answer.id).reduce((sum, page) => sum + page.pageCount, 0);
  const kept = [
    ...(latest && latest.text.trim() !== ''
      ? [`“${shortened(latest.text)}”, saved ${secondOf(latest.savedAt, zone)}`]
      : []),
    ...(pageCount > 0 ? [`${String(pageCount)} worked ${pageCount === 1 ? 'page' : 'pages'}`] : []),
  ];
  throw conflict(
    kept.length > 0
      ? `This sheet closed${when}, so nothing more is taken. Kept and handed in for this part: ${kept.join(', and ')}.`
      : `This sheet closed${when}, so nothing more is taken. Nothing had been saved for this part.`,
    { current: { answer: latest?.text ?? '', version: latest?.number ?? 0, savedAt: latest?.savedAt ?? null } },
  );
}

function shortened(text: string): string {
  return text.length > 80 ? `${text.slice(0, 79)}…` : text;
}
