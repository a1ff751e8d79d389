import { and, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { correctionChanges, corrections } from '@drizzle/schema';
import type { CorrectionStep } from '@shared/corrections';
import { partLabel } from '@shared/problems';
import type { FoundPile } from '../marking/find-pile';
import { amendedInWords } from './amended-answer';
import type { CorrectionRow } from './judge-scripts';
import { amendedPart } from './present-correction';

/**
 * What a student reads about corrections of a part: those that were made after they handed in, the oldest first, each with
 * the lead's words and what it did to their marks.
 *
 * @param handedInAt when they handed in last; null for never
 */
export function correctionsFor(
  tx: Queryable,
  found: Pick<FoundPile, 'setProblem' | 'part'>,
  answerId: string,
  handedInAt: number | null,
): { readonly at: number; readonly sentence: string }[] {
  return correctionsHolding(tx, found.setProblem.correctionId).flatMap((row) => {
    if (row.madeAt === null || handedInAt === null || row.madeAt < handedInAt) return [];
    const change = tx
      .select()
      .from(correctionChanges)
      .where(and(eq(correctionChanges.correctionId, row.id), eq(correctionChanges.answerId, answerId)))
      .get();
    const isOwn = row.partId === found.part.id;
    if (!isOwn && !change) return [];
    const { index, before, after } = amendedPart(tx, row);
    const where = isOwn ? 'this part' : `part (${partLabel(index)})`;
    const what = `${amendedInWords(before, after)} of ${where} was corrected after you handed in.`;
    return [{ at: row.madeAt, sentence: `${what} ${endedBySign(row.note)} ${marksInWords(change)}` }];
  });
}

/** The corrections that hold in a set, from the first to the last. */
function correctionsHolding(tx: Queryable, correctionId: string | null): readonly CorrectionRow[] {
  const rows: CorrectionRow[] = [];
  for (let id = correctionId; id !== null;) {
    const row = tx.select().from(corrections).where(eq(corrections.id, id)).get();
    if (!row) break;
    rows.unshift(row);
    id = row.basedOnId;
  }
  return rows;
}

function endedBySign(note: string): string {
  return /[.!?…]$/.test(note) ? note : `${note}.`;
}

function marksInWords(
  change: { readonly before: CorrectionStep; readonly after: CorrectionStep; readonly deed: string } | undefined,
): string {
  const [before, after] = [change?.before.total ?? null, change?.after.total ?? null];
  if (change?.deed === 'returned to the pile') return 'Your answer was looked at again by a person.';
  if (change?.deed === 'another look') return 'Your marks were given by a person, who was asked to look again.';
  if (before === null || after === null || before === after) return 'Your marks for it did not change.';
  return `Your marks for it went from ${String(before)} to ${String(after)}.`;
}
