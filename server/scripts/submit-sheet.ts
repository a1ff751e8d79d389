import type { Database } from '@drizzle/client';
import { fullMomentOf } from '@shared/times';
import { conflict } from '../http/errors';
import { demandSet } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';
import { handIn, lastSubmission, type SubmissionRow } from './hand-in';
import { isOpenNow } from './own-answer';
import { contentOf, savedParts } from './saved-answers';

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
      const last = lastSubmission(tx, script.id);
      if (!isOpenNow(set, handing.now)) {
        if (last?.idempotencyKey === handing.idempotencyKey) return last;
        const when = set.closesAt === null ? '' : ` ${fullMomentOf(set.closesAt, course.timeZone)}`;
        throw conflict(`This sheet closed${when}. What was saved by then is handed in; the receipt shows it.`);
      }
      const isEmpty = contentOf(savedParts(tx, script)).every(
        (part) => part.text.trim() === '' && part.pages.length === 0,
      );
      if (isEmpty && !last) throw conflict('There is nothing to hand in yet: no part has an answer or a page.');
      return handIn(tx, script, { by: 'student', at: handing.now, idempotencyKey: handing.idempotencyKey });
    },
    { behavior: 'immediate' },
  );
}
