import { and, eq, inArray, isNotNull, isNull } from 'drizzle-orm';
import type { Database, Queryable } from '@drizzle/client';
import { allowances, answers, holds, marks, scripts, users } from '@drizzle/schema';
import { allowanceFields, type Allowance, type AllowanceFields } from '@shared/allowances';
import { fullMomentOf } from '@shared/times';
import type { z } from 'zod';
import { conflict, invalidField, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { queueLetter } from '../mail/letters';
import { marksAreGiven } from '../marking/find-pile';
import { enter } from '../record/enter';
import { scriptOf, type ScriptRow } from '../scripts/begin-script';
import { handInAtClosing } from '../scripts/hand-in-at-closing';
import { allowancesOf, timesUnder, type AllowanceRow } from '../scripts/own-times';
import { demandSet, studentsOf, type CourseRow, type SetRow } from './set-queries';
import type { Deed } from './set-rules';

type Fields = z.output<typeof allowanceFields>;

/** What was done, and whether answers left or may enter the piles of the set. */
export interface AllowanceDeed<Result> {
  readonly result: Result;
  readonly setId: string;
  readonly pilesChanged: boolean;
}

/** The allowances that hold in a set, by name. */
export function listAllowances(tx: Queryable, setId: string, now: number): Allowance[] {
  const { set } = demandSet(tx, setId);
  const held = allowancesOf(tx, setId);
  return studentsOf(tx, set.courseId).flatMap(({ membershipId, name }) => {
    const row = held.get(membershipId);
    return row ? [present(tx, set, row, name, now)] : [];
  });
}

function present(tx: Queryable, set: SetRow, row: AllowanceRow, name: string, now: number): Allowance {
  const { id, membershipId, closesAt, waivesLateRule, reason, byId, createdAt } = row;
  const givenBy = tx.select({ name: users.name }).from(users).where(eq(users.id, byId)).get()?.name ?? '';
  const { isOpen } = timesUnder(set, row, now);
  return { id, membershipId, name, closesAt, waivesLateRule, reason, givenBy, givenAt: createdAt, isOpen };
}

/**
 * Gives a student another closing time, or waives the late rule for them; it takes the place of what they had. Where the
 * set is closed already their script leaves the piles until the new time.
 *
 * @throws RequestError 400 by field; 404; 409 after release, and where a person has marked the script
 */
export function giveAllowance(
  db: Database,
  setId: string,
  sent: AllowanceFields,
  deed: Deed,
): AllowanceDeed<Allowance> {
  return db.transaction(
    (tx) => {
      const { set, course } = demandSet(tx, setId);
      const fields = allowanceFields.parse(sent);
      const student = studentsOf(tx, set.courseId).find((each) => each.membershipId === fields.membershipId);
      if (!student) throw notFound('student');
      const script = scriptOf(tx, setId, fields.membershipId);
      demandUnreleased(set, script);
      demandSense(set, fields, deed.now);
      const before = withdraw(tx, setId, fields.membershipId, deed.now);
      const row: AllowanceRow = {
        id: newId(),
        setId,
        ...fields,
        byId: deed.userId,
        createdAt: deed.now,
        withdrawnAt: null,
      };
      tx.insert(allowances).values(row).run();
      const pilesChanged = fields.closesAt !== null && script !== undefined && takeOffPiles(tx, set, script);
      enter(tx, {
        ...entryFor(set, row.id, deed, 'allowance given'),
        sentence: `${deed.name} gave a student an allowance in set ${String(set.number)}: ${inWords(row, course)}.`,
        before: before && { closesAt: before.closesAt, waivesLateRule: before.waivesLateRule },
        after: { closesAt: row.closesAt, waivesLateRule: row.waivesLateRule },
        reason: row.reason,
      });
      tell(tx, set, course, student.userId, `You have an allowance for it: ${inWords(row, course)}.`, deed);
      return { result: present(tx, set, row, student.name, deed.now), setId, pilesChanged };
    },
    { behavior: 'immediate' },
  );
}

/**
 * Withdraws an allowance. Where the set is closed already the student's time ends now, and what they saved is handed in.
 *
 * @throws RequestError 404; 409 once its time was used, or after release
 */
export function withdrawAllowance(db: Database, allowanceId: string, deed: Deed): AllowanceDeed<null> {
  return db.transaction(
    (tx) => {
      const row = demandAllowance(tx, allowanceId);
      const { set, course } = demandSet(tx, row.setId);
      const student = studentsOf(tx, set.courseId).find((each) => each.membershipId === row.membershipId);
      const script = scriptOf(tx, set.id, row.membershipId);
      demandUnreleased(set, script);
      const isClosed = marksAreGiven(set.stage);
      if (isClosed && row.closesAt !== null && row.closesAt <= deed.now)
        throw conflict('The student has used this time already, so the allowance stays.');
      withdraw(tx, set.id, row.membershipId, deed.now);
      if (isClosed && row.closesAt !== null) {
        // The time until now was granted: what was saved in it is not late.
        const ended = { ...row, id: newId(), closesAt: deed.now, createdAt: deed.now, withdrawnAt: null };
        tx.insert(allowances).values(ended).run();
        if (script) handInAtClosing(tx, set, script, deed.now);
      }
      enter(tx, {
        ...entryFor(set, row.id, deed, 'allowance withdrawn'),
        sentence: `${deed.name} withdrew a student’s allowance in set ${String(set.number)}: ${inWords(row, course)}.`,
        before: { closesAt: row.closesAt, waivesLateRule: row.waivesLateRule },
      });
      if (student)
        tell(tx, set, course, student.userId, `Your allowance for it was withdrawn: ${inWords(row, course)}.`, deed);
      return { result: null, setId: set.id, pilesChanged: isClosed };
    },
    { behavior: 'immediate' },
  );
}

/** An allowance that holds. @throws RequestError 404 */
export function demandAllowance(tx: Queryable, allowanceId: string): AllowanceRow {
  const row = tx
    .select()
    .from(allowances)
    .where(and(eq(allowances.id, allowanceId), isNull(allowances.withdrawnAt)))
    .get();
  if (!row) throw notFound('allowance');
  return row;
}

function demandUnreleased(set: SetRow, script: ScriptRow | undefined): void {
  if (set.stage === 'released' || set.stage === 'archived' || script?.releasedAt != null)
    throw conflict('The marks are released to this student, so their time cannot be changed any more.');
}

function demandSense(set: SetRow, { closesAt, waivesLateRule }: Fields, now: number): void {
  if (waivesLateRule && set.lateRule === null)
    throw invalidField(['waivesLateRule'], 'The set takes no late work, so there is nothing to waive.');
  if (closesAt === null) {
    if (!waivesLateRule) throw invalidField(['closesAt'], 'Give a time.');
    return;
  }
  if (set.closesAt === null) throw invalidField(['closesAt'], 'Give the set its own closing time first.');
  if (closesAt <= set.closesAt) throw invalidField(['closesAt'], 'Choose a time after the set closes for the others.');
  if (closesAt <= now) throw invalidField(['closesAt'], 'This time is over already; choose a later one.');
}

function withdraw(tx: Queryable, setId: string, membershipId: string, now: number): AllowanceRow | null {
  const row = allowancesOf(tx, setId).get(membershipId);
  if (row) tx.update(allowances).set({ withdrawnAt: now }).where(eq(allowances.id, row.id)).run();
  return row ?? null;
}

/** Takes a closed script off its piles, so that its student can go on. @throws RequestError 409 where a person marked it */
function takeOffPiles(tx: Queryable, set: SetRow, script: ScriptRow): boolean {
  tx.update(scripts).set({ closedAt: null }).where(eq(scripts.id, script.id)).run();
  if (!marksAreGiven(set.stage)) return false;
  const own = tx.select().from(answers).where(eq(answers.scriptId, script.id)).all();
  const standing = own.flatMap(({ standingMarkId }) => standingMarkId ?? []);
  const byPersons = tx
    .select({ id: marks.id })
    .from(marks)
    .where(and(inArray(marks.id, ['', ...standing]), isNotNull(marks.markerId)))
    .all().length;
  if (byPersons > 0)
    throw conflict(
      `${byPersons === 1 ? 'One answer' : `${String(byPersons)} answers`} of this student ${byPersons === 1 ? 'has a mark' : 'have marks'} that a person gave. Take ${byPersons === 1 ? 'it' : 'them'} back on the bench first.`,
    );
  const ids = own.map(({ id }) => id);
  tx.delete(holds).where(inArray(holds.answerId, ids)).run();
  for (const { id, version } of own)
    tx.update(answers)
      .set({
        state: null,
        standingMarkId: null,
        setAsideReason: null,
        setAsideById: null,
        anotherLook: null,
        version: version + 1,
      })
      .where(eq(answers.id, id))
      .run();
  return true;
}

function inWords(
  { closesAt, waivesLateRule }: Pick<AllowanceRow, 'closesAt' | 'waivesLateRule'>,
  course: CourseRow,
): string {
  return [
    ...(closesAt === null ? [] : [`it closes ${fullMomentOf(closesAt, course.timeZone)}`]),
    ...(waivesLateRule ? ['nothing is taken off for late work'] : []),
  ].join(', and ');
}

/** A letter to the student; it gives no reason, since others may see a screen. */
function tell(tx: Queryable, set: SetRow, course: CourseRow, userId: string, sentence: string, deed: Deed): void {
  if (set.stage === 'draft' || set.stage === 'review') return;
  const name = `Set ${String(set.number)}, ${set.title}, of ${course.title}`;
  queueLetter(tx, {
    kind: 'allowance',
    userId,
    subject: `Set ${String(set.number)} of ${course.title}: your allowance`,
    text: `This concerns ${name}.\n\n${sentence}`,
    now: deed.now,
  });
}

function entryFor(set: SetRow, allowanceId: string, { userId, now }: Deed, action: string) {
  return { at: now, actorId: userId, courseId: set.courseId, action, thing: 'allowance', thingId: allowanceId };
}
