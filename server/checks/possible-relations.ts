import type { ComputedSpecification } from '@shared/answer-forms';
import type { Reading } from '@shared/reading/reading';
import { compareWithKey } from './compare';
import { chanceOfRelation, writtenPrecision } from './evidence';
import { KeyProblem, type ComputedKey } from './key-value';
import type { Match } from './match';
import { noRelation, roundedRelation, type Relation } from './relation';
import { relationsOf, type RelatedKeys } from './relation-of';

/** A relation that a wrong answer may stand in, with the probability that it does so by chance. */
export interface PossibleRelation extends Relation {
  readonly chance: number;
}

/** Relations that are told by what an answer is, not by how near a number lies: no chance is in them. */
export const certain = 1e-9;

/** How far off an answer may lie that was rounded on the way, relative: three figures, twice. */
const widestInGroups = 5e-3;

/**
 * All relations in which a wrong answer may stand to its key, to the key recomputed from the student's own earlier answers,
 * and to the keys of other parts. Which of them was meant shows only where many answers are looked at together.
 */
export function possibleRelations(
  reading: Reading,
  part: ComputedSpecification,
  keys: RelatedKeys & { readonly own?: { readonly key?: ComputedKey | undefined } },
  match: Match,
): readonly PossibleRelation[] {
  const found = new Map<string, PossibleRelation>();
  const gather = (related: RelatedKeys, compared: Match) => {
    for (const possible of withChances(reading, part, related, compared)) {
      const seen = found.get(possible.name);
      if (!seen || possible.chance < seen.chance) found.set(possible.name, possible);
    }
  };
  gather(keys, match);
  const own = keys.own?.key;
  if (own) {
    try {
      gather({ key: own }, compareWithKey(reading, own, part));
    } catch (error) {
      // A recomputed key of the wrong kind has no relations.
      if (!(error instanceof KeyProblem)) throw error;
    }
  }
  return [...found.values()];
}

function withChances(
  reading: Reading,
  part: ComputedSpecification,
  keys: RelatedKeys,
  match: Match,
): readonly PossibleRelation[] {
  const precision = writtenPrecision(reading);
  const numeric = reading.kind === 'number' || reading.kind === 'complex';
  return relationsOf(reading, part, keys, match)
    .filter(
      ({ relation, deviation }) => relation !== noRelation && deviation <= Math.max(widestInGroups, 3 * precision),
    )
    .map(({ relation, deviation }) => ({
      ...relation,
      chance:
        numeric && match.answer !== undefined && relation !== roundedRelation
          ? chanceOfRelation(deviation, precision)
          : certain,
    }));
}
