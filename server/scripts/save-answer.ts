import { and, eq } from 'drizzle-orm';
import type { Database } from '@drizzle/client';
import { answerVersions } from '@drizzle/schema';
import type { SavedAnswer } from '@shared/scripts';
import type { SignedIn } from '../access/policy';
import { stale } from '../http/errors';
import { newId } from '../http/new-id';
import { demandOpen, ownAnswer } from './own-answer';
import { latestVersion, type AnswerVersionRow } from './saved-answers';

/** A save as it came. */
export interface Save {
  readonly answerId: string;
  readonly text: string;
  /** The saved version that was typed over; 0 for none. */
  readonly version: number;
  readonly idempotencyKey: string;
  readonly now: number;
}

/**
 * Saves an answer as it is typed: a new version for every real change, none for what is saved already. Once this returns
 * it is on the disk.
 *
 * @throws RequestError 404; 409 after closing, with what was kept; 412 with the saved answer where another window has
 *   saved something else meanwhile
 */
export function saveAnswer(db: Database, person: SignedIn, save: Save): SavedAnswer {
  return db.transaction(
    (tx) => {
      const own = ownAnswer(tx, person, save.answerId);
      const done = tx
        .select()
        .from(answerVersions)
        .where(and(eq(answerVersions.answerId, save.answerId), eq(answerVersions.idempotencyKey, save.idempotencyKey)))
        .get();
      if (done) return present(save.answerId, done);
      demandOpen(tx, own, save.now);

      const latest = latestVersion(tx, save.answerId);
      if ((latest?.text ?? '') === save.text) return present(save.answerId, latest);
      const number = latest?.number ?? 0;
      if (number !== save.version)
        throw stale(
          'This answer was changed in another window. Both texts are kept; choose which one goes on.',
          present(save.answerId, latest),
        );
      const row = {
        id: newId(),
        answerId: save.answerId,
        number: number + 1,
        text: save.text,
        savedAt: save.now,
        idempotencyKey: save.idempotencyKey,
      };
      tx.insert(answerVersions).values(row).run();
      return present(save.answerId, row);
    },
    { behavior: 'immediate' },
  );
}

function present(answerId: string, row: AnswerVersionRow | undefined): SavedAnswer {
  return { answerId, answer: row?.text ?? '', version: row?.number ?? 0, savedAt: row?.savedAt ?? null };
}
