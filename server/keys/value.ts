import type { Complex as MathComplex, Unit as MathUnit } from 'mathjs';
import type { State } from '../optics/state';
import { isState } from '../optics/state';
import { mathematics } from './mathematics';

/** What an expression, or a part of it, evaluates to. */
export type Value = number | boolean | MathComplex | MathUnit | State | readonly Value[];

/** A value as it leaves: numbers, complex numbers and lists of them. */
export type PlainValue = number | { readonly re: number; readonly im: number } | readonly PlainValue[];

/** A value as it comes in: a number, a complex number, a list, or a number with its unit as text. */
export type GivenValue = number | string | { readonly re: number; readonly im: number } | readonly unknown[];

/** Whether a value is a complex number of the mathematics library. */
export function isComplex(value: unknown): value is MathComplex {
  return mathematics.isComplex(value);
}

/** Whether a value is a number with a unit. */
export function isUnit(value: unknown): value is MathUnit {
  return mathematics.isUnit(value);
}

/** A kind of value in words, for sentences. */
export function kindOf(value: unknown): string {
  if (typeof value === 'number') return 'a number';
  if (typeof value === 'boolean') return 'a truth value';
  if (isComplex(value)) return 'a complex number';
  if (isUnit(value)) return 'a number with a unit';
  if (Array.isArray(value)) return 'a list';
  if (isState(value)) return value.modes === 2 ? 'a state of two modes' : 'a state of light';
  return 'a function';
}

/** Whether a value, or an entry of it, is not a number at all (infinities pass: a limit may still be finite). */
export function hasNaN(value: Value): boolean {
  if (typeof value === 'number') return Number.isNaN(value);
  if (isComplex(value)) return Number.isNaN(value.re) || Number.isNaN(value.im);
  if (isUnit(value)) return hasNaN(numberOfUnit(value));
  if (Array.isArray(value)) return (value as readonly Value[]).some(hasNaN);
  return false;
}

/** The number of a unit in SI base units. */
export function numberOfUnit(unit: MathUnit): number {
  const si = unit.toSI() as MathUnit & { value: unknown };
  return typeof si.value === 'number' ? si.value : Number.NaN;
}
