import type { Unit as MathUnit } from 'mathjs';
import { mathematics } from './mathematics';
import { numberOfUnit } from './value';

/** A number with a unit, reduced to SI: the unit in coherent form. */
export interface SiQuantity {
  readonly value: number;
  /** `J`, `Hz`, `rad/s`, `kg m^2 s^-3` …; empty for a pure number. */
  readonly unit: string;
  /** Exponents of kg, m, s, A, K, cd, mol, rad, bit. */
  readonly dimension: readonly number[];
}

const bases = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol', 'rad', 'b'] as const;

/** Coherent derived units with names of their own, by the exponents of the bases. */
const derived: Readonly<Record<string, string>> = {
  '1,2,-2': 'J',
  '1,2,-3': 'W',
  '1,1,-2': 'N',
  '1,-1,-2': 'Pa',
  '0,0,1,1': 'C',
  '1,2,-3,-1': 'V',
  '1,2,-3,-2': 'ohm',
  '-1,-2,4,2': 'F',
  '1,2,-2,-2': 'H',
  '1,0,-2,-1': 'T',
  '1,2,-2,-1': 'Wb',
  '0,0,-1': 's^-1',
  '0,0,-1,0,0,0,0,1': 'rad/s',
};

interface UnitParts {
  readonly dimensions: readonly number[];
  readonly units: readonly { readonly unit: { readonly name: string }; readonly power: number }[];
}

/** Reduces a number with a unit to SI. Frequencies that were written in Hz stay in Hz: they are never taken for rad/s. */
export function toSi(unit: MathUnit): SiQuantity {
  const { dimensions, units } = unit as unknown as UnitParts;
  const exponents = bases.map((_, index) => Math.round((dimensions[index] ?? 0) * 1e9) / 1e9);
  const value = numberOfUnit(unit);
  if (exponents.every((exponent) => exponent === 0)) return { value, unit: '', dimension: exponents };
  const key = exponents.join(',').replace(/(,0)+$/, '');
  const inHertz = units.some((each) => each.unit.name === 'Hz' || each.unit.name === 'hertz');
  const name = key === '0,0,-1' && inHertz ? 'Hz' : (derived[key] ?? spelledOut(exponents));
  return { value, unit: name, dimension: exponents };
}

function spelledOut(exponents: readonly number[]): string {
  return exponents
    .flatMap((exponent, index) => {
      if (exponent === 0) return [];
      const base = bases[index] ?? '';
      return exponent === 1 ? [base] : [`${base}^${String(exponent)}`];
    })
    .join(' ');
}

/** A number with a unit written as mathjs writes it, for example `m s^-1`. */
export function unitOf(value: number, unit: string): MathUnit {
  return mathematics.unit(value, unit);
}

/** Whether a name is a unit of the language, prefix included. */
export function isUnitName(name: string): boolean {
  return mathematics.Unit.isValuelessUnit(name);
}
