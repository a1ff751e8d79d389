import type { Complex } from '../complex';
import { poisson } from '../special/distributions';
import { loseDiagonal } from './number-maps';
import { elementOf, type NumberDiagonal, type NumberState } from './one-mode';
import { figureOf, type Truncated } from './truncated-figure';

const EPS = 2 ** -52;

/** Entries inside the basis are exact up to what a lossy or amplified state would still have got from outside. */
export const inside = (state: NumberState): number => state.outside;

/** P(n). */
export function probabilityOf(diagonal: NumberDiagonal, n: number): Truncated {
  const value = diagonal.p[n] ?? 0;
  const error = EPS * 16 * value + (diagonal.noise === 0 ? 0 : Math.min(diagonal.noise, noiseOf(diagonal, value)));
  return figureOf(diagonal, value, error, inside(diagonal));
}

/** Noise e of an amplitude is 2|ψ|e + e² of a probability. */
const noiseOf = (diagonal: NumberDiagonal, value: number): number =>
  2 * Math.sqrt(Math.abs(value)) * diagonal.noise + diagonal.noise;

/** Rounding of ρ_mn. */
export function elementError(state: NumberState, m: number, n: number): number {
  const { re, im } = elementOf(state, m, n);
  const size = Math.hypot(re, im);
  if (state.kind === 'ket') {
    const noise = state.noise + EPS * 4;
    return (
      16 * EPS * size +
      noise * (Math.sqrt(sizeAt(state, m)) + Math.sqrt(sizeAt(state, n))) * (state.noise > 0 ? 1 : EPS)
    );
  }
  return 16 * EPS * size + state.noise;
}

const sizeAt = (state: NumberState, n: number): number => elementOf(state, n, n).re;

/** P(m) of counts. */
export function countsOf(diagonal: NumberDiagonal, m: number, eta: number, dark: number): Truncated {
  const seen = loseDiagonal(diagonal, eta);
  if (dark === 0) return probabilityOf(seen, m);
  let value = 0;
  for (let k = 0; k <= Math.min(m, seen.levels - 1); k++) value += seen.p[k]! * poisson(m - k, dark);
  return figureOf(seen, value, 16 * EPS * value + seen.noise, seen.outside);
}

/** ρ_mn up to nmax. */
export function blockOf(basis: NumberState, nmax: number): Truncated {
  const side = nmax + 1;
  let error = 0;
  // How far the largest imaginary part stands out of its rounding.
  let imaginary = 0;
  const cells: Complex[][] = Array.from({ length: side }, (_, m) =>
    Array.from({ length: side }, (__, n) => {
      const cell = elementOf(basis, m, n);
      const own = elementError(basis, m, n);
      imaginary = Math.max(imaginary, Math.abs(cell.im) - Math.max(own, EPS * 4));
      error = Math.max(error, own);
      return cell;
    }),
  );
  const value = imaginary <= 0 ? cells.map((row) => row.map((cell) => cell.re)) : cells;
  return figureOf(basis, value, error, inside(basis));
}

/** The product of figures of two modes. */
export function timesOf(first: Truncated, second: Truncated): Truncated {
  const a = Number(first.value);
  const b = Number(second.value);
  return {
    value: a * b,
    error: first.error * b + second.error * a + EPS * a * b,
    truncation: first.truncation * b + second.truncation * a,
    dimension: Math.max(first.dimension, second.dimension),
    outsideWeight: first.outsideWeight + second.outsideWeight,
  };
}
