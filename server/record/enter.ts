import type { Queryable } from '@drizzle/client';
import { record } from '@drizzle/schema';
import { newId } from '../http/new-id';

/** One entry of the record. */
export interface Entry {
  readonly at: number;
  /** Null: the server itself. */
  readonly actorId: string | null;
  readonly courseId?: string;
  /** A past-tense fact, for example `mark changed`. */
  readonly action: string;
  readonly thing: string;
  readonly thingId: string;
  readonly sentence: string;
  readonly before?: unknown;
  readonly after?: unknown;
  readonly reason?: string;
}

/** Enters a fact in the record, in the transaction of what it tells of. */
export function enter(tx: Queryable, entry: Entry): void {
  tx.insert(record)
    .values({ id: newId(), ...entry })
    .run();
}
