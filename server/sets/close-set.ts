import { and, eq, isNull } from 'drizzle-orm';
import { answers, piles, scripts } from '@drizzle/schema';
import type { Context } from '../context';
import { conflict } from '../http/errors';
import { nextSequence } from '../marking/sequence';
import { tellPileChanged } from '../marking/tell-piles';
import { beginScript } from '../scripts/begin-script';
import { checkSubmission } from '../scripts/check-submission';
import { handIn, lastSubmission } from '../scripts/hand-in';
import { drawSetVariants, storeVariants } from './draw-set-variants';
import { enterStage, tellStage, type Mover } from './enter-stage';
import { obstaclesTo } from './preview-stage';
import { demandSet, studentsOf } from './set-queries';
import { demandCurrent } from './set-rules';

/**
 * Closes a set: in one transaction it is closed, and what is saved is handed in for every student, also for those who
 * never opened their sheet. Call `checkClosedSet` afterwards; until it is done, the clock takes it up again.
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
      const closedAt = mover.userId === null ? (set.closesAt ?? now) : now;
      enterStage(tx, set, 'closed', mover, now, { closesAt: closedAt });
      for (const script of tx.select().from(scripts).where(eq(scripts.setId, setId)).all())
        handIn(tx, script, { by: 'closing', at: closedAt, idempotencyKey: `closing ${setId}` });
    },
    { behavior: 'immediate' },
  );
  tellStage(context, before, 'closed');
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

/** Scripts with an answer that is on no pile yet. */
function scriptsToEnter({ db }: Pick<Context, 'db'>, setId: string) {
  return db
    .selectDistinct({ id: scripts.id })
    .from(scripts)
    .innerJoin(answers, eq(answers.scriptId, scripts.id))
    .where(and(eq(scripts.setId, setId), isNull(answers.state)))
    .all();
}

function tellPiles(context: Context, setId: string): void {
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
