import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { sets, setStages } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';
import type { Context } from '../context';
import { newId } from '../http/new-id';
import { studentsRoom, teamRoom } from '../live/rooms';
import { enter } from '../record/enter';
import type { SetRow } from './set-queries';
import { entryFor } from './set-rules';

/** Who moves a set; `userId` null: the clock. */
export interface Mover {
  readonly userId: string | null;
  readonly name: string;
}

/** The clock as one who moves sets. */
export const theClock: Mover = { userId: null, name: 'The clock' };

/** Writes that a set enters a stage: its row, its history, the record. */
export function enterStage(
  tx: Queryable,
  set: SetRow,
  stage: SetStage,
  mover: Mover,
  now: number,
  more: Partial<Pick<SetRow, 'opensAt' | 'closesAt'>> = {},
): void {
  tx.update(sets)
    .set({ stage, version: set.version + 1, ...more })
    .where(eq(sets.id, set.id))
    .run();
  tx.insert(setStages).values({ id: newId(), setId: set.id, stage, at: now, byId: mover.userId }).run();
  enter(tx, {
    ...entryFor(set, { userId: mover.userId, now }, 'set moved'),
    sentence: `${mover.name} moved set ${String(set.number)} from ${set.stage} to ${stage}.`,
    before: set.stage,
    after: stage,
  });
}

/** Tells the course that a set entered a stage; call it after commit. Of review, marking and moderation only the team is told. */
export function tellStage(context: Context, set: Pick<SetRow, 'id' | 'courseId'>, stage: SetStage): void {
  const { courseId } = set;
  const hidden = ['draft', 'review', 'marking', 'moderation'].includes(stage);
  const rooms = hidden ? [teamRoom(courseId)] : [teamRoom(courseId), studentsRoom(courseId)];
  context.live.emit(rooms, 'stageChanged', { courseId, setId: set.id, stage });
}
