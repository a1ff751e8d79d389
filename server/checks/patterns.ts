import type { Check } from './check';
import { checkAnswer, type CheckInput } from './check-answer';
import { groupStrength, strengthInWords } from './evidence';
import type { PossibleRelation } from './possible-relations';
import { noRelation, relationWeight, type Relation } from './relation';

/** An answer of a part, with the key of its own variant. */
export interface PatternAnswer {
  readonly id: string;
  readonly input: CheckInput;
}

/** What of an answer's check patterns are told by. */
export type PatternCheck = Pick<Check, 'verdict'> & {
  readonly slip?: number | undefined;
  readonly relation: { readonly name: string };
  readonly possible?:
    readonly (Pick<PossibleRelation, 'name' | 'chance'> & { readonly factor?: number | undefined })[] | undefined;
};

/** Answers that stand in the same relation to their own keys. */
export interface Pattern {
  readonly kind: 'right' | 'unit' | 'follow-through' | 'slip' | 'relation' | 'none' | 'unreadable' | 'unanswered';
  readonly name: string;
  readonly factor?: number;
  /** Index of the slip, for a slip. */
  readonly slip?: number;
  readonly ids: readonly string[];
  /** −log₁₀ of a bound on the probability that the group is chance; only for relations. */
  readonly strength?: number;
  readonly evidence?: ReturnType<typeof strengthInWords>;
}

interface Wrong {
  readonly id: string;
  readonly possible: readonly Possible[];
}

interface Possible {
  readonly relation: Relation;
  readonly chance: number;
}

/** How unlikely a group must be, and how unlikely a relation of a single answer, to be named. */
const namedStrength = 2;
const mostChanceAlone = 0.02;

const verdictNames: Readonly<Record<string, string>> = {
  right: 'right',
  unit: 'right but for the unit',
  'follow-through': 'right from the own earlier answer',
  unreadable: 'unreadable',
  unanswered: 'unanswered',
};

/** Answers by relation: the relation with the strongest evidence takes its answers first, then the next. */
function groupWrong(wrong: readonly Wrong[]): {
  readonly groups: readonly Pattern[];
  readonly rest: readonly string[];
} {
  const open = new Map(wrong.map((each) => [each.id, each]));
  const groups: Pattern[] = [];
  const refused = new Set<string>();
  for (;;) {
    const members = new Map<string, { relation: Relation; ids: string[]; chances: number[] }>();
    for (const { id, possible } of open.values()) {
      for (const { relation, chance } of possible) {
        if (refused.has(relation.name)) continue;
        const group = members.get(relation.name) ?? { relation, ids: [], chances: [] };
        group.ids.push(id);
        group.chances.push(chance);
        members.set(relation.name, group);
      }
    }
    const ranked = [...members.values()].map((group) => ({
      ...group,
      strength: groupStrength(group.chances, wrong.length, relationWeight(group.relation.name)),
    }));
    const best = ranked.reduce<(typeof ranked)[number] | undefined>(
      (top, group) => (!top || group.strength > top.strength ? group : top),
      undefined,
    );
    if (!best) break;
    const strong = new Set(
      ranked.filter(({ strength }) => strength >= namedStrength).map(({ relation }) => relation.name),
    );
    const kept = best.ids.filter((id, index) => {
      const chance = best.chances[index] ?? 1;
      if (best.strength < namedStrength) return chance <= mostChanceAlone * relationWeight(best.relation.name);
      // An answer that lies much nearer to another relation with a group of its own waits for that.
      const rivals = open.get(id)?.possible ?? [];
      return !rivals.some(
        ({ relation, chance: other }) => strong.has(relation.name) && !refused.has(relation.name) && 5 * other < chance,
      );
    });
    if (kept.length === 0) {
      refused.add(best.relation.name);
      continue;
    }
    for (const id of kept) open.delete(id);
    const { name, factor } = best.relation;
    const evidence = { strength: best.strength, evidence: strengthInWords(best.strength) };
    groups.push({ kind: 'relation', name, ...(factor === undefined ? {} : { factor }), ids: kept, ...evidence });
    refused.add(name);
  }
  return { groups, rest: [...open.keys()] };
}

/** Reads and checks the answers of a part, and groups them as {@link groupChecks} does. */
export function patternsOf(answers: readonly PatternAnswer[]): readonly Pattern[] {
  return groupChecks(answers.map(({ id, input }) => ({ id, check: checkAnswer(input) })));
}

/**
 * Groups checked answers of a part that stand in the same relation to their own keys, largest group first: verdicts as
 * they are, wrong answers by the mistake that explains most of them. A relation is named only where chance is no
 * explanation.
 */
export function groupChecks(
  answers: readonly { readonly id: string; readonly check: PatternCheck }[],
): readonly Pattern[] {
  const byVerdict = new Map<string, { kind: Pattern['kind']; name: string; slip?: number; ids: string[] }>();
  const wrong: Wrong[] = [];
  for (const { id, check } of answers) {
    if (check.verdict === 'wrong') {
      wrong.push({ id, possible: (check.possible ?? []).map(asPossible) });
      continue;
    }
    const name = check.verdict === 'slip' ? check.relation.name : (verdictNames[check.verdict] ?? check.verdict);
    const group = byVerdict.get(name) ?? {
      kind: check.verdict,
      name,
      ids: [],
      ...(check.slip === undefined ? {} : { slip: check.slip }),
    };
    group.ids.push(id);
    byVerdict.set(name, group);
  }
  const { groups, rest } = groupWrong(wrong);
  const none: readonly Pattern[] = rest.length > 0 ? [{ kind: 'none', name: noRelation.name, ids: rest }] : [];
  return [...byVerdict.values(), ...groups, ...none].sort(
    (a, b) => b.ids.length - a.ids.length || (a.name < b.name ? -1 : 1),
  );
}

function asPossible({ name, factor, chance }: NonNullable<PatternCheck['possible']>[number]): Possible {
  return { relation: { name, ...(factor === undefined ? {} : { factor }) }, chance };
}
