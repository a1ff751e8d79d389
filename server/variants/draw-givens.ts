import type { Given, ProblemContent } from '@shared/problems';
import type { GivenValue, GivenValues } from '@shared/variants';
import { printGiven } from './print-given';
import { seededSource } from '../keys/random-source';

type Givens = Pick<ProblemContent, 'givens'>;
type Plain = Exclude<Given, { kind: 'derived' }>;

/*
 * A problem's variants are numbered from 1 in mixed radix: the last given that is drawn turns fastest. Derived givens
 * follow from the others and count for nothing; `derive-givens.ts` adds them.
 */

/** The values that a given can be drawn from; one for a fixed given. */
export function countValues(given: Plain): number {
  switch (given.kind) {
    case 'fixed':
      return 1;
    case 'uniform':
      return Math.max(1, Math.floor((given.high - given.low) / given.step + 1e-6) + 1);
    case 'choice':
      return given.values.length;
  }
}

/** How many variants a problem has: 1 where nothing is drawn; possibly more than a whole number can hold exactly. */
export function countVariants(content: Givens): number {
  return plainGivens(content).reduce((product, given) => product * countValues(given), 1);
}

/** Whether a problem's variants are few enough to be numbered. */
export function areNumbered(content: Givens): boolean {
  return countVariants(content) <= 1_000_000_000;
}

function plainGivens(content: Givens): readonly Plain[] {
  return content.givens.filter((given): given is Plain => given.kind !== 'derived');
}

function valueAt(given: Plain, index: number): number {
  switch (given.kind) {
    case 'fixed':
      return given.value;
    case 'uniform':
      return given.low + index * given.step;
    case 'choice':
      return given.values[index] ?? NaN;
  }
}

/**
 * Draws the givens that do not follow from others. The same seed always draws the same values, and each given has its
 * own stream (the seed, a line break and the given's name), so that adding a given changes no other.
 *
 * @param seed any text, for example of the set, its problem and the student's membership
 */
export function drawPlainGivens(content: Givens, seed: string): GivenValues {
  return Object.fromEntries(
    plainGivens(content).map((given) => {
      const index = seededSource(`${seed}\n${given.name}`).below(countValues(given));
      return [given.name, printGiven(given, valueAt(given, index))];
    }),
  );
}

/** The givens of the variant with a number from 1 to `countVariants`, without those that follow from others. */
export function plainGivensOf(content: Givens, number: number): GivenValues {
  const values: [string, GivenValue][] = [];
  let rest = number - 1;
  for (const given of [...plainGivens(content)].reverse()) {
    const count = countValues(given);
    values.unshift([given.name, printGiven(given, valueAt(given, rest % count))]);
    rest = Math.floor(rest / count);
  }
  return Object.fromEntries(values);
}

/**
 * Some numbers of variants, one drawn from each of as many equal stretches, so that they lie well apart; all of them
 * where there are no more.
 *
 * @param count how many
 */
export function drawNumbers(content: Givens, count: number, seed: string): readonly number[] {
  const all = Math.min(countVariants(content), 1_000_000_000);
  if (all <= count) return Array.from({ length: all }, (_, index) => index + 1);
  const source = seededSource(seed);
  return Array.from({ length: count }, (_, index) => {
    const [from, to] = [Math.floor((index * all) / count), Math.floor(((index + 1) * all) / count)];
    return from + source.below(to - from) + 1;
  });
}
