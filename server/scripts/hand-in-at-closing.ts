import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { scripts } from '@drizzle/schema';
import type { AnswerDigest } from '@shared/checks';
import type { SetRow } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';
import { handIn, lastSubmission } from './hand-in';
import { ownTimes } from './own-times';
import { contentOf, savedParts } from './saved-answers';

/**
 * Hands in what is saved of a script once its student's closing time is over, and remembers it, so that what is saved
 * later is never taken for work that was in time. Where late work is taken, what was saved late and not submitted is handed
 * in at the end only if there is nothing else: nobody loses marks for lateness that they did not choose.
 */
export function handInAtClosing(tx: Queryable, set: SetRow, script: ScriptRow, now: number): void {
  const { dueAt, isOpen } = ownTimes(tx, set, script.membershipId, now);
  if (dueAt === null || now < dueAt) return;
  if (script.closedAt === null) {
    handIn(tx, script, { by: 'closing', at: dueAt, idempotencyKey: `closing ${set.id} ${String(dueAt)}` });
    tx.update(scripts).set({ closedAt: dueAt }).where(eq(scripts.id, script.id)).run();
  }
  if (set.lateRule === null || isOpen) return;
  const last = lastSubmission(tx, script.id);
  if (!last || !isEmpty(last.content)) return;
  const at = Math.min(now, Math.max(dueAt, set.lateRule.until));
  handIn(tx, script, { by: 'closing', at, idempotencyKey: `late closing ${set.id} ${String(dueAt)}` });
}

/** Whether nothing was answered and no page added. */
export function isEmpty(content: readonly AnswerDigest[]): boolean {
  return content.every((part) => part.text.trim() === '' && part.pages.length === 0);
}

/** Whether nothing is saved of a script. */
export function nothingSaved(tx: Queryable, script: ScriptRow): boolean {
  return isEmpty(contentOf(savedParts(tx, script)));
}
