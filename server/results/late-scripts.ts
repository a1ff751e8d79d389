import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { scripts, type sets, submissions } from '@drizzle/schema';
import { deductionFor, type Deduction } from '@shared/late-rule';
import { allowancesOf, timesUnder } from '../scripts/own-times';

type ScriptRow = Pick<typeof scripts.$inferSelect, 'id' | 'membershipId'>;

/** What lateness takes off a script of so many marks; null where it was in time. */
export type LatenessOf = (script: ScriptRow, awarded: number, available: number) => Deduction | null;

/** How late the scripts of a set were handed in by their students' own times, by the set's late rule. */
export function lateScripts(tx: Queryable, set: typeof sets.$inferSelect, timeZone: string): LatenessOf {
  const rule = set.lateRule;
  if (rule === null) return () => null;
  const allowances = allowancesOf(tx, set.id);
  const rows = tx
    .select({ scriptId: submissions.scriptId, at: submissions.at })
    .from(submissions)
    .innerJoin(scripts, eq(scripts.id, submissions.scriptId))
    .where(eq(scripts.setId, set.id))
    .orderBy(submissions.number)
    .all();
  const last = new Map(rows.map((row) => [row.scriptId, row.at]));
  return (script, awarded, available) => {
    const allowance = allowances.get(script.membershipId) ?? null;
    const due = timesUnder(set, allowance, 0).dueAt;
    const at = last.get(script.id);
    if (due === null || at === undefined) return null;
    const applied = allowance?.waivesLateRule ? { ...rule, percent: 0 } : rule;
    return deductionFor(applied, { at, due, timeZone }, awarded, available);
  };
}
