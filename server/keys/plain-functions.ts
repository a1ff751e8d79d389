import { mathematics as m } from './mathematics';
import { kindOf, type Value } from './value';

/** A function of values; what it throws is turned into an error with the place of the call. */
export type PlainFunction = (...values: readonly Value[]) => Value;

/** Longest list that an expression may make. */
export const longestList = 10_000;

const from = (f: unknown): PlainFunction => f as PlainFunction;

/** Refuses a call in a sentence. */
export class Refusal extends Error {}

function range(first: Value, last: Value, step: Value = 1): Value {
  if (typeof first !== 'number' || typeof last !== 'number' || typeof step !== 'number')
    throw new Refusal('takes numbers: first, last and, where it is not 1, the step');
  if (![first, last, step].every(Number.isFinite) || step === 0)
    throw new Refusal('takes finite numbers and a step other than 0');
  const count = Math.floor((last - first) / step + 1e-9) + 1;
  if (count > longestList)
    throw new Refusal(`would make a list of ${String(count)} entries; at most 10,000 are allowed`);
  return Array.from({ length: Math.max(0, count) }, (_, index) => first + index * step);
}

function factorial(n: Value): Value {
  if (Array.isArray(n)) return (n as readonly Value[]).map(factorial);
  if (typeof n !== 'number' || !Number.isInteger(n) || n < 0)
    throw new Refusal('takes a whole number from 0; `gamma` takes any');
  if (n > 170) throw new Refusal(`of ${String(n)} is beyond the range of numbers; at most 170 is allowed`);
  return m.factorial(n);
}

function combinations(n: Value, k: Value): Value {
  if (typeof n !== 'number' || typeof k !== 'number' || !Number.isInteger(n) || !Number.isInteger(k) || k < 0 || k > n)
    throw new Refusal('takes whole numbers n and k with 0 ≤ k ≤ n');
  if (Math.min(k, n - k) > 10_000) throw new Refusal('takes k or n − k of at most 10,000');
  const ways = Number(binomialCoefficient(BigInt(n), BigInt(Math.min(k, n - k))));
  if (!Number.isFinite(ways)) throw new Refusal('of these is beyond the range of numbers');
  return ways;
}

/** More than any number can hold. */
const beyondNumbers = 1n << 1100n;

/** n!/(k!(n − k)!), to the last digit; not followed further where it is beyond all numbers. */
function binomialCoefficient(n: bigint, k: bigint): bigint {
  let ways = 1n;
  for (let taken = 1n; taken <= k && ways < beyondNumbers; taken++) ways = (ways * (n - k + taken)) / taken;
  return ways;
}

/** How many places `round` keeps: not more than numbers have. */
function round(x: Value, places: Value = 0): Value {
  if (typeof places !== 'number' || !Number.isInteger(places) || places < 0 || places > 15)
    throw new Refusal('takes 0 to 15 decimal places');
  return from(m.round)(x, places);
}

/**
 * The variance of a population, estimated from a sample of it: s² = Σ(xⱼ − x̄)²/(N − 1), without bias.
 *
 * @param values a list of at least two real numbers
 * @returns s², in the square of the list's unit, which must be none
 * @throws Refusal for fewer than two numbers, and for what is no list of real numbers
 * @example variance([1, 2, 3]) is 1
 * Source: JCGM 100:2008 (GUM), 4.2.2, equation 4.
 */
function variance(...values: readonly Value[]): number {
  const list = realList(values.length === 1 ? values[0] : [...values]);
  if (list.length < 2) throw new Refusal('takes at least two numbers: one says nothing about a spread');
  const mean = list.reduce((sum, each) => sum + each, 0) / list.length;
  return list.reduce((sum, each) => sum + (each - mean) ** 2, 0) / (list.length - 1);
}

/** A list of finite real numbers, at least one. @throws Refusal */
export function realList(value: Value | undefined): readonly number[] {
  if (!Array.isArray(value) || value.length === 0)
    throw new Refusal(`takes a list of numbers, got ${value === undefined ? 'nothing' : kindOf(value)}`);
  return (value as readonly Value[]).map((entry, index) => {
    if (typeof entry !== 'number' || !Number.isFinite(entry))
      throw new Refusal(`takes real numbers; entry ${String(index + 1)} is ${kindOf(entry)}`);
    return entry;
  });
}

/** The mathematical functions of the language, by name. */
export const plainFunctions: Readonly<Record<string, PlainFunction>> = Object.assign(
  Object.create(null) as Record<string, PlainFunction>,
  {
    abs: from(m.abs),
    arg: from(m.arg),
    conj: from(m.conj),
    re: from(m.re),
    im: from(m.im),
    sqrt: from(m.sqrt),
    cbrt: from(m.cbrt),
    square: from(m.square),
    hypot: from(m.hypot),
    pow: from(m.pow),
    mod: from(m.mod),
    sign: from(m.sign),
    exp: from(m.exp),
    expm1: from(m.expm1),
    log: from(m.log),
    ln: from((x: never) => m.log(x)),
    log10: from(m.log10),
    log2: from(m.log2),
    log1p: from(m.log1p),
    sin: from(m.sin),
    cos: from(m.cos),
    tan: from(m.tan),
    cot: from(m.cot),
    sec: from(m.sec),
    csc: from(m.csc),
    asin: from(m.asin),
    acos: from(m.acos),
    atan: from(m.atan),
    atan2: from(m.atan2),
    sinh: from(m.sinh),
    cosh: from(m.cosh),
    tanh: from(m.tanh),
    asinh: from(m.asinh),
    acosh: from(m.acosh),
    atanh: from(m.atanh),
    sum: from(m.sum),
    prod: from(m.prod),
    min: from(m.min),
    max: from(m.max),
    mean: from(m.mean),
    variance,
    round,
    floor: from((x: never) => m.floor(x)),
    ceil: from((x: never) => m.ceil(x)),
    fix: from((x: never) => m.fix(x)),
    factorial,
    combinations,
    gamma: from(m.gamma),
    lgamma: from(m.lgamma),
    erf: from(m.erf),
    range,
  } satisfies Record<string, PlainFunction>,
);
