import type { CheckResult } from '@shared/checks';
import type { Pattern } from '@shared/marking';
import { noRelation } from '../checks/relation';

/** What a strip needs of an answer's check. */
export interface Seen {
  readonly pattern: { readonly key: string; readonly name: string };
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

/** The pattern that an answer belongs to, and its ratio to the key. An answer without a check has its own group. */
export function seenIn(check: CheckResult | null): Seen {
  return { pattern: patternOf(check), ratio: check ? ratioOf(check) : null };
}

function patternOf(check: CheckResult | null): Seen['pattern'] {
  if (!check) return named('not checked');
  switch (check.verdict) {
    case 'right':
    case 'follow-through':
    case 'unreadable':
    case 'unanswered':
      return named(check.verdict);
    case 'unit':
      return named('unit missing');
    case 'slip':
    case 'wrong': {
      const name = check.relation.name.replace(/^slip: /, '');
      // A wrong answer may still be called by a name that is taken, such as an answer of another unit.
      return name && name !== noRelation.name && fixedRanks[name] === undefined
        ? { key: `relation ${name}`, name }
        : named('no relation');
    }
  }
}

function named(name: string): Seen['pattern'] {
  return { key: name, name };
}

/** Answer ÷ key of one check; null unless both are numbers and the key is not zero. */
export function ratioOf(check: Pick<CheckResult, 'value' | 'key'>): number | null {
  const key = check.key?.value;
  if (typeof check.value !== 'number' || typeof key !== 'number' || key === 0) return null;
  const ratio = check.value / key;
  return Number.isFinite(ratio) ? ratio : null;
}

/** An answer with its pattern and its code. */
interface Placed {
  readonly code: string;
  readonly seen: Seen;
}

/**
 * Puts answers in pattern order: right, follow-through, then the groups that go wrong in the same way, the largest first,
 * then those without a relation. Within a group the order is that of the codes, which are random.
 *
 * @returns the answers in order, and the patterns with how many belong to each
 */
export function inPatternOrder<Answer extends Placed>(
  answers: readonly Answer[],
): { readonly answers: readonly Answer[]; readonly patterns: readonly Pattern[] } {
  const groups = new Map<string, { pattern: Pattern; answers: Answer[] }>();
  for (const answer of answers) {
    const { key, name } = answer.seen.pattern;
    const group = groups.get(key) ?? { pattern: { key, name, total: 0 }, answers: [] };
    group.answers.push(answer);
    groups.set(key, group);
  }
  const ordered = [...groups.values()]
    .map((group) => ({ ...group, pattern: { ...group.pattern, total: group.answers.length } }))
    .sort(
      (one, other) =>
        rankOf(one.pattern) - rankOf(other.pattern) ||
        other.pattern.total - one.pattern.total ||
        compareTexts(one.pattern.name, other.pattern.name),
    );
  return {
    answers: ordered.flatMap((group) => group.answers.sort((one, other) => compareTexts(one.code, other.code))),
    patterns: ordered.map((group) => group.pattern),
  };
}

function rankOf(pattern: Pattern): number {
  return fixedRanks[pattern.key] ?? namedRank;
}

/** By code unit: the same on every machine, whatever its language. */
function compareTexts(one: string, other: string): number {
  return one < other ? -1 : one > other ? 1 : 0;
}
