import type { State } from '../state';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { coefficientTable } from './coefficients';
import { quadratic, linear, type Form } from './form';
import { operatorNorm } from './photon-numbers';
import { wignerForms } from './quasi-distributions';

/** Polynomials of higher degree lose digits between their terms; they are left to the number basis. */
const HIGHEST_DEGREE = 24;

/**
 * One Gaussian of a Wigner function without sources, in x and p: exp(c + ½ quadratic + linear), real part taken.
 * With sources it is a polynomial times such a Gaussian; then the sources' couplings are kept as well.
 */
interface Plane {
  readonly xx: readonly [number, number];
  readonly xp: readonly [number, number];
  readonly pp: readonly [number, number];
  readonly x: readonly [number, number];
  readonly p: readonly [number, number];
  readonly c: readonly [number, number];
  readonly form: Form;
}

/** The form's two outer variables Re α and Im α become x and p: α = (x + ip)/√2. */
function planeOf(form: Form): Plane {
  const pair = (value: { re: number; im: number }, scale: number) => [value.re * scale, value.im * scale] as const;
  return {
    xx: pair(quadratic(form, 0, 0), 0.5),
    xp: pair(quadratic(form, 0, 1), 0.5),
    pp: pair(quadratic(form, 1, 1), 0.5),
    x: pair(linear(form, 0), Math.SQRT1_2),
    p: pair(linear(form, 1), Math.SQRT1_2),
    c: pair(form.c, 1),
    form,
  };
}

/** The polynomial's values at a point: the coefficient of the sources, its linear part moved by x and p. */
function polynomialAt({ form }: Plane, x: number, p: number): { readonly re: number; readonly im: number } {
  const count = form.sources.length;
  const inner: Form = {
    outer: 0,
    sources: form.sources,
    size: count,
    bRe: new Float64Array(count * count),
    bIm: new Float64Array(count * count),
    dRe: new Float64Array(count),
    dIm: new Float64Array(count),
    c: { re: 0, im: 0 },
  };
  const re = x * Math.SQRT1_2;
  const im = p * Math.SQRT1_2;
  for (let i = 0; i < count; i++) {
    const own = linear(form, i + 2);
    const alongX = quadratic(form, i + 2, 0);
    const alongP = quadratic(form, i + 2, 1);
    inner.dRe[i] = own.re + alongX.re * re + alongP.re * im;
    inner.dIm[i] = own.im + alongX.im * re + alongP.im * im;
    for (let j = 0; j < count; j++) {
      const b = quadratic(form, i + 2, j + 2);
      inner.bRe[i * count + j] = b.re;
      inner.bIm[i * count + j] = b.im;
    }
  }
  const table = coefficientTable(inner);
  const last = table.re.length - 1;
  return { re: table.re[last]!, im: table.im[last]! };
}

/** Whether single points of a Wigner function are quick to compute: Gaussians with polynomials of low degree at most. */
export const isQuickAtPoints = (state: State): boolean =>
  wignerForms(state).every((form) => form.sources.reduce((size, target) => size * (target + 1), 1) <= 9);

/**
 * The Wigner function on a grid, ħ = 1, vacuum variance 1/2.
 *
 * @param xs values of x, one for each column
 * @param ps values of p, one for each row
 * @returns values row by row, relative error about 1e-13 of the largest
 * @throws MethodDoesNotApply where the state is not a sum of Gaussians, or of polynomials of too high a degree
 */
export function wignerOnPoints(state: State, xs: Float64Array, ps: Float64Array): Float64Array {
  const { norm } = operatorNorm(state);
  const planes = wignerForms(state).map(planeOf);
  const degree = Math.max(0, ...planes.map(({ form }) => form.sources.reduce((sum, target) => sum + target, 0)));
  if (degree > HIGHEST_DEGREE) throw new MethodDoesNotApply('polynomials of too high a degree');
  const values = new Float64Array(xs.length * ps.length);
  for (const plane of planes) {
    if (plane.form.sources.length === 0) addGaussian(values, plane, xs, ps, 1 / (2 * norm));
    else addPolynomial(values, plane, xs, ps, 1 / (2 * norm));
  }
  return values;
}

function addGaussian(values: Float64Array, plane: Plane, xs: Float64Array, ps: Float64Array, scale: number): void {
  const { xx, xp, pp, x: dx, p: dp, c } = plane;
  const separable = xp[0] === 0 && xp[1] === 0;
  if (separable) {
    // exp of a sum of a function of x and one of p: the product of two lists.
    const column = exponentials(xs, xx, dx, [0, 0]);
    const row = exponentials(ps, pp, dp, c);
    for (let i = 0; i < ps.length; i++) {
      const a = row.re[i]! * scale;
      const b = row.im[i]! * scale;
      const start = i * xs.length;
      if (a === 0 && b === 0) continue;
      for (let j = 0; j < xs.length; j++) values[start + j]! += a * column.re[j]! - b * column.im[j]!;
    }
    return;
  }
  for (let i = 0; i < ps.length; i++) {
    const p = ps[i]!;
    for (let j = 0; j < xs.length; j++) {
      const x = xs[j]!;
      const re = c[0] + (xx[0] * x * x + pp[0] * p * p) / 2 + xp[0] * x * p + dx[0] * x + dp[0] * p;
      const im = c[1] + (xx[1] * x * x + pp[1] * p * p) / 2 + xp[1] * x * p + dx[1] * x + dp[1] * p;
      values[i * xs.length + j]! += scale * Math.exp(re) * Math.cos(im);
    }
  }
}

function exponentials(
  at: Float64Array,
  square: readonly [number, number],
  slope: readonly [number, number],
  constant: readonly [number, number],
): { readonly re: Float64Array; readonly im: Float64Array } {
  const re = new Float64Array(at.length);
  const im = new Float64Array(at.length);
  for (let k = 0; k < at.length; k++) {
    const v = at[k]!;
    const size = Math.exp(constant[0] + (square[0] * v * v) / 2 + slope[0] * v);
    const angle = constant[1] + (square[1] * v * v) / 2 + slope[1] * v;
    re[k] = size * Math.cos(angle);
    im[k] = size * Math.sin(angle);
  }
  return { re, im };
}

function addPolynomial(values: Float64Array, plane: Plane, xs: Float64Array, ps: Float64Array, scale: number): void {
  const { xx, xp, pp, x: dx, p: dp, c } = plane;
  for (let i = 0; i < ps.length; i++) {
    const p = ps[i]!;
    for (let j = 0; j < xs.length; j++) {
      const x = xs[j]!;
      const re = c[0] + (xx[0] * x * x + pp[0] * p * p) / 2 + xp[0] * x * p + dx[0] * x + dp[0] * p;
      const size = Math.exp(re);
      if (size === 0) continue;
      const im = c[1] + (xx[1] * x * x + pp[1] * p * p) / 2 + xp[1] * x * p + dx[1] * x + dp[1] * p;
      const polynomial = polynomialAt(plane, x, p);
      values[i * xs.length + j]! += scale * size * (polynomial.re * Math.cos(im) - polynomial.im * Math.sin(im));
    }
  }
}
