import type { Queryable } from '@drizzle/client';
import { piles } from '@drizzle/schema';
import type { Context } from '../context';
import { conflict } from '../http/errors';
import { newId } from '../http/new-id';
import { drawSetVariants, storeVariants } from './draw-set-variants';
import { enterStage, tellStage, type Mover } from './enter-stage';
import { obstaclesTo } from './preview-stage';
import { demandSet, problemsOfSet, studentsOf } from './set-queries';
import { demandCurrent } from './set-rules';

/**
 * Opens a set to its students: problems are frozen, every part gets its pile and every student their variant.
 *
 * @param version the version that was looked at; absent for the clock
 * @throws RequestError 404, 409 with what is in the way, 412; VariantError where a variant cannot be drawn
 */
export async function openSet(context: Context, setId: string, mover: Mover, version?: number): Promise<void> {
  const { db, clock } = context;
  const before = demandSet(db, setId).set;
  // Keys are evaluated before the transaction; a student who joins meanwhile gets their variant with their sheet.
  const drawn = await drawSetVariants(
    context,
    before,
    studentsOf(db, before.courseId).map((student) => student.membershipId),
  );
  db.transaction(
    (tx) => {
      const { set, course } = demandCurrent(tx, setId, version ?? before.version);
      const now = clock.now();
      const [obstacle] = obstaclesTo({ tx, set, course, now }, 'open');
      if (obstacle !== undefined) throw conflict(obstacle);
      enterStage(tx, set, 'open', mover, now, mover.userId === null ? {} : { opensAt: now });
      makePiles(tx, setId);
      storeVariants(tx, drawn);
    },
    { behavior: 'immediate' },
  );
  tellStage(context, before, 'open');
}

function makePiles(tx: Queryable, setId: string): void {
  for (const { setProblem, revision } of problemsOfSet(tx, setId)) {
    for (const part of revision.content.parts)
      tx.insert(piles)
        .values({ id: newId(), setId, setProblemId: setProblem.id, partId: part.id })
        .onConflictDoNothing()
        .run();
  }
}
