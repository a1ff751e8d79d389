import type { PrintedGiven } from '@shared/marking';
import { givenInFormula, type PrintedGivens } from '../../ui/formula-text/printed-given';

/** Givens by name, as formula text prints `\val{name}`. */
export function givensByName(givens: readonly PrintedGiven[]): PrintedGivens {
  return Object.fromEntries(givens.map(({ name, printed, unit }) => [name, { printed, unit }]));
}

/** Givens in a line: `r = 0.60, η = 0.85`, as formulas. */
export function givensAsFormula(givens: readonly PrintedGiven[]): string {
  return givens
    .map(({ name, symbol, printed, unit }) => `$${symbol} = ${givenInFormula(name, { printed, unit })}$`)
    .join(', ');
}
