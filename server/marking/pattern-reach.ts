import { eq, inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, checks, scripts } from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import type { PatternPreview } from '@shared/pattern-marks';
import type { Criterion } from '@shared/problems';
import { handedInFor } from './bench-answer';
import { answersInOrder, findAnswer, type FoundPile } from './find-pile';
import { activeHolds } from './holds';

/** Patterns whose answers have no mistake in common. */
const nothingInCommon: ReadonlySet<string> = new Set(['no relation', 'unreadable', 'not checked']);

const batch = 500;

/** What a mark applied to an answer's pattern reaches, with the check of each answer that it would mark. */
export interface PatternReach extends PatternPreview {
  readonly pattern: string;
  readonly checks: ReadonlyMap<string, CheckResult>;
}

/**
 * Criteria that the check of an answer leaves to a person: all that no verdict decides, and marks of method that are not
 * awarded for this verdict, since a page may show the method all the same.
 */
export function openCriteria(scheme: readonly Criterion[], check: Pick<CheckResult, 'verdict'>): Criterion[] {
  return scheme.filter(({ kind, awardedBy }) => {
    if (awardedBy.length === 0) return true;
    return (kind === 'M' || kind === 'B') && !awardedBy.includes(check.verdict);
  });
}

/**
 * The free, unmarked answers of the pattern of an answer, without itself. Those with worked pages are left to a person
 * where the check leaves a criterion open; without pages there is nothing to be seen that the check has not read.
 *
 * @param membershipId whose own holds are not in the way
 */
export function reachOf(
  tx: Queryable,
  found: FoundPile,
  answerId: string,
  membershipId: string,
  now: number,
): PatternReach {
  const ordered = answersInOrder(tx, found.pile.id);
  const own = ordered.answers.find((each) => each.id === answerId);
  const pattern = ordered.patterns.find((each) => each.key === own?.pattern);
  if (!own || !pattern) {
    findAnswer(tx, answerId);
    throw new Error('An answer of a pile belongs to one of its patterns.');
  }
  const waiting = ordered.answers.filter(
    (each) => each.pattern === pattern.key && each.id !== answerId && each.state === 'waits',
  );
  const othersHold = new Set(
    activeHolds(tx, found.pile.id, now)
      .filter((hold) => hold.membershipId !== membershipId)
      .map((hold) => hold.answerId),
  );
  const rows = readAnswers(
    tx,
    waiting.map((each) => each.id),
  );
  const reach = {
    marks: [] as PatternPreview['marks'],
    needPerson: [] as PatternPreview['needPerson'],
    held: [] as PatternPreview['held'],
  };
  const open = new Set<string>();
  const results = new Map<string, CheckResult>();
  for (const { id, code, version } of waiting) {
    const row = rows.get(id);
    if (!row?.result || row.released) continue;
    const named = { answerId: id, code };
    const left = openCriteria(found.part.criteria, row.result);
    if (othersHold.has(id)) reach.held.push(named);
    else if (left.length > 0 && handedInFor(tx, row.scriptId, found).pageIds.length > 0) {
      reach.needPerson.push(named);
      for (const { name } of left) open.add(name);
    } else {
      reach.marks.push({ ...named, version });
      results.set(id, row.result);
    }
  }
  const refused = nothingInCommon.has(pattern.key)
    ? 'These answers have no mistake in common, so each is marked by itself.'
    : null;
  return {
    pattern: pattern.key,
    name: pattern.name,
    refused,
    ...reach,
    ...(refused === null ? {} : { marks: [] }),
    openCriteria: found.part.criteria.map(({ name }) => name).filter((name) => open.has(name)),
    checks: results,
  };
}

function readAnswers(tx: Queryable, ids: readonly string[]) {
  const found = new Map<string, { scriptId: string; released: boolean; result: CheckResult | null }>();
  for (let start = 0; start < ids.length; start += batch) {
    const rows = tx
      .select({ id: answers.id, scriptId: scripts.id, releasedAt: scripts.releasedAt, result: checks.result })
      .from(answers)
      .innerJoin(scripts, eq(scripts.id, answers.scriptId))
      .leftJoin(checks, eq(checks.id, answers.checkId))
      .where(inArray(answers.id, ids.slice(start, start + batch)))
      .all();
    for (const { id, scriptId, releasedAt, result } of rows)
      found.set(id, { scriptId, released: releasedAt !== null, result });
  }
  return found;
}
