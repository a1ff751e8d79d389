import * as library from 'mathjs';

/** What expressions use of the mathematics library. Parsing is included, evaluating is not. */
const used = [
  ...['abs', 'acos', 'acosh', 'add', 'arg', 'asin', 'asinh', 'atan', 'atan2', 'atanh', 'cbrt', 'ceil', 'combinations'],
  ...['complex', 'conj', 'cos', 'cosh', 'cot', 'csc', 'divide', 'dotDivide', 'dotMultiply', 'dotPow', 'equal', 'erf'],
  ...['exp', 'expm1', 'factorial', 'fix', 'floor', 'gamma', 'hypot', 'im', 'larger', 'largerEq', 'lgamma', 'log'],
  ...['log10', 'log1p', 'log2', 'max', 'mean', 'min', 'mod', 'multiply', 'parse', 'pow', 'prod', 're', 'round', 'sec'],
  ...['sign', 'sin', 'sinh', 'smaller', 'smallerEq', 'sqrt', 'square', 'subtract', 'sum', 'tan', 'tanh', 'to'],
  ...['unaryMinus', 'unaryPlus', 'unequal', 'unit'],
] as const;

const factories = library as unknown as Readonly<Record<string, library.FactoryFunctionMap>>;

/**
 * The mathematics library with only what expressions use. It is never handed to an expression: names are looked up in
 * our own tables.
 */
export const mathematics = library.create(
  Object.fromEntries(used.map((name) => [`${name}Dependencies`, factories[`${name}Dependencies`] ?? {}])),
  { matrix: 'Array' },
);

// The library's electronvolt is that of CODATA 2010; since 2019 it is exact.
const units = mathematics.Unit as unknown as { readonly UNITS: Record<string, { value: number } | undefined> };
for (const name of ['eV', 'electronvolt']) {
  const unit = units.UNITS[name];
  if (unit) unit.value = 1.602_176_634e-19;
}
