import {
  conjugate,
  divide,
  isFiniteComplex,
  modulus,
  multiply,
  negate,
  one,
  real,
  sqrt,
  subtract,
  type Complex,
} from '@shared/reading/complex';
import { superscript } from '@shared/reading/print';

/** How an answer stands to its key, in plain words, with the factor where it is one. */
export interface Relation {
  readonly name: string;
  readonly factor?: number;
}

export const equalRelation: Relation = { name: 'equal to the key' };
export const throughRelation: Relation = { name: 'right from the own earlier answer' };
export const roundedRelation: Relation = { name: 'the key, rounded too coarsely' };
export const noRelation: Relation = { name: 'no known relation' };

/** A way in which answers go wrong: what the answer would be if it had gone wrong so. */
export interface Candidate {
  readonly relation: Relation;
  readonly of: (key: Complex) => Complex;
}

const times = (name: string, factor: number): Candidate => ({
  relation: { name, factor },
  of: (key) => multiply(key, real(factor)),
});

const tenTimes = (exponent: number): Candidate =>
  times(
    exponent === 1
      ? 'ten times the key'
      : exponent === -1
        ? 'a tenth of the key'
        : `10${superscript(exponent)} times the key`,
    10 ** exponent,
  );

const powersOfTen = [
  1, -1, 2, -2, 3, -3, 6, -6, 9, -9, 12, -12, 4, -4, 5, -5, 7, -7, 8, -8, 10, -10, 11, -11, 15, -15,
].map(tenTimes);

/** Relations of a number to its key, the likeliest first: where several hold the first is named. */
export const numberCandidates: readonly Candidate[] = [
  { relation: { name: 'the key with the other sign', factor: -1 }, of: negate },
  { relation: { name: 'the complex conjugate of the key' }, of: conjugate },
  times('twice the key', 2),
  times('half the key', 0.5),
  { relation: { name: 'one minus the key' }, of: (key) => subtract(one, key) },
  { relation: { name: 'the square of the key' }, of: (key) => multiply(key, key) },
  { relation: { name: 'the square root of the key, an amplitude for an intensity' }, of: sqrt },
  { relation: { name: 'the reciprocal of the key' }, of: (key) => divide(one, key) },
  times('√2 times the key', Math.SQRT2),
  times('the key over √2', Math.SQRT1_2),
  times('2π times the key', 2 * Math.PI),
  times('the key over 2π', 1 / (2 * Math.PI)),
  times('four times the key', 4),
  times('a quarter of the key', 0.25),
  ...powersOfTen,
  times('π times the key', Math.PI),
  times('the key over π', 1 / Math.PI),
  times('the key in degrees instead of radians', 180 / Math.PI),
  times('the key in radians instead of degrees', Math.PI / 180),
  times('minus twice the key', -2),
  times('minus half the key', -0.5),
  { relation: { name: 'the modulus of the key' }, of: (key) => real(modulus(key)) },
  { relation: { name: 'the modulus squared of the key' }, of: (key) => real(modulus(key) ** 2) },
  { relation: { name: 'the key times i' }, of: (key) => ({ re: -key.im, im: key.re }) },
  { relation: { name: 'the key times −i' }, of: (key) => ({ re: key.im, im: -key.re }) },
  { relation: { name: 'the key minus one' }, of: (key) => subtract(key, one) },
  { relation: { name: 'the key plus one' }, of: (key) => subtract(key, real(-1)) },
];

/** The mistakes that people make most (common practice, no source). */
const usual: ReadonlySet<string> = new Set([
  'the key with the other sign',
  'the complex conjugate of the key',
  'twice the key',
  'half the key',
  'one minus the key',
  'the square of the key',
  'the square root of the key, an amplitude for an intensity',
  'the reciprocal of the key',
  'ten times the key',
  'a tenth of the key',
]);
const usualShare = 5 / 6;
/** Relations that are looked for beside the candidates: keys of other parts. */
const others = 4;

/**
 * The share of one relation in all that are looked for; all together add to 1. The usual mistakes have the larger shares,
 * so that fewer answers are evidence of them.
 */
export function relationWeight(name: string): number {
  return usual.has(name) ? usualShare / usual.size : (1 - usualShare) / (numberCandidates.length + others - usual.size);
}

/** Narrowest and widest relative width within which a relation is seen: honest rounding on one side, chance on the other. */
const narrowest = 2e-3;
const widest = 2e-2;

/** Relative width within which an answer counts as standing in a relation, from the tolerance on the key itself. */
export function relationWidth(key: Complex, allowed: number): number {
  const size = modulus(key);
  const relative = size === 0 ? widest : allowed / size;
  return Math.min(Math.max(relative, narrowest), widest);
}

const close = (a: Complex, b: Complex, width: number): boolean => modulus(subtract(a, b)) <= width * modulus(b);

/** A relation that holds, with the relative distance from holding exactly. */
export interface RelationMatch {
  readonly relation: Relation;
  readonly deviation: number;
}

/**
 * The candidates that take the key to the answer, best first: nearest, with the likelier mistake before the less
 * likely where both are near. A relation that leaves the key as it is does not count.
 */
export function relationsBetween(
  answer: Complex,
  key: Complex,
  width: number,
  candidates: readonly Candidate[] = numberCandidates,
): readonly RelationMatch[] {
  const found: (RelationMatch & { readonly score: number })[] = [];
  for (const [index, { relation, of }] of candidates.entries()) {
    const expected = of(key);
    if (!isFiniteComplex(expected) || modulus(expected) === 0 || close(expected, key, width)) continue;
    const deviation = modulus(subtract(answer, expected)) / modulus(expected);
    if (deviation <= width) found.push({ relation, deviation, score: deviation / width + index / candidates.length });
  }
  return found.sort((a, b) => a.score - b.score).map(({ relation, deviation }) => ({ relation, deviation }));
}
