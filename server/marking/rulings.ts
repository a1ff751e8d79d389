import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, rulingAnswers, rulings, scripts } from '@drizzle/schema';
import type { Ruling, RulingOutcome } from '@shared/rulings';
import { conflict, invalidField, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { marksAreGiven, type FoundPile } from './find-pile';
import { nextSequence, sequenceOf } from './sequence';

/** Who asks or decides, in which pile, and when. */
export interface RulingDoer {
  readonly userId: string;
  readonly membershipId: string;
  readonly found: FoundPile;
  readonly now: number;
}

/** What became of a ruling, and what of it is to be told after commit; null where nothing changed. */
export interface RulingDeed {
  readonly outcome: RulingOutcome;
  readonly event: 'rulingAsked' | 'rulingDecided' | null;
}

type Row = typeof rulings.$inferSelect;

/** The rulings of a pile's part, in the order in which they were asked. Answers are named by their scripts' codes. */
export function rulingsOf(tx: Queryable, pileId: string): Ruling[] {
  return present(tx, tx.select().from(rulings).where(eq(rulings.pileId, pileId)).orderBy(asc(rulings.askedAt)).all());
}

/** A ruling's row. @throws RequestError 404 */
export function findRuling(tx: Queryable, rulingId: string): Row {
  const row = tx.select().from(rulings).where(eq(rulings.id, rulingId)).get();
  if (!row) throw notFound('ruling');
  return row;
}

/**
 * Asks for a ruling. The same key twice is the same question.
 *
 * @throws RequestError 400 where the answer is not on the pile, 409 where marks are not given now
 */
export function askRuling(
  tx: Queryable,
  doer: RulingDoer,
  asked: { readonly question: string; readonly answerId: string; readonly idempotencyKey: string },
): RulingDeed {
  const { pile } = doer.found;
  const before = tx
    .select()
    .from(rulings)
    .where(
      and(
        eq(rulings.pileId, pile.id),
        eq(rulings.askedById, doer.membershipId),
        eq(rulings.idempotencyKey, asked.idempotencyKey),
      ),
    )
    .get();
  if (before) return { outcome: outcomeOf(tx, before.id, sequenceOf(tx, pile.id)), event: null };
  demandOpen(doer);
  const code = codeOnPile(tx, pile.id, asked.answerId);
  const id = newId();
  const { question, idempotencyKey } = asked;
  tx.insert(rulings)
    .values({ id, pileId: pile.id, question, askedById: doer.membershipId, askedAt: doer.now, idempotencyKey })
    .run();
  addAnswer(tx, doer, id, asked.answerId);
  enter(tx, {
    ...entryFor(doer, id, 'ruling asked'),
    sentence: `A ruling on ${nameOf(doer)} was asked for, about answer ${code}.`,
    after: { question, answer: code },
  });
  return { outcome: outcomeOf(tx, id, nextSequence(tx, pile.id)), event: 'rulingAsked' };
}

/**
 * Names one more answer that waits on an open ruling.
 *
 * @throws RequestError 400 where the answer is not on the pile, 409 where the ruling is decided
 */
export function waitOnRuling(tx: Queryable, doer: RulingDoer, row: Row, answerId: string): RulingDeed {
  const { pile } = doer.found;
  demandOpen(doer);
  const code = codeOnPile(tx, pile.id, answerId);
  demandUndecided(tx, row);
  if (outcomeOf(tx, row.id, 0).ruling.answers.some((each) => each.answerId === answerId))
    return { outcome: outcomeOf(tx, row.id, sequenceOf(tx, pile.id)), event: null };
  addAnswer(tx, doer, row.id, answerId);
  enter(tx, {
    ...entryFor(doer, row.id, 'answer waits on ruling'),
    sentence: `Answer ${code} waits on a ruling on ${nameOf(doer)} too.`,
    after: { answer: code },
  });
  return { outcome: outcomeOf(tx, row.id, nextSequence(tx, pile.id)), event: 'rulingAsked' };
}

/** Decides a ruling. @throws RequestError 409 with the decision that holds, or where marks are not given now */
export function decideRuling(tx: Queryable, doer: RulingDoer, row: Row, decision: string): RulingDeed {
  demandOpen(doer);
  demandUndecided(tx, row);
  tx.update(rulings)
    .set({ decision, decidedById: doer.membershipId, decidedAt: doer.now })
    .where(eq(rulings.id, row.id))
    .run();
  const sequence = nextSequence(tx, doer.found.pile.id);
  const outcome = outcomeOf(tx, row.id, sequence);
  enter(tx, {
    ...entryFor(doer, row.id, 'ruling decided'),
    sentence: `A ruling on ${nameOf(doer)} was decided.`,
    before: { question: row.question },
    after: { decision, answers: outcome.ruling.answers.map(({ code }) => code) },
  });
  return { outcome, event: 'rulingDecided' };
}

function demandOpen({ found }: RulingDoer): void {
  if (!marksAreGiven(found.set.stage))
    throw conflict('Rulings are asked for and decided while a pile is being marked.');
}

function demandUndecided(tx: Queryable, row: Row): void {
  if (row.decidedAt === null) return;
  throw conflict('This ruling is decided already. Ask again where it leaves something open.', {
    current: present(tx, [row])[0],
  });
}

function codeOnPile(tx: Queryable, pileId: string, answerId: string): string {
  const row = tx
    .select({ code: scripts.code, state: answers.state })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(answers.id, answerId), eq(answers.pileId, pileId)))
    .get();
  if (!row?.state) throw invalidField(['answerId'], 'Name an answer of this pile.');
  return row.code;
}

function addAnswer(tx: Queryable, doer: RulingDoer, rulingId: string, answerId: string): void {
  tx.insert(rulingAnswers).values({ id: newId(), rulingId, answerId, byId: doer.membershipId, at: doer.now }).run();
}

function outcomeOf(tx: Queryable, rulingId: string, sequence: number): RulingOutcome {
  const [ruling] = present(tx, [findRuling(tx, rulingId)]);
  if (!ruling) throw notFound('ruling');
  return { ruling, sequence };
}

function present(tx: Queryable, rows: readonly Row[]): Ruling[] {
  if (rows.length === 0) return [];
  const named = tx
    .select({
      rulingId: rulingAnswers.rulingId,
      answerId: rulingAnswers.answerId,
      byId: rulingAnswers.byId,
      code: scripts.code,
    })
    .from(rulingAnswers)
    .innerJoin(answers, eq(answers.id, rulingAnswers.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(
      inArray(
        rulingAnswers.rulingId,
        rows.map((row) => row.id),
      ),
    )
    .orderBy(asc(rulingAnswers.at))
    .all();
  return rows.map(({ id, question, askedById, askedAt, decision, decidedById, decidedAt }) => ({
    id,
    question,
    askedById,
    askedAt,
    decision,
    decidedById,
    decidedAt,
    answers: named.filter((each) => each.rulingId === id).map(({ answerId, code, byId }) => ({ answerId, code, byId })),
  }));
}

function entryFor(doer: RulingDoer, rulingId: string, action: string) {
  return {
    at: doer.now,
    actorId: doer.userId,
    courseId: doer.found.set.courseId,
    action,
    thing: 'ruling',
    thingId: rulingId,
  };
}

/** "set 4, 2 (b)". */
function nameOf({ found: { set, setProblem, partLabel } }: RulingDoer): string {
  return `set ${String(set.number)}, ${String(setProblem.position)} (${partLabel})`;
}
