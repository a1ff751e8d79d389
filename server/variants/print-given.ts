import type { Given } from '@shared/problems';
import type { GivenValue } from '@shared/variants';

/**
 * The value of a given as the statement prints it. The key uses the printed value, so that a student who reads it can
 * reach the key exactly.
 */
export function printGiven(given: Given, value: number): GivenValue {
  const printed = given.kind === 'derived' ? printFigures(value, given.significantFigures) : printPlain(given, value);
  return { value: Number(printed), printed, ...(given.unit === undefined ? {} : { unit: given.unit }) };
}

function printPlain(given: Exclude<Given, { kind: 'derived' }>, value: number): string {
  const decimals = decimalsOf(given);
  // Exponents are kept where decimals would lose or invent figures.
  return decimals === undefined ? withoutPlus(String(value)) : fixed(value, decimals);
}

/** Most decimals that are printed before an exponent is used. */
const mostDecimals = 12;

/** How many decimals all values of a given are printed with; undefined where an exponent serves better. */
function decimalsOf(given: Exclude<Given, { kind: 'derived' }>): number | undefined {
  switch (given.kind) {
    case 'fixed':
      return given.decimals ?? decimalsIn(given.value);
    case 'uniform':
      return widest([given.low, given.step]);
    case 'choice':
      return widest(given.values);
  }
}

function widest(values: readonly number[]): number | undefined {
  let most = 0;
  for (const value of values) {
    const decimals = decimalsIn(value);
    if (decimals === undefined) return undefined;
    most = Math.max(most, decimals);
  }
  return most;
}

/** The decimals of a number's shortest form: 2 for 0.35; undefined where that form has an exponent or too many. */
export function decimalsIn(value: number): number | undefined {
  const text = String(value);
  if (text.includes('e')) return undefined;
  const decimals = text.split('.')[1]?.length ?? 0;
  return decimals > mostDecimals ? undefined : decimals;
}

/**
 * A number to a number of significant figures: with decimals where it is neither very large nor very small, otherwise
 * with an exponent. The figures are kept where they are zeros: `0.7000`.
 */
export function printFigures(value: number, figures: number): string {
  if (value === 0) return '0';
  const exponent = Number(value.toExponential(figures - 1).split('e')[1]);
  if (exponent < -4 || exponent >= Math.max(figures, 6)) return withoutPlus(value.toExponential(figures - 1));
  const decimals = Math.max(0, figures - 1 - exponent);
  return fixed(Number(value.toPrecision(figures)), decimals);
}

function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  return Number(text) === 0 ? (0).toFixed(decimals) : text;
}

function withoutPlus(text: string): string {
  return text.replace('e+', 'e');
}
