import type { SetStage } from '@shared/primitives';
import type { Context } from '../context';
import { conflict } from '../http/errors';
import { closeSet } from './close-set';
import { enterStage, tellStage, type Mover } from './enter-stage';
import { openSet } from './open-set';
import { obstaclesTo } from './preview-stage';
import { demandSet } from './set-queries';
import { demandCurrent } from './set-rules';

/**
 * Moves a set to another stage. After closing, call `checkClosedSet`.
 *
 * @param version the version that was looked at
 * @throws RequestError 404, 409 with what is in the way, 412 with the current state
 */
export async function moveStage(
  context: Context,
  setId: string,
  stage: SetStage,
  mover: Mover,
  version: number,
): Promise<void> {
  if (stage === 'open') return openSet(context, setId, mover, version);
  if (stage === 'closed') return closeSet(context, setId, mover, version);
  context.db.transaction(
    (tx) => {
      const { set, course } = demandCurrent(tx, setId, version);
      const now = context.clock.now();
      const [obstacle] = obstaclesTo({ tx, set, course, now }, stage);
      if (obstacle !== undefined) throw conflict(obstacle);
      enterStage(tx, set, stage, mover, now);
    },
    { behavior: 'immediate' },
  );
  tellStage(context, demandSet(context.db, setId).set, stage);
}
