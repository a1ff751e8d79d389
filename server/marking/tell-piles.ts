import type { Queryable } from '@drizzle/client';
import type { Presence } from '@shared/live';
import type { Context } from '../context';
import { pileMarksRoom, pileRoom } from '../live/rooms';
import type { Deed } from './bench-deeds';
import { findPile, teamOf } from './find-pile';
import { activeHolds, type HoldsChange } from './holds';

const roomsOf = (pileId: string) => [pileRoom(pileId), pileMarksRoom(pileId)];

/** Tells a pile's benches what changed in its holds, and with it who is at what. */
export function tellHolds(context: Context, change: HoldsChange | null): void {
  if (!change) return;
  context.live.emit(roomsOf(change.pileId), 'holdsChanged', change);
  tellPresence(context, change.pileId);
}

/** Tells a pile's benches of a deed. The total goes to those only who may see every mark. */
export function tellDeed(context: Context, pileId: string, deed: Deed): void {
  const { event, sequence, markerId, total, holds } = deed.told;
  const { id: answerId, version } = deed.outcome.answer;
  const fact = { pileId, sequence, answerId, version };
  if (event === 'answerMarked') {
    // What the check decides is every marker's to see.
    context.live.emit([pileRoom(pileId)], event, { ...fact, markerId, total: markerId === null ? total : null });
    context.live.emit([pileMarksRoom(pileId)], event, { ...fact, markerId, total });
  } else if (event === 'answerSetAside') {
    context.live.emit(roomsOf(pileId), event, { ...fact, byId: deed.told.byId });
  } else if (event === 'answerReturned') {
    context.live.emit(roomsOf(pileId), event, fact);
  }
  tellHolds(context, holds);
}

/** Tells a pile's benches that answers arrived or were checked anew; call it after commit, with the pile's new number. */
export function tellPileChanged(context: Context, pileId: string, sequence: number): void {
  context.live.emit(roomsOf(pileId), 'pileChanged', { pileId, sequence });
}

/** Tells a pile's benches who is there. */
export function tellPresence(context: Context, pileId: string): void {
  const { courseId } = findPile(context.db, pileId).set;
  const present = presentOn(context, context.db, courseId, pileId);
  context.live.emit(roomsOf(pileId), 'presenceChanged', { pileId, present });
}

/** Who is on a pile: all with an open bench, and all who hold something, with what they have in hand. */
export function presentOn(context: Context, tx: Queryable, courseId: string, pileId: string): Presence[] {
  const inHand = new Map(
    activeHolds(tx, pileId, context.clock.now())
      .filter((hold) => hold.kind === 'in hand')
      .map((hold) => [hold.membershipId, hold.answerId]),
  );
  const open = new Set(context.live.benchesOf(pileId).map((bench) => bench.membershipId));
  return teamOf(tx, courseId)
    .filter(({ membershipId }) => open.has(membershipId) || inHand.has(membershipId))
    .map((colleague) => ({ ...colleague, answerId: inHand.get(colleague.membershipId) ?? null }));
}
