import { and, eq, inArray, isNotNull, isNull, lte } from 'drizzle-orm';
import { answers, scripts, sets } from '@drizzle/schema';
import type { Context } from '../context';
import { closesToAllAt } from '../scripts/own-times';
import { checkClosedSet, closeSet, handInByTheClock } from './close-set';
import { theClock } from './enter-stage';
import { openSet } from './open-set';

/**
 * What is due by the clock: sets open and close at their times, also for students with times of their own, and checks of closed sets that were broken off go on. Call it
 * once at start and every few seconds; it does nothing twice.
 *
 * @returns how many sets it opened, closed, and went on checking
 */
export async function runClockStages(
  context: Context,
): Promise<{ readonly opened: number; readonly closed: number; readonly checked: number }> {
  const { db, clock } = context;
  const due = (stage: 'ready' | 'open', column: typeof sets.opensAt | typeof sets.closesAt) =>
    db
      .select()
      .from(sets)
      .where(and(eq(sets.stage, stage), lte(column, clock.now())))
      .all();

  let opened = 0;
  for (const { id } of due('ready', sets.opensAt)) opened += await attempt(context, id, openSet);
  let closed = 0;
  for (const set of due('open', sets.closesAt)) {
    if ((closesToAllAt(set) ?? 0) <= clock.now()) closed += await attempt(context, set.id, closeSet);
    else handInByTheClock(context, set.id);
  }
  for (const { id } of withScriptsOut(context)) handInByTheClock(context, id);

  const unchecked = db
    .selectDistinct({ id: sets.id })
    .from(sets)
    .innerJoin(scripts, eq(scripts.setId, sets.id))
    .innerJoin(answers, eq(answers.scriptId, scripts.id))
    .where(
      and(inArray(sets.stage, ['closed', 'marking', 'moderation']), isNotNull(scripts.closedAt), isNull(answers.state)),
    )
    .all();
  let checked = 0;
  for (const { id } of unchecked) checked += (await checkClosedSet(context, id)) > 0 ? 1 : 0;
  return { opened, closed, checked };
}

/** Closed sets with scripts that are not handed in, since their students had more time. */
function withScriptsOut({ db }: Context) {
  return db
    .selectDistinct({ id: sets.id })
    .from(sets)
    .innerJoin(scripts, eq(scripts.setId, sets.id))
    .where(and(inArray(sets.stage, ['closed', 'marking', 'moderation']), isNull(scripts.closedAt)))
    .all();
}

/** Why sets could not be moved, so that it is logged once and not with every beat. */
const reasons = new Map<string, string>();

/** A set that cannot be moved holds up no other; its page says what is in the way. */
async function attempt(
  context: Context,
  setId: string,
  move: (context: Context, setId: string, mover: typeof theClock) => Promise<void>,
): Promise<0 | 1> {
  try {
    await move(context, setId, theClock);
    reasons.delete(setId);
    return 1;
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    if (reasons.get(setId) !== reason) context.log.warn({ setId, reason }, 'a set could not be moved at its time');
    reasons.set(setId, reason);
    return 0;
  }
}
