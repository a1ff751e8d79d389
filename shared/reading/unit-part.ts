import { combine, isPure, printDimension, printPower, pure, type Dimension } from './dimension';
import { contains, type Expression } from './expression';
import { AmbiguousComma, ReadingProblem } from './problem';
import { parseExpression } from './parser';
import { evaluateNumber, evaluateQuantity } from './quantity';
import type { ReadUnit } from './reading';

interface UnitFactor {
  readonly name: string;
  readonly factor: number;
  readonly dimension: Dimension;
  readonly exponent: number;
}

interface Factors {
  readonly numeric: readonly { readonly node: Expression; readonly exponent: 1 | -1 }[];
  readonly units: readonly UnitFactor[];
}

/** The whole exponent that an expression is, or undefined. */
function wholeExponent(node: Expression): number | undefined {
  if (contains(node, 'unit', 'variable', 'ket', 'state')) return undefined;
  const { re, im } = evaluateNumber(node);
  return im === 0 && Number.isInteger(re) && Math.abs(re) <= 20 ? re : undefined;
}

/** The factors of a product, units apart from numbers; undefined where a unit is inside something else than a product. */
function factorsOf(node: Expression, exponent: number): Factors | undefined {
  if (node.type === 'unit') {
    if (node.unit.offset !== undefined) return undefined;
    const { name, factor, dimension } = node.unit;
    return { numeric: [], units: [{ name, factor, dimension, exponent }] };
  }
  if (!contains(node, 'unit')) return { numeric: [{ node, exponent: exponent < 0 ? -1 : 1 }], units: [] };
  if (node.type === 'negative') {
    const inner = factorsOf(node.argument, exponent);
    const minusOne: Expression = { type: 'number', value: -1, digits: '-1', at: node.at };
    return inner && { numeric: [...inner.numeric, { node: minusOne, exponent: 1 }], units: inner.units };
  }
  if (node.type !== 'binary') return undefined;
  if (node.operator === '^') {
    const power = wholeExponent(node.right);
    const inner = power === undefined ? undefined : factorsOf(node.left, exponent * power);
    return inner?.numeric.length === 0 ? inner : undefined;
  }
  if (node.operator !== '*' && node.operator !== '/') return undefined;
  const left = factorsOf(node.left, exponent);
  const right = factorsOf(node.right, node.operator === '*' ? exponent : -exponent);
  return left && right && { numeric: [...left.numeric, ...right.numeric], units: [...left.units, ...right.units] };
}

function printFactors(factors: readonly UnitFactor[]): string {
  const above = factors.filter(({ exponent }) => exponent > 0);
  const below = factors.filter(({ exponent }) => exponent < 0);
  const text = above.map(({ name, exponent }) => printPower(name, exponent)).join(' ');
  const only = below[0];
  if (text !== '' && below.length === 1 && only) return `${text}/${printPower(only.name, -only.exponent)}`;
  return [text, ...below.map(({ name, exponent }) => printPower(name, exponent))].filter(Boolean).join(' ');
}

/** Factors of the same unit as one. */
function merged(factors: readonly UnitFactor[]): readonly UnitFactor[] {
  const byName = new Map<string, UnitFactor>();
  for (const factor of factors) {
    const seen = byName.get(factor.name);
    byName.set(factor.name, seen ? { ...seen, exponent: seen.exponent + factor.exponent } : factor);
  }
  return [...byName.values()].filter(({ exponent }) => exponent !== 0);
}

/** A value with its unit, as an answer gives it. */
export interface ValueWithUnit {
  /** The number in front of the unit, as far as it can be told apart. */
  readonly numeric: readonly { readonly node: Expression; readonly exponent: 1 | -1 }[];
  readonly unit: ReadUnit | undefined;
  readonly si: { readonly re: number; readonly im: number };
}

/** Tells number and unit of an expression apart. Sums of units are given in coherent SI units. */
export function valueWithUnit(node: Expression): ValueWithUnit {
  const celsius = celsiusValue(node);
  if (celsius) return celsius;
  const { value, dimension } = evaluateQuantity(node);
  const factors = contains(node, 'unit') ? factorsOf(node, 1) : undefined;
  if (isPure(dimension))
    return { numeric: factors || contains(node, 'unit') ? [] : [{ node, exponent: 1 }], unit: undefined, si: value };
  if (!factors) return { numeric: [], unit: { text: printDimension(dimension), dimension, factor: 1 }, si: value };
  const units = merged(factors.units);
  const unit: ReadUnit = {
    text: printFactors(units),
    dimension: units.reduce((sum, each) => combine(sum, each.dimension, each.exponent), pure),
    factor: units.reduce((product, each) => product * each.factor ** each.exponent, 1),
  };
  return { numeric: factors.numeric, unit, si: value };
}

/** A temperature in degrees Celsius, the one unit with an offset: it only goes behind a number. */
function celsiusValue(node: Expression): ValueWithUnit | undefined {
  if (node.type === 'negative') {
    const inner = celsiusValue(node.argument);
    const argument = inner?.numeric[0]?.node;
    return inner && argument ? celsius({ ...node, argument }) : undefined;
  }
  const isCelsius =
    node.type === 'binary' &&
    node.operator === '*' &&
    node.right.type === 'unit' &&
    node.right.unit.offset !== undefined;
  return isCelsius && !contains(node.left, 'unit') ? celsius(node.left) : undefined;
}

function celsius(node: Expression): ValueWithUnit {
  const { re, im } = evaluateNumber(node);
  const kelvin: ReadUnit = { text: '°C', dimension: { ...pure, K: 1 }, factor: 1 };
  return { numeric: [{ node, exponent: 1 }], unit: kelvin, si: { re: re + 273.15, im } };
}

const unitGrammar = { comma: 'separator', units: true, kets: false, variables: new Map<string, string>() } as const;
const cache = new Map<string, ReadUnit | undefined>();

/** Reads a unit by itself, as a part or a key names it: `MHz`, `rad/s`, `kg m^2 / s^2`. Undefined where it is none. */
export function readUnit(text: string): ReadUnit | undefined {
  if (cache.has(text)) return cache.get(text);
  const unit = parseUnit(text);
  if (cache.size < 500) cache.set(text, unit);
  return unit;
}

function parseUnit(text: string): ReadUnit | undefined {
  try {
    const node = parseExpression(text, unitGrammar);
    if (node.type === 'unit' && node.unit.offset !== undefined) {
      return { text: '°C', dimension: node.unit.dimension, factor: 1 };
    }
    const { value, dimension } = evaluateQuantity(node);
    const factors = factorsOf(node, 1);
    if (value.im !== 0 || !(value.re > 0) || !factors || !contains(node, 'unit')) return undefined;
    const clean = factors.numeric.every(({ node: each }) => each.type === 'number' && each.value === 1);
    return clean ? { text: printFactors(merged(factors.units)), dimension, factor: value.re } : undefined;
  } catch (error) {
    if (error instanceof ReadingProblem || error instanceof AmbiguousComma) return undefined;
    throw error;
  }
}
