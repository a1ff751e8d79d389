import type { VariableRange } from '@shared/answer-forms';
import { isFiniteComplex, modulus, real, subtract, type Complex } from '@shared/reading/complex';
import { evaluateNumber } from '@shared/reading/quantity';
import type { ReadingOf } from '@shared/reading/reading';
import type { FormulaPoint } from './compare-formula';
import type { RelationMatch } from './relation';

type Point = Readonly<Record<string, number>>;

/** A mistake in one variable: what was put in its place, and what undoes that. */
interface Replacement {
  readonly name: (variable: string) => string;
  readonly undo: (value: number) => number;
  readonly integers?: boolean;
  readonly remark?: string;
}

const replacements: readonly Replacement[] = [
  { name: (v) => `1 − ${v}`, undo: (value) => 1 - value },
  { name: (v) => `−${v}`, undo: (value) => -value },
  { name: (v) => `2${v}`, undo: (value) => value / 2 },
  { name: (v) => `${v}/2`, undo: (value) => 2 * value },
  { name: (v) => `√${v}`, undo: (value) => value ** 2, remark: ', an amplitude for an intensity' },
  { name: (v) => `${v}²`, undo: Math.sqrt },
  { name: (v) => `1/${v}`, undo: (value) => 1 / value },
  { name: (v) => `2π${v}`, undo: (value) => value / (2 * Math.PI) },
  { name: (v) => `${v}/2π`, undo: (value) => value * 2 * Math.PI },
  { name: (v) => `${v} + 1`, undo: (value) => value - 1, integers: true },
  { name: (v) => `${v} − 1`, undo: (value) => value + 1, integers: true },
];

/** So many points must be compared: a number of photons one lower does not exist everywhere. */
const fewestPoints = 10;
const width = 1e-6;

/**
 * Mistakes in the variables of a formula: where the answer with a variable changed is the key, the key was written with
 * the opposite change. T for 1 − T, an amplitude for an intensity, ω for 2πν, one photon off, two variables exchanged.
 */
export function relationsInVariables(
  reading: ReadingOf<'formula'>,
  points: readonly FormulaPoint[],
  variables: Readonly<Record<string, VariableRange>>,
): readonly RelationMatch[] {
  const largest = Math.max(...points.map(({ key }) => modulus(key)));
  const becomesKey = (change: (at: Point) => Point): boolean => {
    let compared = 0;
    for (const { at, key } of points) {
      const changed = change(at);
      if (
        Object.values(changed).some(
          (value) => !Number.isFinite(value) || (value < 0 && isCount(variables, changed, value)),
        )
      )
        continue;
      const scope = new Map<string, Complex>(Object.entries(changed).map(([name, value]) => [name, real(value)]));
      const value = evaluateNumber(reading.expression, scope);
      if (!isFiniteComplex(value)) return false;
      if (modulus(subtract(value, key)) > width * Math.max(modulus(key), 1e-6 * largest)) return false;
      compared += 1;
    }
    return compared >= fewestPoints;
  };
  const found: RelationMatch[] = [];
  const names = Object.keys(variables);
  for (const variable of names) {
    const whole = !Array.isArray(variables[variable]);
    for (const { name, undo, integers = false, remark = '' } of replacements) {
      if (whole !== integers) continue;
      if (becomesKey((at) => ({ ...at, [variable]: undo(at[variable] ?? NaN) })))
        found.push(named(`the key with ${name(variable)} in place of ${variable}${remark}`));
    }
  }
  for (const [index, one] of names.entries()) {
    for (const other of names.slice(index + 1)) {
      if (becomesKey((at) => ({ ...at, [one]: at[other] ?? NaN, [other]: at[one] ?? NaN })))
        found.push(named(`the key with ${one} and ${other} exchanged`));
    }
  }
  return found;
}

const named = (name: string): RelationMatch => ({ relation: { name }, deviation: 0 });

/** Whether a value belongs to a variable that counts something. */
function isCount(variables: Readonly<Record<string, VariableRange>>, at: Point, value: number): boolean {
  return Object.entries(variables).some(([name, range]) => !Array.isArray(range) && at[name] === value);
}
