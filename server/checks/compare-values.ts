import type { AnswerSpecification, Tolerance } from '@shared/answer-forms';
import { modulus, real, zero, type Complex } from '@shared/reading/complex';
import { printComplex, printNumber } from '@shared/reading/print';
import type { ReadingOf } from '@shared/reading/reading';
import { asComplex, asList, asMatrix, KeyProblem, type ComputedKey } from './key-value';
import { matched, type Match } from './match';
import { within } from './tolerance';

type PartOf<Form extends AnswerSpecification['form']> = Extract<AnswerSpecification, { form: Form }>;

const unitReason = (unit: { readonly text: string }): string =>
  `Pure numbers are asked for, and the answer has the unit ${unit.text}.`;

const counted = (entries: number): string => (entries === 1 ? 'one entry' : `${entries} entries`);

function withoutUnit(key: ComputedKey): void {
  if (key.unit) throw new KeyProblem(`The key has the unit ${key.unit}, and the part asks for pure numbers.`);
}

/** Compares a complex number; up to a phase only the moduli count. */
export function compareComplex(reading: ReadingOf<'complex'>, key: ComputedKey, part: PartOf<'complex'>): Match {
  withoutUnit(key);
  const value = asComplex(key.value);
  if (reading.unit) return matched(false, { reason: unitReason(reading.unit), key: value });
  const same = part.upToPhase
    ? within(real(modulus(reading.value)), real(modulus(value)), part.tolerance)
    : within(reading.value, value, part.tolerance);
  return matched(same, { answer: reading.value, key: value });
}

interface Compared {
  readonly answer: readonly Complex[];
  readonly key: readonly Complex[];
}

/** The first entry that does not lie within the tolerance, or −1. */
const firstDifference = ({ answer, key }: Compared, tolerance: Tolerance): number =>
  answer.findIndex((entry, index) => !within(entry, key[index] ?? real(NaN), tolerance));

/** An entry of both sides as the end of a sentence. */
const bothSides = ({ answer, key }: Compared, index: number): string =>
  `is ${printComplex(answer[index] ?? zero, 5)} where the key has ${printComplex(key[index] ?? zero, 5)}.`;

/** Compares a list entry by entry; lists of another length are wrong. */
export function compareList(reading: ReadingOf<'list'>, key: ComputedKey, part: PartOf<'list'>): Match {
  withoutUnit(key);
  const entries = asList(key.value);
  const compared = { answer: reading.entries, key: entries };
  if (reading.unit) return matched(false, { ...compared, reason: unitReason(reading.unit) });
  if (reading.entries.length !== entries.length) {
    return matched(false, {
      ...compared,
      reason: `The list has ${counted(reading.entries.length)} where the key has ${entries.length}.`,
    });
  }
  const differing = firstDifference(compared, part.tolerance);
  if (differing < 0) return matched(true, compared);
  return matched(false, { ...compared, reason: `Entry ${differing + 1} ${bothSides(compared, differing)}` });
}

/** How far the sum of a distribution may lie above one. */
const excess = 1e-6;

/** Compares a distribution by its total variation distance ½Σ|p − q|; it must be one as far as it goes. */
export function compareDistribution(reading: ReadingOf<'list'>, key: ComputedKey, part: PartOf<'distribution'>): Match {
  withoutUnit(key);
  const entries = asList(key.value);
  const compared = { answer: reading.entries, key: entries };
  if (reading.unit) return matched(false, { ...compared, reason: unitReason(reading.unit) });
  const negative = reading.entries.findIndex(({ re }) => re < 0);
  if (negative >= 0) return matched(false, { ...compared, reason: `Entry ${negative + 1} is a negative probability.` });
  const sum = reading.entries.reduce((total, { re }) => total + re, 0);
  if (sum > 1 + excess) return matched(false, { ...compared, reason: 'The probabilities add to more than 1.' });
  if (reading.entries.length !== entries.length) {
    return matched(false, {
      ...compared,
      reason: `The distribution has ${counted(reading.entries.length)} where the key has ${entries.length}.`,
    });
  }
  const distance =
    entries.reduce((total, { re }, index) => total + Math.abs((reading.entries[index]?.re ?? NaN) - re), 0) / 2;
  const { totalVariation } = part.tolerance;
  if (distance <= totalVariation + 1e-14) return matched(true, compared);
  const reason = `The total variation from the key is ${printNumber(distance, 4)}; ${printNumber(totalVariation)} is allowed.`;
  return matched(false, { ...compared, reason });
}

/** Compares a matrix entry by entry; one of another shape is wrong. */
export function compareMatrix(reading: ReadingOf<'matrix'>, key: ComputedKey, part: PartOf<'matrix'>): Match {
  withoutUnit(key);
  const rows = asMatrix(key.value);
  const compared: { answer: readonly Complex[]; key: readonly Complex[] } = {
    answer: reading.rows.flat(),
    key: rows.flat(),
  };
  if (reading.unit) return matched(false, { ...compared, reason: unitReason(reading.unit) });
  const [height, width] = [rows.length, rows[0]?.length ?? 0];
  if (reading.rows.length !== height || (reading.rows[0]?.length ?? 0) !== width) {
    return matched(false, {
      ...compared,
      reason: `The matrix is ${reading.rows.length} × ${reading.rows[0]?.length ?? 0} where the key is ${height} × ${width}.`,
    });
  }
  const differing = firstDifference(compared, part.tolerance);
  if (differing < 0) return matched(true, compared);
  const [row, column] = [Math.floor(differing / width) + 1, (differing % width) + 1];
  return matched(false, {
    ...compared,
    reason: `The entry in row ${row}, column ${column} ${bothSides(compared, differing)}`,
  });
}
