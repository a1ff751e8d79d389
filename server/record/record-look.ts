import { and, desc, eq, gt } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { record, type scripts, type sets } from '@drizzle/schema';
import { enter } from './enter';

/** What a look at a script is called in the record. */
export const scriptLookedAt = 'script looked at';

/** Looks by one person at one script within this time are one entry, in milliseconds. */
const oneLook = 60 * 60_000;

/** Enters that somebody of the team looked at a script whose marks are out. */
export function recordLook(
  tx: Queryable,
  {
    set,
    script,
  }: {
    readonly set: Pick<typeof sets.$inferSelect, 'courseId' | 'number'>;
    readonly script: Pick<typeof scripts.$inferSelect, 'id' | 'code'>;
  },
  person: { readonly id: string; readonly name: string },
  now: number,
): void {
  const recent = tx
    .select({ id: record.id })
    .from(record)
    .where(
      and(
        eq(record.thing, 'script'),
        eq(record.thingId, script.id),
        eq(record.action, scriptLookedAt),
        eq(record.actorId, person.id),
        gt(record.at, now - oneLook),
      ),
    )
    .orderBy(desc(record.at))
    .get();
  if (recent) return;
  enter(tx, {
    at: now,
    actorId: person.id,
    courseId: set.courseId,
    action: scriptLookedAt,
    thing: 'script',
    thingId: script.id,
    sentence: `${person.name} looked at script ${script.code} of set ${String(set.number)} after its release.`,
  });
}
