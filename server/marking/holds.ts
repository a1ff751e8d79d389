import { and, eq, gt, inArray, lte } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, holds, marks } from '@drizzle/schema';
import type { SeenHold } from '@shared/live';
import { holdLasts, holdOutlivesConnection, keptReady, type Held } from '@shared/marking';
import { conflict, notAllowed, notFound } from '../http/errors';
import { answersInOrder, type PiledAnswer } from './find-pile';
import { nextSequence, sequenceOf } from './sequence';

/** A bench that takes, renews or gives up holds. */
export interface Bench {
  readonly pileId: string;
  readonly benchId: string;
  readonly membershipId: string;
  /** Whether this person may take what was set aside, or marked by a colleague. */
  readonly seesAllMarks: boolean;
}

/** Which answer a bench wishes to have in hand: this one, the next after one, or the next of a pattern. */
export interface Wish {
  readonly answerId?: string | undefined;
  readonly after?: string | undefined;
  readonly pattern?: string | undefined;
}

/** What changed on a pile, to be told after commit. */
export interface HoldsChange {
  readonly pileId: string;
  readonly sequence: number;
  readonly taken: SeenHold[];
  readonly letGo: string[];
}

/** What a bench holds after an act, and what changed by it; null where nothing did. */
export interface Taking {
  readonly held: Held;
  readonly change: HoldsChange | null;
}

type Hold = typeof holds.$inferSelect;
type Wanted = Pick<Hold, 'answerId' | 'kind'>;

/** The holds on a pile that have not expired. */
export function activeHolds(tx: Queryable, pileId: string, now: number): Hold[] {
  return tx
    .select({ hold: holds })
    .from(holds)
    .innerJoin(answers, eq(answers.id, holds.answerId))
    .where(and(eq(answers.pileId, pileId), gt(holds.expiresAt, now)))
    .all()
    .map((row) => row.hold);
}

/** The hold on an answer, unless it has expired. */
export function activeHold(tx: Queryable, answerId: string, now: number): Hold | undefined {
  return tx
    .select()
    .from(holds)
    .where(and(eq(holds.answerId, answerId), gt(holds.expiresAt, now)))
    .get();
}

/**
 * Takes the wished-for answer in hand, keeps the next two ready, and gives up whatever else the bench held.
 *
 * @throws RequestError 409 where the named answer is held by a colleague, 403 where it is not this person's to mark
 */
export function takeHolds(tx: Queryable, bench: Bench, wish: Wish, now: number): Taking {
  const order = answersInOrder(tx, bench.pileId).answers;
  const before = activeHolds(tx, bench.pileId, now);
  const others = new Map(before.filter((hold) => !isOwn(hold, bench)).map((hold) => [hold.answerId, hold]));
  const isFree = (answer: PiledAnswer) => answer.state === 'waits' && !others.has(answer.id);

  const inHand =
    wish.answerId === undefined
      ? from(order, startOf(order, wish, isFree, others)).find(isFree)
      : takeable(tx, order, wish.answerId, bench, others);
  const reserved = inHand
    ? from(order, order.indexOf(inHand) + 1).filter((each) => each !== inHand && isFree(each))
    : [];
  const wanted: Wanted[] = [
    ...(inHand ? [{ answerId: inHand.id, kind: 'in hand' as const }] : []),
    ...reserved.slice(0, keptReady).map(({ id }) => ({ answerId: id, kind: 'reserved' as const })),
  ];
  return replaceHolds(tx, bench, before, wanted, now);
}

/** A list from an index on, and round to what stands before it. */
function from<Item>(items: readonly Item[], start: number): Item[] {
  return [...items.slice(start), ...items.slice(0, start)];
}

/** Where to look for the next answer: behind one, in a pattern, or in a pattern where no colleague is. */
function startOf(
  order: readonly PiledAnswer[],
  wish: Wish,
  isFree: (answer: PiledAnswer) => boolean,
  others: ReadonlyMap<string, Hold>,
): number {
  const last = wish.after === undefined ? -1 : order.findIndex((answer) => answer.id === wish.after);
  if (last >= 0) return last + 1;
  const patternOf = (answer: PiledAnswer) => answer.pattern;
  const free = order.filter(isFree);
  const wished = free.find((answer) => patternOf(answer) === wish.pattern);
  const busy = new Set(order.filter((answer) => others.has(answer.id)).map(patternOf));
  const quiet = free.find((answer) => !busy.has(patternOf(answer)));
  const start = wished ?? quiet ?? free[0];
  return start ? order.indexOf(start) : 0;
}

function takeable(
  tx: Queryable,
  order: readonly PiledAnswer[],
  answerId: string,
  bench: Bench,
  others: ReadonlyMap<string, Hold>,
): PiledAnswer {
  const answer = order.find((each) => each.id === answerId);
  if (!answer) throw notFound('answer');
  const other = others.get(answerId);
  if (other && other.membershipId !== bench.membershipId)
    throw conflict('A colleague holds this answer now.', { current: { holder: other.membershipId } });
  if (bench.seesAllMarks || answer.state === 'waits') return answer;
  if (answer.state === 'set aside') throw notAllowed('This answer is set aside for the lead.');
  const standing = tx
    .select({ markerId: marks.markerId })
    .from(marks)
    .where(eq(marks.id, answer.standingMarkId ?? ''))
    .get();
  if (standing?.markerId !== bench.membershipId)
    throw notAllowed('This answer has a mark that is not yours; only a lead can change it.');
  return answer;
}

/** Makes the wanted holds the only ones of a bench. Whoever else's hold stood there has expired, or is the same person's. */
function replaceHolds(
  tx: Queryable,
  bench: Bench,
  before: readonly Hold[],
  wanted: readonly Wanted[],
  now: number,
): Taking {
  const own = before.filter((hold) => isOwn(hold, bench));
  const letGo = own
    .filter((hold) => !wanted.some((each) => each.answerId === hold.answerId))
    .map((hold) => hold.answerId);
  const taken = wanted.filter(
    (each) => !own.some((hold) => hold.answerId === each.answerId && hold.kind === each.kind),
  );
  const expiresAt = now + holdLasts;
  tx.delete(holds)
    .where(and(eq(holds.benchId, bench.benchId), eq(holds.membershipId, bench.membershipId)))
    .run();
  if (wanted.length > 0) {
    const ids = wanted.map((each) => each.answerId);
    // Only what has expired, or lies in the same person's other window, can still be in the way.
    tx.delete(holds).where(inArray(holds.answerId, ids)).run();
    const { membershipId, benchId } = bench;
    tx.insert(holds)
      .values(wanted.map((each) => ({ ...each, membershipId, benchId, takenAt: now, expiresAt })))
      .run();
  }
  const changed = taken.length > 0 || letGo.length > 0;
  const sequence = changed ? nextSequence(tx, bench.pileId) : sequenceOf(tx, bench.pileId);
  const seen = taken.map((each) => ({ ...each, holder: bench.membershipId }));
  return {
    held: present(wanted, sequence, expiresAt),
    change: changed ? { pileId: bench.pileId, sequence, taken: seen, letGo } : null,
  };
}

function present(list: readonly Wanted[], sequence: number, expiresAt: number): Held {
  return {
    sequence,
    inHand: list.find((each) => each.kind === 'in hand')?.answerId ?? null,
    reserved: list.filter((each) => each.kind === 'reserved').map((each) => each.answerId),
    expiresAt: list.length > 0 ? expiresAt : null,
  };
}

/** Keeps for another minute what a bench holds. A hold that has just expired and that nobody took comes back to life. */
export function renewHolds(tx: Queryable, bench: Bench, now: number): Held {
  const expiresAt = now + holdLasts;
  const kept = tx.update(holds).set({ expiresAt }).where(ofBench(bench)).returning().all();
  const order = answersInOrder(tx, bench.pileId).answers.map((answer) => answer.id);
  kept.sort((one, other) => order.indexOf(one.answerId) - order.indexOf(other.answerId));
  return present(kept, sequenceOf(tx, bench.pileId), expiresAt);
}

/** What a bench holds now, without a change. */
export function heldNow(tx: Queryable, bench: Bench, now: number): Held {
  const own = activeHolds(tx, bench.pileId, now).filter((hold) => isOwn(hold, bench));
  return present(own, sequenceOf(tx, bench.pileId), Math.min(...own.map((hold) => hold.expiresAt)));
}

/** Gives up all that a bench holds. */
export function letGo(tx: Queryable, bench: Pick<Bench, 'pileId' | 'benchId' | 'membershipId'>): HoldsChange | null {
  const gone = tx.delete(holds).where(ofBench(bench)).returning().all();
  if (gone.length === 0) return null;
  const sequence = nextSequence(tx, bench.pileId);
  return { pileId: bench.pileId, sequence, taken: [], letGo: gone.map((hold) => hold.answerId) };
}

/** After a lost connection: what a bench holds expires soon, unless the bench comes back and renews. */
export function shortenHolds(tx: Queryable, bench: Pick<Bench, 'benchId' | 'membershipId'>, now: number): void {
  const expiresAt = now + holdOutlivesConnection;
  tx.update(holds)
    .set({ expiresAt })
    .where(and(ofBench(bench), gt(holds.expiresAt, expiresAt)))
    .run();
}

/** Removes what has expired, and says of which piles. */
export function dropExpiredHolds(tx: Queryable, now: number): HoldsChange[] {
  const expired = tx.delete(holds).where(lte(holds.expiresAt, now)).returning().all();
  if (expired.length === 0) return [];
  const rows = tx
    .select({ id: answers.id, pileId: answers.pileId })
    .from(answers)
    .where(
      inArray(
        answers.id,
        expired.map((hold) => hold.answerId),
      ),
    )
    .all();
  return [...new Set(rows.map((row) => row.pileId))].map((pileId) => ({
    pileId,
    sequence: nextSequence(tx, pileId),
    taken: [],
    letGo: rows.filter((row) => row.pileId === pileId).map((row) => row.id),
  }));
}

/** Whether a bench and its person hold it: a bench's identifier alone proves nothing. */
function isOwn(hold: Hold, bench: Pick<Bench, 'benchId' | 'membershipId'>): boolean {
  return hold.benchId === bench.benchId && hold.membershipId === bench.membershipId;
}

function ofBench(bench: Pick<Bench, 'benchId' | 'membershipId'>) {
  return and(eq(holds.benchId, bench.benchId), eq(holds.membershipId, bench.membershipId));
}
