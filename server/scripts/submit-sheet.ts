import type { Database } from '@drizzle/client';
import { fullMomentOf } from '@shared/times';
import { conflict } from '../http/errors';
import { demandSet } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';
import { handIn, lastSubmission, type SubmissionRow } from './hand-in';
import { handInAtClosing, nothingSaved } from './hand-in-at-closing';
import { ownTimes } from './own-times';

/**
 * Hands in what a student has saved. Until the set closes it can be handed in again; the last submission counts.
 *
 * @throws RequestError 409 once the set is closed, with what became of the work, and where there is nothing to hand in
 */
export function submitSheet(
  db: Database,
  script: ScriptRow,
  handing: { readonly idempotencyKey: string; readonly now: number },
): SubmissionRow {
  return db.transaction(
    (tx) => {
      const { set, course } = demandSet(tx, script.setId);
      const { isOpen, endsAt } = ownTimes(tx, set, script.membershipId, handing.now);
      if (isOpen) handInAtClosing(tx, set, script, handing.now);
      const last = lastSubmission(tx, script.id);
      if (!isOpen) {
        if (last?.idempotencyKey === handing.idempotencyKey) return last;
        const when = endsAt === null ? '' : ` ${fullMomentOf(endsAt, course.timeZone)}`;
        throw conflict(`This sheet closed${when}. What was saved by then is handed in; the receipt shows it.`);
      }
      if (nothingSaved(tx, script) && !last)
        throw conflict('There is nothing to hand in yet: no part has an answer or a page.');
      return handIn(tx, script, { by: 'student', at: handing.now, idempotencyKey: handing.idempotencyKey });
    },
    { behavior: 'immediate' },
  );
}
