import { and, desc, eq, isNotNull, isNull, like } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, letters, piles, scripts, sets, setStages } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';
import { releaseCanBeTakenBack, type ReadinessItem, type Release } from '@shared/results';
import { conflict, stale } from '../http/errors';
import { newId } from '../http/new-id';
import { queueLetter } from '../mail/letters';
import { marksAreGiven, pilesOfSet } from '../marking/find-pile';
import { enter } from '../record/enter';
import { stillOpen } from '../scripts/own-times';
import { fullMomentOf } from '@shared/times';
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

/** What a lead wishes of a release. */
export interface ReleaseWish {
  /** The letter's wording; without it the usual one. */
  readonly text?: string | undefined;
  /** Whether those who still have time are left out, to get their marks with a later release. */
  readonly leaveOutOpen?: boolean | undefined;
}

/** The scripts of a set by what a release now would do to them. */
function sortedScripts(tx: Queryable, { set }: FoundSet, now: number) {
  const open = new Map(stillOpen(tx, set, now).map((row) => [row.membershipId, row.closesAt ?? now]));
  const all = scriptsOf(tx, set.id);
  const before = all.filter(({ script }) => script.releasedAt !== null);
  const rest = all.filter(({ script }) => script.releasedAt === null);
  return {
    before,
    going: rest.filter(({ script }) => !open.has(script.membershipId)),
    // Also students who have no script yet.
    open: { students: open.size, until: Math.max(...open.values()) },
  };
}

/** What a release would do and what is missing, or what it did. */
export function presentRelease(tx: Queryable, setId: string, releaser: Pick<Releaser, 'origin' | 'now'>): Release {
  const found = findSet(tx, setId);
  const { set } = found;
  const { before, going, open } = sortedScripts(tx, found, releaser.now);
  const readiness = readinessOf(tx, found, releaser.now);
  const results = setResults(tx, setId);
  const isOut = isReleased(set.stage);
  const at = isOut ? releasedAt(tx, setId) : null;
  const lastAt = at ?? partlyReleasedAt(tx, setId);
  const codes = new Set(going.map(({ script }) => script.code));
  const items = isOut ? results.items : results.items.filter(({ code }) => codes.has(code));
  const letter = { subject: subjectOf(found), text: usualText(found) };
  return {
    setId,
    courseId: set.courseId,
    number: set.number,
    title: set.title,
    stage: set.stage,
    stages: stagesOf(tx, setId),
    version: set.version,
    students: items.length,
    parts: results.parts.length,
    answers: items.length * results.parts.length,
    readiness,
    ready: marksAreGiven(set.stage) && readiness.every((item) => item.ready),
    stillOpen:
      open.students === 0
        ? null
        : {
            ...open,
            othersReady: going.length > 0 && marksAreGiven(set.stage) && missingIn(readiness, true).length === 0,
          },
    releasedBefore: isOut ? 0 : before.length,
    showKeys: set.showKeys,
    totals: items.map((row) => row.total).sort((one, other) => one - other),
    outOf: results.outOf,
    letter,
    releasedAt: at,
    takeBackUntil:
      lastAt !== null && canBeTakenBack(tx, set, lastAt, releaser.now) ? lastAt + releaseCanBeTakenBack : null,
  };
}

/** What is missing for a release, for all or for all but those who still have time. */
function missingIn(readiness: readonly ReadinessItem[], leavesOutOpen: boolean): ReadinessItem[] {
  return readiness.filter((item) => !item.ready && !(leavesOutOpen && item.name === 'still open'));
}

/**
 * Releases a set: its stage, the record, and a letter to every student that leaves in ten minutes. Where students who still
 * have time are left out, the others' scripts are released one by one and the set stays where it is until the last.
 *
 * @throws RequestError 412 where the set changed, 409 where something is missing
 */
export function releaseSet(
  tx: Queryable,
  setId: string,
  version: number,
  { text, leaveOutOpen = false }: ReleaseWish,
  releaser: Releaser,
): void {
  const found = findSet(tx, setId);
  demandVersion(tx, found, version, releaser);
  if (!marksAreGiven(found.set.stage)) throw conflict('This set is not in marking, so there is nothing to release.');
  const missing = missingIn(readinessOf(tx, found, releaser.now), leaveOutOpen);
  if (missing.length > 0) throw conflict(missing.map((item) => item.sentence).join(' '));

  const { going: students, open } = sortedScripts(tx, found, releaser.now);
  if (open.students === 0) moveTo(tx, found, 'released', releaser);
  else if (students.length === 0) throw conflict('Nobody can be given marks yet: all who have none still have time.');
  else {
    for (const { script } of students)
      tx.update(scripts).set({ releasedAt: releaser.now }).where(eq(scripts.id, script.id)).run();
    touch(tx, found);
  }
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
    sentence: `${releaser.name} released set ${String(found.set.number)} to ${plural(students.length, 'student', 'students')}${open.students === 0 ? '' : `, and left out ${String(open.students)} who still ${open.students === 1 ? 'has' : 'have'} time`}.`,
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
  const isOut = found.set.stage === 'released';
  const at = isOut ? releasedAt(tx, setId) : partlyReleasedAt(tx, setId);
  if (at === null) throw conflict('This set is not released.');
  if (!canBeTakenBack(tx, found.set, at, releaser.now))
    throw conflict('This release can no longer be taken back: ten minutes are over, or its first letter has left.');
  const before = stagesOf(tx, setId)
    .filter((entered) => marksAreGiven(entered.stage))
    .at(-1);
  if (isOut) moveTo(tx, found, before?.stage ?? 'marking', releaser);
  else {
    touch(tx, found);
    tx.update(scripts)
      .set({ releasedAt: null })
      .where(and(eq(scripts.setId, setId), eq(scripts.releasedAt, at)))
      .run();
  }
  tx.update(letters)
    .set({ cancelledAt: releaser.now })
    .where(and(lettersOf(found.set, at), isNull(letters.sentAt)))
    .run();
  enter(tx, {
    ...entryFor(found, releaser, 'release taken back'),
    sentence: `${releaser.name} took the release of set ${String(found.set.number)} back. No letter had left.`,
  });
}

function readinessOf(tx: Queryable, found: FoundSet, now: number): ReadinessItem[] {
  const { set, course } = found;
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
  const { before, going, open } = sortedScripts(tx, found, now);
  const inCourse = new Set((isReleased(set.stage) ? [...before, ...going] : going).map(({ script }) => script.id));
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
        : inCourse.size === 0
          ? 'Nobody handed anything in.'
          : open.students > 0
            ? 'The set is closed to all others.'
            : 'The set is closed to all students.',
      piles: [],
    },
    // Said only where allowances keep it open.
    ...(open.students === 0
      ? []
      : [
          {
            name: 'still open' as const,
            ready: false,
            sentence: `${plural(open.students, 'student still has', 'students still have')} time, ${open.students === 1 ? '' : 'the last '}until ${fullMomentOf(open.until, course.timeZone)}. Wait, or leave ${open.students === 1 ? 'this one' : 'them'} out.`,
            piles: [],
          },
        ]),
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

/** Counts a change of a set that stays in its stage. */
function touch(tx: Queryable, { set }: FoundSet): void {
  tx.update(sets)
    .set({ version: set.version + 1 })
    .where(eq(sets.id, set.id))
    .run();
}

/** When the scripts of a set that is not released as a whole were released last; null where none was. */
function partlyReleasedAt(tx: Queryable, setId: string): number | null {
  const row = tx
    .select({ at: scripts.releasedAt })
    .from(scripts)
    .where(and(eq(scripts.setId, setId), isNotNull(scripts.releasedAt)))
    .orderBy(desc(scripts.releasedAt))
    .get();
  return row?.at ?? null;
}

function canBeTakenBack(
  tx: Queryable,
  set: { id: string; courseId: string; stage: SetStage },
  at: number,
  now: number,
) {
  if (set.stage === 'archived' || now >= at + releaseCanBeTakenBack) return false;
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
