import type { ComputedSpecification } from '@shared/answer-forms';
import { modulus, real, type Complex } from '@shared/reading/complex';
import type { Reading, ReadingOf } from '@shared/reading/reading';
import { readUnit } from '@shared/reading/unit-part';
import { compareWithKey } from './compare';
import { isRounded } from './evidence';
import { formulaAtPoints } from './compare-formula';
import { asComplex, KeyProblem, type ComputedKey } from './key-value';
import type { Match } from './match';
import { relationsInVariables } from './relation-of-formulas';
import { relationsBetweenSets } from './relation-of-sets';
import { relationsBetweenStates } from './relation-of-states';
import {
  noRelation,
  relationsBetween,
  relationWidth,
  roundedRelation,
  type Relation,
  type RelationMatch,
} from './relation';
import { allowance } from './tolerance';

/** The key of another part, which an answer may have been put down for. */
export interface OtherKey {
  /** As the part is called: `a`. */
  readonly label: string;
  readonly key: ComputedKey;
}

/** What an answer can be related to. */
export interface RelatedKeys {
  readonly key: ComputedKey;
  readonly others?: readonly OtherKey[];
}

const named = (name: string): RelationMatch => ({ relation: { name }, deviation: 0 });

const otherPartWidth = 2e-3;

/** The parts whose key the answer is. */
function keysOfOtherParts(reading: Reading, others: readonly OtherKey[]): readonly RelationMatch[] {
  if (reading.kind !== 'number' && reading.kind !== 'complex') return [];
  return others.flatMap(({ label, key }) => {
    const expected = quietly(() => asComplex(key.value));
    if (!expected) return [];
    const unit = key.unit === undefined ? undefined : readUnit(key.unit);
    const si = { re: expected.re * (unit?.factor ?? 1), im: expected.im * (unit?.factor ?? 1) };
    const value = reading.kind === 'complex' ? reading.value : real(reading.unit ? reading.si : reading.value);
    const target = reading.kind === 'number' && reading.unit ? si : expected;
    const size = modulus(target);
    const distance = modulus({ re: value.re - target.re, im: value.im - target.im });
    return size > 0 && distance <= otherPartWidth * size
      ? [{ relation: { name: `the key of part (${label})` }, deviation: distance / size }]
      : [];
  });
}

function quietly<T>(attempt: () => T): T | undefined {
  try {
    return attempt();
  } catch (error) {
    if (error instanceof KeyProblem) return undefined;
    throw error;
  }
}

/** A unit that does not fit, in words: hertz and radians per second are a mistake of their own. */
function unitRelation(reading: ReadingOf<'number'>, partUnit: string | undefined): Relation {
  const [given, wanted] = [reading.unit?.dimension, partUnit === undefined ? undefined : readUnit(partUnit)?.dimension];
  if (!given) return noRelation;
  if (!wanted) return { name: 'a unit where none is asked for' };
  if (given.hertz !== 0 && wanted.rad !== 0 && given.s === wanted.s)
    return { name: 'hertz in place of radians per second' };
  if (given.rad !== 0 && wanted.hertz !== 0 && given.s === wanted.s)
    return { name: 'radians per second in place of hertz' };
  return { name: 'a unit of another dimension' };
}

const isOne = (value: Match['answer']): value is Complex => value !== undefined && 're' in value;

/** The width for several values at once, from the tolerance on the largest. */
function setWidth(key: readonly Complex[], part: ComputedSpecification): number {
  const largest = key.reduce<Complex>((most, value) => (modulus(value) > modulus(most) ? value : most), real(0));
  if (part.form === 'distribution') return relationWidth(largest, part.tolerance.totalVariation);
  return 'tolerance' in part ? relationWidth(largest, allowance(modulus(largest), part.tolerance)) : 1e-2;
}

/** All relations in which a wrong answer stands to its key and to the keys of other parts, best first. */
export function relationsOf(
  reading: Reading,
  part: ComputedSpecification,
  keys: RelatedKeys,
  match: Match,
): readonly RelationMatch[] {
  const others = keysOfOtherParts(reading, keys.others ?? []);
  if (part.form === 'state') {
    return reading.kind === 'state' ? relationsBetweenStates(reading, keys.key, part.minimumFidelity) : [];
  }
  if (part.form === 'formula') {
    if (reading.kind !== 'formula') return [];
    const points = formulaAtPoints(reading, keys.key, part);
    const answer = points.flatMap((point) => (point.answer ? [point.answer] : []));
    if (answer.length < points.length) return [named('undefined where the key is not')];
    const between = relationsBetweenSets({ answer, key: points.map(({ key }) => key), width: 1e-6 });
    return between.length > 0 ? between : relationsInVariables(reading, points, part.variables);
  }
  if (match.answer === undefined || match.key === undefined) {
    return part.form === 'number' && reading.kind === 'number' && reading.unit
      ? [...others, { relation: unitRelation(reading, part.unit ?? keys.key.unit), deviation: 0 }]
      : others;
  }
  if (isOne(match.answer) && isOne(match.key)) {
    if (isRounded(reading, match.answer.re, match.key.re)) return [{ relation: roundedRelation, deviation: 0 }];
    const allowed =
      part.form === 'number' || part.form === 'complex' ? allowance(modulus(match.key), part.tolerance) : 0;
    return [...relationsBetween(match.answer, match.key, relationWidth(match.key, allowed)), ...others];
  }
  const [answer, key] = [
    isOne(match.answer) ? [match.answer] : match.answer,
    isOne(match.key) ? [match.key] : match.key,
  ];
  const found = relationsBetweenSets({ answer, key, width: setWidth(key, part) });
  if (found.length > 0 || answer.length === key.length) return found;
  return [named(answer.length < key.length ? 'fewer entries than the key' : 'more entries than the key')];
}

/**
 * The best relation of a wrong answer to its key, or where there is none to the key recomputed from the student's own
 * earlier answers.
 */
export function relationOf(
  reading: Reading,
  part: ComputedSpecification,
  keys: RelatedKeys & { readonly own?: { readonly key?: ComputedKey | undefined } },
  match: Match,
): Relation {
  const [best] = relationsOf(reading, part, keys, match);
  if (best) return best.relation;
  const own = keys.own?.key;
  if (!own) return noRelation;
  const [recomputed] =
    quietly(() => relationsOf(reading, part, { key: own }, compareWithKey(reading, own, part))) ?? [];
  if (!recomputed) return noRelation;
  return { ...recomputed.relation, name: `${recomputed.relation.name}, from the own earlier answer` };
}
