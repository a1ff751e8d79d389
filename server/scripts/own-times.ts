import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { allowances, memberships, type sets } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';

export type AllowanceRow = typeof allowances.$inferSelect;

type TimedSet = Pick<typeof sets.$inferSelect, 'id' | 'stage' | 'closesAt' | 'lateRule'>;

/** Stages in which a set is closed to all but those who have an allowance. */
const closedStages: ReadonlySet<SetStage> = new Set(['closed', 'marking', 'moderation']);

/** When a set closes for one student. */
export interface OwnTimes {
  /** The student's closing time; work after it is late. Null: none is set yet. */
  readonly dueAt: number | null;
  /** Nothing is taken from then on. */
  readonly endsAt: number | null;
  readonly allowance: AllowanceRow | null;
  /** Whether the student can work on the set now. */
  readonly isOpen: boolean;
}

/** The allowances that hold in a set, by membership. */
export function allowancesOf(tx: Queryable, setId: string): ReadonlyMap<string, AllowanceRow> {
  const rows = tx
    .select()
    .from(allowances)
    .where(and(eq(allowances.setId, setId), isNull(allowances.withdrawnAt)))
    .all();
  return new Map(rows.map((row) => [row.membershipId, row]));
}

/** When a set closes for one of its students, and whether it is open to them. */
export function ownTimes(tx: Queryable, set: TimedSet, membershipId: string, now: number): OwnTimes {
  return timesUnder(set, allowancesOf(tx, set.id).get(membershipId) ?? null, now);
}

/**
 * When a set closes under an allowance. The times decide by themselves, before the clock has moved the set; once it is
 * closed, only a later time of one's own keeps it open.
 */
export function timesUnder(set: TimedSet, allowance: AllowanceRow | null, now: number): OwnTimes {
  const own = allowance?.closesAt ?? null;
  const dueAt = set.closesAt === null ? null : Math.max(set.closesAt, own ?? set.closesAt);
  const endsAt = dueAt === null ? null : Math.max(dueAt, set.lateRule?.until ?? dueAt);
  const isOpen =
    set.stage === 'open' ? endsAt === null || now < endsAt : closedStages.has(set.stage) && own !== null && now < own;
  return { dueAt, endsAt: set.stage === 'open' ? endsAt : dueAt, allowance, isOpen };
}

/** The allowances by which students of the course can work on a set that is closed to the others. */
export function stillOpen(tx: Queryable, set: TimedSet, now: number): AllowanceRow[] {
  const present = tx
    .select({ id: memberships.id })
    .from(allowances)
    .innerJoin(memberships, eq(memberships.id, allowances.membershipId))
    .where(and(eq(allowances.setId, set.id), eq(memberships.role, 'student'), isNull(memberships.removedAt)))
    .all();
  const students = new Set(present.map(({ id }) => id));
  return [...allowancesOf(tx, set.id).values()].filter(
    (row) => students.has(row.membershipId) && timesUnder(set, row, now).isOpen,
  );
}

/** When a set closes to all who have no allowance: with the last late work, where it takes any. */
export function closesToAllAt(set: Pick<TimedSet, 'closesAt' | 'lateRule'>): number | null {
  return set.closesAt === null ? null : Math.max(set.closesAt, set.lateRule?.until ?? set.closesAt);
}
