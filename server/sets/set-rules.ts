import { and, eq, inArray, like, ne, or } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { problems, revisions, setProblems, sets, setStages, users } from '@drizzle/schema';
import { momentOf } from '@shared/times';
import { problemMarks } from '@shared/problems';
import {
  isBeforeOpening,
  type ChosenProblem,
  type SetDetail,
  type SetFields,
  setFields,
  type UsableProblem,
} from '@shared/sets';
import { standingCorrection } from '../corrections/corrected-content';
import { conflict, invalidField, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { demandSet, latestRevisionsOf, nextSetNumber, presentSet, problemsOfSet, type SetRow } from './set-queries';

/** Who does it, and when. */
export interface Deed {
  readonly userId: string;
  readonly name: string;
  readonly now: number;
}

/** A set's settings, and its problems where they are to be changed. */
export type EditedSet = SetFields & { readonly problems?: readonly ChosenProblem[] | undefined };

/**
 * Begins a set as a draft, with the next number of its course.
 *
 * @param seed every variant of the set is drawn from it; a random one where there is none
 * @throws RequestError 400 by field
 */
export function createSet(
  db: Database,
  courseId: string,
  edited: EditedSet,
  deed: Deed,
  seed: string = newId(),
): SetDetail {
  return db.transaction(
    (tx) => {
      const fields = setFields.parse(edited);
      demandTimes(fields);
      const id = newId();
      const number = nextSetNumber(tx, courseId);
      tx.insert(sets)
        .values({ id, courseId, number, ...fields, seed, createdAt: deed.now })
        .run();
      tx.insert(setStages).values({ id: newId(), setId: id, stage: 'draft', at: deed.now, byId: deed.userId }).run();
      if (edited.problems) putProblems(tx, id, edited.problems, deed.userId);
      enter(tx, {
        ...entryFor({ id, courseId }, deed, 'set begun'),
        sentence: `${deed.name} began set ${String(number)}, “${fields.title}”.`,
      });
      return presentSet(tx, id);
    },
    { behavior: 'immediate' },
  );
}

/**
 * Changes a set. Once it is open, problems, variants and the opening time are frozen; the closing time can be moved while it
 * is open, and whether keys are shown until it is released.
 *
 * @throws RequestError 400 by field, 404, 409 for what is frozen, 412 with the current state
 */
export function changeSet(db: Database, setId: string, version: number, edited: EditedSet, deed: Deed): SetDetail {
  return db.transaction(
    (tx) => {
      const { set, course } = demandCurrent(tx, setId, version);
      const fields = setFields.parse(edited);
      demandTimes(fields);
      demandChangeable(set, fields, deed.now);
      if (edited.problems) {
        if (isBeforeOpening(set.stage)) putProblems(tx, setId, edited.problems, deed.userId);
        else if (!isSameChoice(tx, setId, edited.problems))
          throw conflict('The set has been open to students, so its problems and their order are frozen.');
      }
      tx.update(sets)
        .set({ ...fields, version: version + 1 })
        .where(eq(sets.id, setId))
        .run();
      enter(tx, {
        ...entryFor(set, deed, 'set changed'),
        sentence: sentenceOf(set, fields, deed, course.timeZone),
        before: settingsOf(set),
        after: fields,
      });
      return presentSet(tx, setId);
    },
    { behavior: 'immediate' },
  );
}

/** @throws RequestError 404, 412 with the current state */
export function demandCurrent(tx: Queryable, setId: string, version: number) {
  const found = demandSet(tx, setId);
  if (found.set.version !== version)
    throw stale(
      'Somebody changed this set in another place meanwhile. What you entered is kept; choose which of the two goes on.',
      presentSet(tx, setId),
    );
  return found;
}

function demandTimes({ opensAt, closesAt, lateRule }: ReturnType<typeof setFields.parse>): void {
  if (opensAt !== null && closesAt !== null && closesAt <= opensAt)
    throw invalidField(['closesAt'], 'The set must close after it opens.');
  if (lateRule === null) return;
  if (closesAt === null) throw invalidField(['closesAt'], 'Late work needs a closing time that it comes after.');
  if (lateRule.until <= closesAt)
    throw invalidField(['lateRule', 'until'], 'The last date for late work must come after the closing time.');
}

function demandChangeable(set: SetRow, fields: ReturnType<typeof setFields.parse>, now: number): void {
  if (isBeforeOpening(set.stage)) return;
  if (fields.opensAt !== set.opensAt)
    throw invalidField(['opensAt'], 'The set has opened already; its opening time stays.');
  if (fields.individualVariants !== set.individualVariants)
    throw invalidField(['individualVariants'], 'Students have their numbers already; this stays as it is.');
  if (fields.closesAt !== set.closesAt) {
    if (set.stage !== 'open') throw invalidField(['closesAt'], 'The set is closed; its closing time stays.');
    if (fields.closesAt === null) throw invalidField(['closesAt'], 'An open set needs a closing time.');
    if (fields.closesAt <= now)
      throw invalidField(['closesAt'], 'Choose a time to come, or close the set by hand on its page.');
  }
  if (!isSameRule(fields.lateRule, set.lateRule) && set.stage !== 'open')
    throw invalidField(['lateRule'], 'The set is closed; what becomes of late work stays as it is.');
  if (fields.lateRule === null && set.lateRule !== null && fields.closesAt !== null && fields.closesAt <= now)
    throw invalidField(['lateRule'], 'Late work is being taken already. Close the set by hand to end that.');
  if (fields.showKeys !== set.showKeys && (set.stage === 'released' || set.stage === 'archived'))
    throw invalidField(['showKeys'], 'The set is released; what students see of the keys stays as it is.');
}

function isSameRule(one: SetRow['lateRule'], other: SetRow['lateRule']): boolean {
  if (one === null || other === null) return one === other;
  return one.percent === other.percent && one.of === other.of && one.per === other.per && one.until === other.until;
}

function isSameChoice(tx: Queryable, setId: string, chosen: readonly ChosenProblem[]): boolean {
  const own = problemsOfSet(tx, setId).map(({ setProblem }) => `${setProblem.problemId} ${setProblem.revisionId}`);
  return own.join() === chosen.map((each) => `${each.problemId} ${each.revisionId}`).join();
}

/** Puts exactly these problems in the set, in this order; a problem that stays keeps its row. */
function putProblems(tx: Queryable, setId: string, chosen: readonly ChosenProblem[], userId: string): void {
  const before = problemsOfSet(tx, setId);
  const usable = new Map(
    tx
      .select({ revision: revisions, status: problems.status, authorId: problems.authorId })
      .from(revisions)
      .innerJoin(problems, eq(problems.id, revisions.problemId))
      .where(inArray(revisions.id, ['', ...chosen.map((each) => each.revisionId)]))
      .all()
      .map((row) => [row.revision.id, row]),
  );
  for (const [index, each] of chosen.entries()) {
    const found = usable.get(each.revisionId);
    if (found?.revision.problemId !== each.problemId)
      throw invalidField(['problems', index], 'There is no such revision of this problem.');
    const wasThere = before.some(({ setProblem }) => setProblem.problemId === each.problemId);
    if (!wasThere && found.status !== 'ready' && found.authorId !== userId)
      throw invalidField(['problems', index], 'This problem is not ready yet, and it is not yours.');
    if (chosen.findIndex((other) => other.problemId === each.problemId) !== index)
      throw invalidField(['problems', index], 'A problem can be in a set once.');
  }
  for (const { setProblem } of before) {
    if (!chosen.some((each) => each.problemId === setProblem.problemId))
      tx.delete(setProblems).where(eq(setProblems.id, setProblem.id)).run();
  }
  for (const [index, { problemId, revisionId }] of chosen.entries()) {
    const row = before.find(({ setProblem }) => setProblem.problemId === problemId)?.setProblem;
    const correctionId = standingCorrection(tx, revisionId)?.id ?? null;
    const place = { position: index + 1, revisionId, correctionId };
    if (row) tx.update(setProblems).set(place).where(eq(setProblems.id, row.id)).run();
    else
      tx.insert(setProblems)
        .values({ id: newId(), setId, problemId, ...place })
        .run();
  }
}

/** Problems that a lead may put in a set of a course. */
export function listUsableProblems(tx: Queryable, courseId: string, userId: string, search: string): UsableProblem[] {
  const rows = tx
    .select({ problem: problems, author: users.name })
    .from(problems)
    .innerJoin(users, eq(users.id, problems.authorId))
    .where(
      and(
        ne(problems.status, 'retired'),
        or(eq(problems.status, 'ready'), eq(problems.authorId, userId)),
        search === '' ? undefined : or(like(problems.draft, `%${search}%`), like(users.name, `%${search}%`)),
      ),
    )
    .all();
  const ids = rows.map((row) => row.problem.id);
  const latest = latestRevisionsOf(tx, ids);
  const uses = tx
    .select({ problemId: setProblems.problemId, number: sets.number })
    .from(setProblems)
    .innerJoin(sets, eq(sets.id, setProblems.setId))
    .where(eq(sets.courseId, courseId))
    .all();
  return rows
    .flatMap(({ problem, author }): UsableProblem[] => {
      const revision = latest.get(problem.id);
      if (!revision) return [];
      const { content } = revision;
      return [
        {
          problemId: problem.id,
          revisionId: revision.id,
          revision: revision.number,
          title: content.title,
          status: problem.status,
          author,
          tags: content.tags,
          parts: content.parts.length,
          marks: problemMarks(content),
          usedIn: uses.filter((use) => use.problemId === problem.id).map((use) => `Set ${String(use.number)}`),
        },
      ];
    })
    .sort((one, other) => one.title.localeCompare(other.title));
}

function settingsOf(set: SetRow) {
  const { title, coverText, opensAt, closesAt, individualVariants, showKeys, lateRule } = set;
  return { title, coverText, opensAt, closesAt, individualVariants, showKeys, lateRule };
}

function sentenceOf(set: SetRow, fields: ReturnType<typeof setFields.parse>, deed: Deed, timeZone: string): string {
  const name = `set ${String(set.number)}`;
  const moment = (at: number | null) => (at === null ? 'no time' : momentOf(at, timeZone));
  const moved = [
    ...(fields.opensAt === set.opensAt ? [] : [`opens at ${moment(fields.opensAt)}, before ${moment(set.opensAt)}`]),
    ...(fields.closesAt === set.closesAt
      ? []
      : [`closes at ${moment(fields.closesAt)}, before ${moment(set.closesAt)}`]),
  ];
  return moved.length > 0 ? `${deed.name} changed ${name}: it ${moved.join('; ')}.` : `${deed.name} changed ${name}.`;
}

/** The parts of a record entry that all deeds to a set share. */
export function entryFor(
  set: Pick<SetRow, 'id' | 'courseId'>,
  deed: Pick<Deed, 'now'> & { userId: string | null },
  action: string,
) {
  return { at: deed.now, actorId: deed.userId, courseId: set.courseId, action, thing: 'set', thingId: set.id };
}
