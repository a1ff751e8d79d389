import type { Complex } from '@shared/reading/complex';
import type { StateComponents } from '../keys/state-components';

/** A number, a complex number or a nested list of them, as the key language computes it. */
export type PlainKey = number | Complex | readonly PlainKey[];

/** A state in a number basis; what lies outside it is bounded where it is computed. */
export type StateKey = StateComponents;

/** A formula's key at the points of {@link formulaPoints}, in their order; null where it is undefined. */
export interface FormulaKey {
  readonly atPoints: readonly (Complex | null)[];
}

/** A key, or a slip, as it was computed for one variant. */
export interface ComputedKey {
  readonly value: PlainKey | StateKey | FormulaKey;
  readonly unit?: string | undefined;
}

/** Why a key cannot be compared with answers: for authors, never for students. */
export class KeyProblem extends Error {
  constructor(sentence: string) {
    super(sentence);
    this.name = 'KeyProblem';
  }
}

const isList = (value: ComputedKey['value']): value is readonly PlainKey[] => Array.isArray(value);

/** The key as a complex number. */
export function asComplex(value: ComputedKey['value']): Complex {
  if (typeof value === 'number') return { re: value, im: 0 };
  if (!isList(value) && 're' in value && 'im' in value) return { re: value.re, im: value.im };
  throw new KeyProblem('The key is not a number.');
}

/** The key as a real number; an imaginary part of the size of rounding is dropped. */
export function asReal(value: ComputedKey['value']): number {
  const { re, im } = asComplex(value);
  if (Math.abs(im) > 1e-12 * Math.abs(re))
    throw new KeyProblem('The key is a complex number, and the part asks for a real one.');
  return re;
}

/** The key as a list of numbers. */
export function asList(value: ComputedKey['value']): readonly Complex[] {
  if (!isList(value)) throw new KeyProblem('The key is not a list.');
  return value.map((entry) => asComplex(entry));
}

/** The key as rows of numbers. */
export function asMatrix(value: ComputedKey['value']): readonly (readonly Complex[])[] {
  if (!isList(value)) throw new KeyProblem('The key is not a matrix.');
  return value.map((row) => asList(row));
}

/** The key as a state. */
export function asState(value: ComputedKey['value']): StateKey {
  if (typeof value === 'object' && 'modes' in value) return value;
  throw new KeyProblem('The key is not a state.');
}

/** The key as a formula's values. */
export function asFormula(value: ComputedKey['value']): FormulaKey {
  if (typeof value === 'object' && 'atPoints' in value) return value;
  throw new KeyProblem('The key is not a formula.');
}

/** A key that comes from where values are kept or computed, as one that can be compared. */
export function computedKey({
  value,
  unit,
}: {
  readonly value: unknown;
  readonly unit?: string | undefined;
}): ComputedKey {
  return { value: comparableValue(value), ...(unit ? { unit } : {}) };
}

function comparableValue(value: unknown): ComputedKey['value'] {
  if (typeof value === 'object' && value !== null && !Array.isArray(value)) {
    if ('modes' in value || 'atPoints' in value) return value as StateKey | FormulaKey;
  }
  return plainKey(value);
}

function plainKey(value: unknown): PlainKey {
  if (typeof value === 'number') return value;
  if (Array.isArray(value)) return value.map(plainKey);
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value) {
    const { re, im } = value;
    if (typeof re === 'number' && typeof im === 'number') return { re, im };
  }
  throw new KeyProblem('The key is neither a number nor a list of numbers.');
}
