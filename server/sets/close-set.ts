import { and, eq, isNotNull, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, piles, scripts } from '@drizzle/schema';
import type { Context } from '../context';
import { conflict } from '../http/errors';
import { nextSequence } from '../marking/sequence';
import { tellPileChanged } from '../marking/tell-piles';
import { beginScript } from '../scripts/begin-script';
import { checkSubmission } from '../scripts/check-submission';
import { lastSubmission } from '../scripts/hand-in';
import { handInAtClosing } from '../scripts/hand-in-at-closing';
import { drawSetVariants, storeVariants } from './draw-set-variants';
import { enterStage, tellStage, type Mover } from './enter-stage';
import { obstaclesTo } from './preview-stage';
import { demandSet, studentsOf, type SetRow } from './set-queries';
import { demandCurrent } from './set-rules';

/**
 * Closes a set: in one transaction it is closed, and what is saved is handed in for every student whose time is over, also
 * for those who never opened their sheet. Call `checkClosedSet` afterwards; until it is done, the clock takes it up again.
 *
 * @param version the version that was looked at; absent for the clock
 * @throws RequestError 404, 409, 412
 */
export async function closeSet(context: Context, setId: string, mover: Mover, version?: number): Promise<void> {
  const { db, clock } = context;
  const before = demandSet(db, setId).set;
  const drawn = await drawSetVariants(
    context,
    before,
    studentsOf(db, before.courseId).map((student) => student.membershipId),
  );
  db.transaction(
    (tx) => {
      const { set, course } = demandCurrent(tx, setId, version ?? before.version);
      const now = clock.now();
      const [obstacle] = obstaclesTo({ tx, set, course, now }, 'closed');
      if (obstacle !== undefined) throw conflict(obstacle);
      storeVariants(tx, drawn);
      for (const { membershipId } of studentsOf(tx, set.courseId)) beginScript(tx, set, membershipId, now);
      // What the clock closes was closed at its time, however late the server noticed.
      enterStage(tx, set, 'closed', mover, now, { closesAt: Math.min(set.closesAt ?? now, now) });
      handInWhatIsDue(tx, demandSet(tx, setId).set, now);
    },
    { behavior: 'immediate' },
  );
  tellStage(context, before, 'closed');
}

/** Hands in the scripts of a set whose students' closing time is over. @returns how many there were */
function handInWhatIsDue(tx: Queryable, set: SetRow, now: number): number {
  const waiting = tx
    .select()
    .from(scripts)
    .where(and(eq(scripts.setId, set.id), set.lateRule === null ? isNull(scripts.closedAt) : undefined))
    .all();
  for (const script of waiting) handInAtClosing(tx, set, script, now);
  return waiting.length;
}

/**
 * Hands in what is due by students' own closing times, and, where late work is taken, by the closing time of all; call it
 * again and again.
 *
 * @param setId a set that is open or closed
 */
export function handInByTheClock({ db, clock }: Pick<Context, 'db' | 'clock'>, setId: string): void {
  db.transaction((tx) => handInWhatIsDue(tx, demandSet(tx, setId).set, clock.now()), { behavior: 'immediate' });
}

/** How many scripts are checked at once. */
const abreast = 4;

/** Sets that this process is checking just now, so that the clock does not begin them again. */
const underWay = new Set<string>();

/**
 * Checks what was handed in for a closed set, and puts the answers on their piles, script by script. It may be broken off
 * anywhere and called again: what is done stays done.
 *
 * @returns how many scripts entered their piles
 */
export async function checkClosedSet(context: Context, setId: string): Promise<number> {
  if (underWay.has(setId)) return 0;
  underWay.add(setId);
  try {
    const waiting = scriptsToEnter(context, setId);
    const queue = [...waiting];
    const work = async (): Promise<void> => {
      for (let next = queue.pop(); next; next = queue.pop()) {
        await enterScript(context, next.id);
      }
    };
    await Promise.all(Array.from({ length: abreast }, work));
    const entered = waiting.length - scriptsToEnter(context, setId).length;
    if (entered > 0) tellPiles(context, setId);
    return entered;
  } finally {
    underWay.delete(setId);
  }
}

/** Why scripts could not be checked, so that it is logged once and not with every try. */
const reasons = new Map<string, string>();

/** A script that cannot be checked holds up no other. */
async function enterScript(context: Context, scriptId: string): Promise<void> {
  const submission = lastSubmission(context.db, scriptId);
  if (!submission) return;
  try {
    await checkSubmission(context, submission.id);
    reasons.delete(scriptId);
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    if (reasons.get(scriptId) !== reason) context.log.error({ scriptId, reason }, 'a script could not be checked');
    reasons.set(scriptId, reason);
  }
}

/** Scripts whose student's time is over, with an answer that is on no pile yet. */
function scriptsToEnter({ db }: Pick<Context, 'db'>, setId: string) {
  return db
    .selectDistinct({ id: scripts.id })
    .from(scripts)
    .innerJoin(answers, eq(answers.scriptId, scripts.id))
    .where(and(eq(scripts.setId, setId), isNotNull(scripts.closedAt), isNull(answers.state)))
    .all();
}

/** Tells the benches of a set's piles that answers came or went. */
export function tellPiles(context: Context, setId: string): void {
  const { db } = context;
  const changed = db.transaction(
    (tx) =>
      tx
        .select({ id: piles.id })
        .from(piles)
        .where(eq(piles.setId, setId))
        .all()
        .map(({ id }) => ({ id, sequence: nextSequence(tx, id) })),
    { behavior: 'immediate' },
  );
  for (const { id, sequence } of changed) tellPileChanged(context, id, sequence);
}
