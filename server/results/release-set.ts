import { and, eq, isNotNull, isNull, like } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, letters, piles, sets, setStages } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';
import { releaseCanBeTakenBack, type ReadinessItem, type Release } from '@shared/results';
import { conflict, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { queueLetter } from '../mail/letters';
import { marksAreGiven, pilesOfSet } from '../marking/find-pile';
import { enter } from '../record/enter';
import { findSet, isReleased, releasedAt, scriptsOf, stagesOf } from './find-set';
import { setResults } from './set-results';

/** Who releases, where from, and when. */
export interface Releaser {
  readonly userId: string;
  readonly name: string;
  /** The address that people use, for the links in letters. */
  readonly origin: string;
  readonly now: number;
}

type FoundSet = ReturnType<typeof findSet>;

/** What a release would do and what is missing, or what it did. */
export function presentRelease(tx: Queryable, setId: string, releaser: Pick<Releaser, 'origin' | 'now'>): Release {
  const found = findSet(tx, setId);
  const { set } = found;
  const readiness = readinessOf(tx, found);
  const results = setResults(tx, setId);
  const at = isReleased(set.stage) ? releasedAt(tx, setId) : null;
  const letter = { subject: subjectOf(found), text: usualText(found) };
  return {
    setId,
    courseId: set.courseId,
    number: set.number,
    title: set.title,
    stage: set.stage,
    stages: stagesOf(tx, setId),
    version: set.version,
    students: results.total,
    parts: results.parts.length,
    answers: results.total * results.parts.length,
    readiness,
    ready: marksAreGiven(set.stage) && readiness.every((item) => item.ready),
    showKeys: set.showKeys,
    totals: results.items.map((row) => row.total).sort((one, other) => one - other),
    outOf: results.outOf,
    letter,
    releasedAt: at,
    takeBackUntil: at !== null && canBeTakenBack(tx, set, at, releaser.now) ? at + releaseCanBeTakenBack : null,
  };
}

/**
 * Releases a set: its stage, the record, and a letter to every student that leaves in ten minutes.
 *
 * @param text the letter's wording; without it the usual one
 * @throws RequestError 412 where the set changed, 409 where something is missing
 */
export function releaseSet(
  tx: Queryable,
  setId: string,
  version: number,
  text: string | undefined,
  releaser: Releaser,
): void {
  const found = findSet(tx, setId);
  demandVersion(tx, found, version, releaser);
  if (!marksAreGiven(found.set.stage)) throw conflict('This set is not in marking, so there is nothing to release.');
  const missing = readinessOf(tx, found).filter((item) => !item.ready);
  if (missing.length > 0) throw conflict(missing.map((item) => item.sentence).join(' '));

  moveTo(tx, found, 'released', releaser);
  const students = scriptsOf(tx, setId);
  for (const student of students) {
    queueLetter(tx, {
      kind: 'released',
      userId: student.userId,
      subject: subjectOf(found),
      text: `${text ?? usualText(found)}\n\n${addressOf(found, releaser.origin)}`,
      now: releaser.now,
      dueAt: releaser.now + releaseCanBeTakenBack,
    });
  }
  enter(tx, {
    ...entryFor(found, releaser, 'set released'),
    sentence: `${releaser.name} released set ${String(found.set.number)} to ${String(students.length)} students.`,
  });
}

/**
 * Takes a release back: the set returns to the stage before, and its letters are cancelled.
 *
 * @throws RequestError 409 once the first letter has left or ten minutes are over, 412 where the set changed
 */
export function takeBackRelease(tx: Queryable, setId: string, version: number, releaser: Releaser): void {
  const found = findSet(tx, setId);
  demandVersion(tx, found, version, releaser);
  const at = releasedAt(tx, setId);
  if (found.set.stage !== 'released' || at === null) throw conflict('This set is not released.');
  if (!canBeTakenBack(tx, found.set, at, releaser.now))
    throw conflict('This release can no longer be taken back: ten minutes are over, or its first letter has left.');
  const before = stagesOf(tx, setId)
    .filter((entered) => marksAreGiven(entered.stage))
    .at(-1);
  moveTo(tx, found, before?.stage ?? 'marking', releaser);
  tx.update(letters)
    .set({ cancelledAt: releaser.now })
    .where(and(lettersOf(found.set, at), isNull(letters.sentAt)))
    .run();
  enter(tx, {
    ...entryFor(found, releaser, 'release taken back'),
    sentence: `${releaser.name} took the release of set ${String(found.set.number)} back. No letter had left.`,
  });
}

function readinessOf(tx: Queryable, { set }: FoundSet): ReadinessItem[] {
  const rows = tx
    .select({
      pileId: answers.pileId,
      scriptId: answers.scriptId,
      state: answers.state,
      anotherLook: answers.anotherLook,
    })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .where(eq(piles.setId, set.id))
    .all();
  const inCourse = new Set(scriptsOf(tx, set.id).map(({ script }) => script.id));
  const theirs = rows.filter((row) => inCourse.has(row.scriptId));
  const columns = pilesOfSet(tx, set.id);
  const expected = inCourse.size * columns.length;
  const inPiles = (isMissing: (row: (typeof theirs)[number]) => boolean) =>
    columns
      .map(({ pile, setProblem, partLabel }) => ({
        id: pile.id,
        name: `${String(setProblem.position)} (${partLabel})`,
        missing: theirs.filter((row) => row.pileId === pile.id && isMissing(row)).length,
      }))
      .filter((pile) => pile.missing > 0);
  const waiting = inPiles(({ state }) => state === 'waits');
  const aside = inPiles(({ state }) => state === 'set aside');
  const again = inPiles(({ anotherLook }) => anotherLook !== null);
  const againCount = countIn(again);
  const waitingCount = countIn(waiting);
  const asideCount = countIn(aside);
  const notHandedIn = new Set(theirs.filter((row) => row.state === null).map((row) => row.scriptId));
  const closed = marksAreGiven(set.stage) || isReleased(set.stage);
  const scriptCount = `${String(inCourse.size)} ${inCourse.size === 1 ? 'script' : 'scripts'}`;
  return [
    {
      name: 'closed',
      ready: closed && inCourse.size > 0,
      sentence: !closed
        ? 'The set is still open to students.'
        : inCourse.size > 0
          ? 'The set is closed to all students.'
          : 'Nobody handed anything in.',
      piles: [],
    },
    {
      name: 'handed in',
      ready: notHandedIn.size === 0,
      sentence:
        notHandedIn.size === 0
          ? `All ${scriptCount} are handed in.`
          : `${plural(notHandedIn.size, 'script is', 'scripts are')} not handed in yet.`,
      piles: [],
    },
    {
      name: 'marked',
      ready: waitingCount === 0,
      sentence:
        waitingCount === 0
          ? `All ${plural(expected, 'answer has', 'answers have')} marks: ${scriptCount}, ${plural(columns.length, 'part', 'parts')}.`
          : `${plural(waitingCount, 'answer waits', 'answers wait')} for a mark.`,
      piles: waiting,
    },
    {
      name: 'set aside',
      ready: asideCount === 0,
      sentence:
        asideCount === 0
          ? 'No answer is set aside.'
          : `${plural(asideCount, 'answer is', 'answers are')} set aside and to be looked at.`,
      piles: aside,
    },
    // Said only after a correction.
    ...(againCount === 0
      ? []
      : [
          {
            name: 'another look' as const,
            ready: false,
            sentence: `${plural(againCount, 'mark that a person gave waits', 'marks that persons gave wait')} for another look after a correction. Mark the answer again, or say on the correction’s page that the mark stands.`,
            piles: again,
          },
        ]),
  ];
}

function countIn(missing: readonly { readonly missing: number }[]): number {
  return missing.reduce((sum, pile) => sum + pile.missing, 0);
}

function plural(n: number, one: string, many: string): string {
  return `${String(n)} ${n === 1 ? one : many}`;
}

function demandVersion(tx: Queryable, { set }: FoundSet, version: number, releaser: Releaser): void {
  if (set.version !== version)
    throw stale('Somebody else changed the set while you looked at it.', presentRelease(tx, set.id, releaser));
}

function moveTo(tx: Queryable, { set }: FoundSet, stage: SetStage, { userId, now }: Releaser): void {
  tx.update(sets)
    .set({ stage, version: set.version + 1 })
    .where(eq(sets.id, set.id))
    .run();
  tx.insert(setStages).values({ id: newId(), setId: set.id, stage, at: now, byId: userId }).run();
}

function canBeTakenBack(
  tx: Queryable,
  set: { id: string; courseId: string; stage: SetStage },
  at: number,
  now: number,
) {
  if (set.stage !== 'released' || now >= at + releaseCanBeTakenBack) return false;
  const left = tx
    .select({ id: letters.id })
    .from(letters)
    .where(and(lettersOf(set, at), isNotNull(letters.sentAt)))
    .get();
  return left === undefined;
}

/** The letters of one release: each carries the address of its set's feedback. */
function lettersOf(set: { id: string; courseId: string }, at: number) {
  return and(
    eq(letters.kind, 'released'),
    eq(letters.createdAt, at),
    like(letters.text, `%/courses/${set.courseId}/feedback/${set.id}`),
  );
}

function addressOf({ set }: FoundSet, origin: string): string {
  return `${origin}/courses/${set.courseId}/feedback/${set.id}`;
}

function subjectOf({ set, course }: FoundSet): string {
  return `Set ${String(set.number)} of ${course.title}: marks and feedback`;
}

function usualText({ set, course }: FoundSet): string {
  return `Your marks and feedback for Set ${String(set.number)} of ${course.title} are ready. Each lost mark is explained beside your own work.`;
}

function entryFor({ set }: FoundSet, { userId, now }: Releaser, action: string) {
  return { at: now, actorId: userId, courseId: set.courseId, action, thing: 'set', thingId: set.id };
}
