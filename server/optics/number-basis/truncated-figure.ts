import { abs } from '../complex';
import type { FigureEstimate } from '../moments/moment-figures';
import type { NumberState } from './one-mode';

/** A figure in a number basis, with the basis it took. */
export interface NumberFigure extends FigureEstimate {
  readonly dimension: number;
  readonly outsideWeight: number;
}

/** A figure with what its basis leaves out. */
export interface Truncated extends NumberFigure {
  /** The part of the error that a larger basis would take away. */
  readonly truncation: number;
}

/** A figure of a state of one mode. */
export function figureOf(
  state: NumberState,
  value: FigureEstimate['value'],
  error: number,
  truncation: number,
): Truncated {
  return { value, error, truncation, dimension: state.levels, outsideWeight: state.outside };
}

/** The largest entry of a value. */
export function sizeOf(value: FigureEstimate['value']): number {
  if (typeof value === 'number') return Math.abs(value);
  if ('re' in value) return abs(value);
  return value.reduce<number>((most, entry) => {
    if (typeof entry === 'number') return Math.max(most, Math.abs(entry));
    return Math.max(most, ...entry.map((cell) => (typeof cell === 'number' ? Math.abs(cell) : abs(cell))));
  }, 0);
}
