import type { CheckResult } from '@shared/checks';
import type { Pattern } from '@shared/marking';
import { groupChecks, noRelation } from '../checks';

/** What patterns and strips need of an answer's check. */
export interface Seen {
  /** Null: not checked. */
  readonly check: Pick<CheckResult, 'verdict' | 'slip' | 'relation' | 'possible'> | null;
  /** Answer ÷ key, where both are numbers. */
  readonly ratio: number | null;
}

/** Patterns that have their own place in the strip; the larger the rank, the further right. */
const fixedRanks: Readonly<Record<string, number>> = {
  right: 0,
  'unit missing': 1,
  'follow-through': 2,
  'no relation': 4,
  unreadable: 5,
  unanswered: 6,
  'not checked': 7,
};

/** Where the groups that go wrong in a nameable way stand: after what is right, before what has no relation. */
const namedRank = 3;

/** What is kept in mind of a check. */
export function seenIn(check: CheckResult | null): Seen {
  if (!check) return { check: null, ratio: null };
  const { verdict, slip, relation, possible } = check;
  return { check: { verdict, slip, relation, possible }, ratio: ratioOf(check) };
}

/** Answer ÷ key of one check; null unless both are numbers and the key is not zero. */
export function ratioOf(check: Pick<CheckResult, 'value' | 'key'>): number | null {
  const key = check.key?.value;
  if (typeof check.value !== 'number' || typeof key !== 'number' || key === 0) return null;
  const ratio = check.value / key;
  return Number.isFinite(ratio) ? ratio : null;
}

/** An answer with its check and its code. */
interface Placed {
  readonly id: string;
  readonly code: string;
  readonly seen: Seen;
}

/**
 * Puts answers in pattern order: right, follow-through, then the groups that go wrong in the same way, the largest first,
 * then those without a relation. Within a group the order is that of the codes, which are random. Which relation a wrong
 * answer is counted to is decided by the evidence of all.
 *
 * @returns the answers in order, each with its pattern's key, and the patterns with how many belong to each
 */
export function inPatternOrder<Answer extends Placed>(
  answers: readonly Answer[],
): { readonly answers: readonly (Answer & { readonly pattern: string })[]; readonly patterns: readonly Pattern[] } {
  const byId = new Map(answers.map((answer) => [answer.id, answer]));
  const checked = answers.flatMap(({ id, seen }) => (seen.check ? [{ id, check: withRelation(seen.check) }] : []));
  const weighed = (id: string) => byId.get(id)?.seen.check?.possible !== undefined;
  const groups = groupChecks(checked).map((group) => ({
    pattern: presentPattern(group, group.ids.every(weighed)),
    ids: group.ids,
  }));
  const unchecked = answers.filter(({ seen }) => seen.check === null).map(({ id }) => id);
  if (unchecked.length > 0) groups.push({ pattern: named('not checked', unchecked.length), ids: unchecked });
  groups.sort(
    (one, other) =>
      rankOf(one.pattern) - rankOf(other.pattern) ||
      other.pattern.total - one.pattern.total ||
      compareTexts(one.pattern.name, other.pattern.name),
  );
  return {
    answers: groups.flatMap(({ pattern, ids }) =>
      ids
        .flatMap((id) => {
          const answer = byId.get(id);
          return answer ? [{ ...answer, pattern: pattern.key }] : [];
        })
        .sort((one, other) => compareTexts(one.code, other.code)),
    ),
    patterns: groups.map(({ pattern }) => pattern),
  };
}

/** A check that knows of one relation only counts as standing in that. */
function withRelation(check: NonNullable<Seen['check']>): NonNullable<Seen['check']> {
  if (check.possible !== undefined || check.relation.name === noRelation.name) return check;
  return { ...check, possible: [{ ...check.relation, chance: toldByItself }] };
}

const toldByItself = 1e-9;

/** A group as a pattern of the strip, with its evidence where every answer's relations were weighed. */
function presentPattern(group: ReturnType<typeof groupChecks>[number], weighed: boolean): Pattern {
  const total = group.ids.length;
  switch (group.kind) {
    case 'right':
    case 'follow-through':
    case 'unreadable':
    case 'unanswered':
      return named(group.kind, total);
    case 'unit':
      return named('unit missing', total);
    case 'none':
      return named('no relation', total);
    case 'slip':
    case 'relation': {
      const name = group.name.replace(/^slip: /, '');
      const { evidence } = group;
      return { key: `relation ${name}`, name, total, ...(evidence === undefined || !weighed ? {} : { evidence }) };
    }
  }
}

function named(name: string, total: number): Pattern {
  return { key: name, name, total };
}

function rankOf(pattern: Pattern): number {
  return fixedRanks[pattern.key] ?? namedRank;
}

/** By code unit: the same on every machine, whatever its language. */
function compareTexts(one: string, other: string): number {
  return one < other ? -1 : one > other ? 1 : 0;
}
