import type { Context } from '../context';
import { conflict } from '../http/errors';
import { drawSetVariants, storeVariants } from '../sets/draw-set-variants';
import { demandSet } from '../sets/set-queries';
import { beginScript, scriptOf, type ScriptRow } from './begin-script';
import { ownTimes } from './own-times';

/**
 * The script behind a student's sheet, begun when they first open it. Who was added to the course after the set had opened
 * gets their variant now.
 *
 * @throws RequestError 404; 409 where the set closed before they ever opened their sheet and before they were in the course
 */
export async function openSheet(context: Context, setId: string, membershipId: string): Promise<ScriptRow> {
  const { db, clock } = context;
  const there = scriptOf(db, setId, membershipId);
  if (there) return there;
  const { set } = demandSet(db, setId);
  const refuse = () =>
    conflict('This set had closed before you opened a sheet of it. Your lead can tell you what to do.');
  if (!ownTimes(db, set, membershipId, clock.now()).isOpen) throw refuse();
  const drawn = await drawSetVariants(context, set, [membershipId]);
  return db.transaction(
    (tx) => {
      if (!ownTimes(tx, demandSet(tx, setId).set, membershipId, clock.now()).isOpen) throw refuse();
      storeVariants(tx, drawn);
      return beginScript(tx, set, membershipId, clock.now());
    },
    { behavior: 'immediate' },
  );
}
