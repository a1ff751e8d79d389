import type { ComparedValue } from '../optics/methods';
import { isState, type State } from '../optics/state';
import { compileKey, type CompiledKey } from './compile-key';
import { KeyError } from './key-error';
import { mathematics } from './mathematics';
import { toSi } from './unit-value';
import { isComplex, isUnit, kindOf, numberOfUnit, type GivenValue, type PlainValue, type Value } from './value';

/** A key's value and how it was found. */
export interface KeyResult {
  readonly value: PlainValue;
  /** In SI base or coherent derived units; absent for pure numbers. */
  readonly unit?: string;
  /** `algebra` where no state of light was asked. */
  readonly method: string;
  /** Dimension of the number basis and the weight outside it, where one was used. */
  readonly dimension?: number;
  readonly outsideWeight?: number;
  readonly second?: {
    readonly method: string;
    readonly value: PlainValue;
    readonly dimension?: number;
    readonly outsideWeight?: number;
  };
  /** Decimal digits to which two methods agree; absent where one method applies. */
  readonly agreesTo?: number;
}

/** A given as expressions take it. @throws KeyError where its text is no number with a unit */
export function readGiven(name: string, given: GivenValue): Value {
  if (typeof given === 'number') {
    if (!Number.isFinite(given)) throw new KeyError(`The given “${name}” is not finite.`, null);
    return given;
  }
  if (typeof given === 'string') return quantity(name, given);
  if (Array.isArray(given)) return (given as readonly GivenValue[]).map((entry) => readGiven(name, entry));
  if ('re' in given && 'im' in given) {
    if (Number.isFinite(given.re) && Number.isFinite(given.im)) return mathematics.complex(given.re, given.im);
  }
  throw new KeyError(`The given “${name}” is no number.`, null);
}

function quantity(name: string, text: string): Value {
  try {
    return compileKey(text, { names: [] }).run(new Map()).value;
  } catch (error) {
    if (!(error instanceof KeyError)) throw error;
    throw new KeyError(`The given “${name}” cannot be read: ${error.message}`, null);
  }
}

/** Reads all givens. */
export function readGivens(givens: Readonly<Record<string, GivenValue>>): ReadonlyMap<string, Value> {
  return new Map(Object.entries(givens).map(([name, given]) => [name, readGiven(name, given)]));
}

/**
 * Evaluates a compiled expression to a number, a complex number or lists of them.
 *
 * @param seed fixes what is drawn at random; without it nothing may be
 * @throws KeyError where it has no value, or the value is a state or not finite
 */
export function evaluateKey(compiled: CompiledKey, values: ReadonlyMap<string, Value>, seed?: string): KeyResult {
  const { value, figures } = compiled.run(values, undefined, seed);
  const { unit, plain } = present(value, compiled);
  return { value: plain, ...(unit ? { unit } : {}), ...provenance(plain, figures) };
}

/** Evaluates an expression whose value is a state of light. @throws KeyError for every other value */
export function evaluateState(compiled: CompiledKey, values: ReadonlyMap<string, Value>): State {
  const { value } = compiled.run(values);
  if (isState(value)) return value;
  throw new KeyError(`The expression should give a state of light; it gives ${kindOf(value)}.`, whole(compiled));
}

/** How the figures in an expression were found: the least sure of them speaks for all. */
function provenance(value: PlainValue, figures: readonly ComparedValue[]): Omit<KeyResult, 'value' | 'unit'> {
  const [first] = figures;
  if (!first) return { method: 'algebra' };
  const weakest = figures.reduce(
    (least, each) => ((each.agreesTo ?? -1) < (least.agreesTo ?? -1) ? each : least),
    first,
  );
  const alone = figures.length === 1 && isSame(first.value, value);
  return {
    method: weakest.method,
    ...(weakest.dimension === undefined ? {} : { dimension: weakest.dimension }),
    ...(weakest.outsideWeight === undefined ? {} : { outsideWeight: weakest.outsideWeight }),
    ...(weakest.second && alone ? { second: { ...weakest.second, value: weakest.second.value as PlainValue } } : {}),
    ...(weakest.agreesTo === undefined ? {} : { agreesTo: weakest.agreesTo }),
  };
}

function isSame(figure: ComparedValue['value'], value: PlainValue): boolean {
  return JSON.stringify(figure) === JSON.stringify(value);
}

function whole(compiled: CompiledKey) {
  return { position: 0, length: compiled.expression.length };
}

function present(value: Value, compiled: CompiledKey): { plain: PlainValue; unit: string } {
  if (isUnit(value)) {
    const si = toSi(value);
    return { plain: finite(si.value, compiled), unit: si.unit };
  }
  return { plain: presentPlain(value, compiled), unit: '' };
}

function presentPlain(value: Value, compiled: CompiledKey): PlainValue {
  if (typeof value === 'number') return finite(value, compiled);
  if (isComplex(value)) {
    const re = finite(value.re, compiled);
    const im = finite(value.im, compiled);
    // What is imaginary by rounding alone is no complex number.
    return Math.abs(im) <= 4 * Number.EPSILON * Math.abs(re) ? re : { re, im };
  }
  if (isUnit(value)) {
    const si = toSi(value);
    if (si.unit === '') return finite(numberOfUnit(value), compiled);
    throw new KeyError('The entries of a list must be pure numbers; divide by the unit.', whole(compiled));
  }
  if (Array.isArray(value)) return (value as readonly Value[]).map((entry) => presentPlain(entry, compiled));
  throw new KeyError(`A key is a number or a list of numbers; this gives ${kindOf(value)}.`, whole(compiled));
}

function finite(value: number, compiled: CompiledKey): number {
  if (Number.isFinite(value)) return value === 0 ? 0 : value;
  throw new KeyError('The value is beyond the range of numbers, or is not one.', whole(compiled));
}
