import { exponential, type Complex } from '../complex';
import type { Form } from './form';

/** Most entries of one table of coefficients. */
export const LARGEST_TABLE = 400_000;

/** How much larger than a rounding error the test perturbation is. */
const PERTURBATION = 2 ** -34;
const ROUNDING = 2 ** -53;
const BIG = 1e200;
/** One sample of the perturbed sum may be luckily small; this much is allowed for. */
const SAFETY = 16;

/** A table of coefficients with the sizes of its dimensions, and an estimate of the absolute error of each entry. */
export interface CoefficientTable {
  readonly sizes: readonly number[];
  readonly re: Float64Array;
  readonly im: Float64Array;
  readonly error: Float64Array;
}

/** Entries that the table of a form's sources takes. */
export const tableSize = (targets: readonly number[]): number =>
  targets.reduce((product, target) => product * (target + 1), 1);

/**
 * All coefficients of exp(½ sᵀB s + dᵀs + c) up to the targets, times Π √k_j! each.
 *
 * Formula: √k_i H(k) = d_i H(k − e_i) + Σ_j B_ij √(k_j − δ_ij) H(k − e_i − e_j), H(0) = e^c.
 * The error is measured, not bounded: the recurrence is run a second time with every step disturbed by known random
 * amounts far above rounding, and the difference is scaled down.
 * @param form without outer variables
 * @returns the table in row-major order of the sources
 * Source: multi-dimensional Hermite polynomials, Dodonov, Man'ko and Man'ko 1994.
 */
export function coefficientTable(form: Form): CoefficientTable {
  const sizes = form.sources.map((target) => target + 1);
  const total = tableSize(form.sources);
  const first = fill(form, sizes, total, 0);
  const second = fill(form, sizes, total, PERTURBATION);
  const error = new Float64Array(total);
  const scale = (ROUNDING / PERTURBATION) * SAFETY;
  // The exponent's own rounding makes a relative error of the whole.
  const relative = ROUNDING * (4 + 2 * Math.abs(form.c.re) + 2 * Math.abs(form.c.im));
  for (let k = 0; k < total; k++) {
    const difference = Math.hypot(second.re[k]! - first.re[k]!, second.im[k]! - first.im[k]!);
    error[k] = difference * scale + relative * Math.hypot(first.re[k]!, first.im[k]!);
  }
  return { sizes, re: first.re, im: first.im, error };
}

function fill(
  form: Form,
  sizes: readonly number[],
  total: number,
  disturbance: number,
): { readonly re: Float64Array; readonly im: Float64Array } {
  const count = sizes.length;
  const re = new Float64Array(total);
  const im = new Float64Array(total);
  // The size of e^c may be far below the range of numbers and come back in the sum: it is put on last.
  let logScale = form.c.re;
  const start = exponential({ re: 0, im: form.c.im });
  re[0] = start.re;
  im[0] = start.im;
  const strides = new Array<number>(count).fill(1);
  for (let i = count - 2; i >= 0; i--) strides[i] = strides[i + 1]! * sizes[i + 1]!;
  const index = new Int32Array(count);
  let seed = 12345;
  for (let position = 1; position < total; position++) {
    for (let axis = count - 1; axis >= 0; axis--) {
      index[axis]!++;
      if (index[axis]! < sizes[axis]!) break;
      index[axis] = 0;
    }
    // Reduce the last axis that can be reduced: its neighbours are close in memory.
    let axis = count - 1;
    while (index[axis] === 0) axis--;
    const before = position - strides[axis]!;
    let sumRe = form.dRe[axis]! * re[before]! - form.dIm[axis]! * im[before]!;
    let sumIm = form.dRe[axis]! * im[before]! + form.dIm[axis]! * re[before]!;
    const row = axis * count;
    for (let j = 0; j < count; j++) {
      const left = index[j]! - (j === axis ? 1 : 0);
      if (left <= 0) continue;
      const bRe = form.bRe[row + j]!;
      const bIm = form.bIm[row + j]!;
      if (bRe === 0 && bIm === 0) continue;
      const from = before - strides[j]!;
      const root = Math.sqrt(left);
      sumRe += root * (bRe * re[from]! - bIm * im[from]!);
      sumIm += root * (bRe * im[from]! + bIm * re[from]!);
    }
    let scale = 1 / Math.sqrt(index[axis]!);
    if (disturbance > 0) {
      seed = (Math.imul(seed, 1664525) + 1013904223) | 0;
      scale *= 1 + (seed / 2147483648) * disturbance;
    }
    re[position] = sumRe * scale;
    im[position] = sumIm * scale;
    if (Math.abs(sumRe) > BIG || Math.abs(sumIm) > BIG) {
      for (let k = 0; k <= position; k++) {
        re[k]! /= BIG;
        im[k]! /= BIG;
      }
      logScale += Math.log(BIG);
    }
  }
  if (logScale !== 0) {
    const factor = Math.exp(logScale);
    for (let k = 0; k < total; k++) {
      re[k]! *= factor;
      im[k]! *= factor;
    }
  }
  return { re, im };
}

/** The one coefficient of a form without outer variables that its targets name. */
export function lastCoefficient(form: Form): { readonly value: Complex; readonly error: number } {
  const table = coefficientTable(form);
  const last = table.re.length - 1;
  return { value: { re: table.re[last]!, im: table.im[last]! }, error: table.error[last]! };
}
