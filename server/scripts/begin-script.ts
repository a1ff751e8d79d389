import { and, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, piles, scripts, type sets } from '@drizzle/schema';
import { newId } from '../http/new-id';
import { drawScriptCode } from './script-code';

export type ScriptRow = typeof scripts.$inferSelect;

/** The script of a student in a set, or undefined where their sheet was never opened. */
export function scriptOf(tx: Queryable, setId: string, membershipId: string): ScriptRow | undefined {
  return tx
    .select()
    .from(scripts)
    .where(and(eq(scripts.setId, setId), eq(scripts.membershipId, membershipId)))
    .get();
}

/** The script of a student in an open set, begun where there is none: a code, and an empty answer for each part. */
export function beginScript(
  tx: Queryable,
  set: Pick<typeof sets.$inferSelect, 'id'>,
  membershipId: string,
  now: number,
): ScriptRow {
  const there = scriptOf(tx, set.id, membershipId);
  if (there) return there;
  const taken = new Set(
    tx
      .select({ code: scripts.code })
      .from(scripts)
      .where(eq(scripts.setId, set.id))
      .all()
      .map((row) => row.code),
  );
  const script = {
    id: newId(),
    setId: set.id,
    membershipId,
    code: drawScriptCode(taken),
    createdAt: now,
    closedAt: null,
    releasedAt: null,
  };
  tx.insert(scripts).values(script).run();
  for (const { id } of tx.select({ id: piles.id }).from(piles).where(eq(piles.setId, set.id)).all())
    tx.insert(answers).values({ id: newId(), scriptId: script.id, pileId: id }).run();
  return script;
}
