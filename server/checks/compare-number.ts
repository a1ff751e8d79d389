import type { AnswerSpecification, Tolerance } from '@shared/answer-forms';
import { real } from '@shared/reading/complex';
import { comparable } from '@shared/reading/dimension';
import type { ReadingOf, ReadUnit } from '@shared/reading/reading';
import { readUnit } from '@shared/reading/unit-part';
import { asReal, KeyProblem, type ComputedKey } from './key-value';
import { matched, type Match } from './match';
import { within } from './tolerance';

export type NumberSpecification = Extract<AnswerSpecification, { form: 'number' }>;

const celsiusZero = 273.15;

function unitOf(text: string): ReadUnit {
  const unit = readUnit(text);
  if (!unit) throw new KeyProblem(`The unit ${text} is not known.`);
  return unit;
}

/** A key in the unit that answers are compared in: the part's, else its own. */
export interface NumberKey {
  readonly value: number;
  readonly unit: ReadUnit | undefined;
}

/** Brings a key to the unit of its part. Throws a KeyProblem where they do not go together. */
export function numberKey(key: ComputedKey, partUnit: string | undefined): NumberKey {
  const value = asReal(key.value);
  if (!Number.isFinite(value)) throw new KeyProblem('The key is not finite.');
  if (key.unit === undefined || key.unit === '')
    return { value, unit: partUnit === undefined ? undefined : unitOf(partUnit) };
  if (partUnit === undefined || partUnit === key.unit) return { value, unit: unitOf(key.unit) };
  const [from, to] = [unitOf(key.unit), unitOf(partUnit)];
  if (!comparable(from.dimension, to.dimension)) {
    throw new KeyProblem(`The key comes in ${from.text}, which is not the kind of quantity that ${to.text} measures.`);
  }
  const scaled = (value * from.factor) / to.factor;
  return { value: scaled, unit: to };
}

/** The answer's value in the unit of the key, or why there is none. */
function answerIn(unit: ReadUnit | undefined, reading: ReadingOf<'number'>): number | { readonly reason: string } {
  if (!unit) {
    if (reading.unit)
      return { reason: `A pure number is asked for, and the answer has the unit ${reading.unit.text}.` };
    return reading.value;
  }
  if (!reading.unit) return unit.text === '°C' ? reading.value + celsiusZero : reading.value;
  if (!comparable(reading.unit.dimension, unit.dimension)) {
    return { reason: `The unit ${reading.unit.text} does not measure what ${unit.text} measures.` };
  }
  // The same unit on both sides needs no conversion, and so no rounding.
  if (reading.unit.text === unit.text && unit.text !== '°C') return reading.value;
  return reading.si / unit.factor;
}

/** Compares a number with a key, a recomputed key or a slip, units included. */
export function compareNumber(reading: ReadingOf<'number'>, key: ComputedKey, part: NumberSpecification): Match {
  const { value, unit } = numberKey(key, part.unit);
  return compareWithin(reading, { value, unit }, part.tolerance);
}

function compareWithin(reading: ReadingOf<'number'>, { value, unit }: NumberKey, tolerance: Tolerance): Match {
  const answer = answerIn(unit, reading);
  if (typeof answer !== 'number') return matched(false, { reason: answer.reason, key: real(value) });
  return {
    same: within(real(answer), real(value), tolerance),
    missingUnit: unit !== undefined && reading.unit === undefined,
    answer: real(answer),
    key: real(value),
  };
}

/** Compares a number with a slip, which may have another unit than the key: that can be the mistake. */
export function compareNumberWithSlip(
  reading: ReadingOf<'number'>,
  slip: ComputedKey,
  part: NumberSpecification,
): Match {
  try {
    return compareNumber(reading, slip, part);
  } catch (error) {
    if (!(error instanceof KeyProblem)) throw error;
    return compareWithin(reading, numberKey(slip, undefined), part.tolerance);
  }
}
