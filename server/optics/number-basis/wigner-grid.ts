import { MethodDoesNotApply } from '../method-does-not-apply';
import { elementOf, type NumberState } from './one-mode';
import { laguerreFunctions } from './wave-functions';

/** Most multiplications of one grid: about a third of a second. */
const MOST_WORK = 3e8;
/** Below this logarithm the first function of a recurrence is left to the one that rescales. */
const LOWEST_LOG = -500;

/**
 * W(x, p) on a grid of points, row by row of p, ħ = 1, vacuum variance 1/2.
 *
 * Formula: W = (1/π) Σ_k c_k Re[…] in Moyal functions of r² and powers of (x + ip)/r, one recurrence for each
 * coherence k = n − m and each distance; of states without coherences only k = 0 is there.
 * @throws MethodDoesNotApply where it would take too long
 */
export function wignerOnGrid(state: NumberState, xs: Float64Array, ps: Float64Array): Float64Array {
  const { levels } = state;
  const coherences: number[] = [];
  for (let k = 0; k < levels; k++) if (hasCoherence(state, k)) coherences.push(k);
  if (xs.length * ps.length * coherences.length * levels > MOST_WORK) {
    throw new MethodDoesNotApply('the Wigner function would take too long to draw in a number basis');
  }
  const values = new Float64Array(xs.length * ps.length);
  for (const k of coherences) {
    const length = levels - k;
    const re = new Float64Array(length);
    const im = new Float64Array(length);
    const scale = (k === 0 ? 1 : 2) / Math.PI;
    for (let m = 0; m < length; m++) {
      const element = elementOf(state, m, m + k);
      const sign = m % 2 === 0 ? scale : -scale;
      re[m] = element.re * sign;
      im[m] = element.im * sign;
    }
    const diagonal = new Float64Array(length);
    const inverse = new Float64Array(length);
    const below = new Float64Array(length);
    for (let m = 0; m < length; m++) {
      diagonal[m] = 2 * m + 1 + k;
      inverse[m] = 1 / Math.sqrt((m + 1) * (m + 1 + k));
      below[m] = Math.sqrt(m * (m + k));
    }
    const logFactorial = logOfFactorial(k);
    for (let i = 0; i < ps.length; i++) {
      const p = ps[i]!;
      for (let j = 0; j < xs.length; j++) {
        const x = xs[j]!;
        const square = x * x + p * p;
        // √(m!/(m+k)!) A^{k/2} e^{−A/2} L_m^{(k)}(A) with A = 2(x² + p²), from m = 0 up.
        const a = 2 * square;
        const logStart = (k === 0 ? 0 : (k * Math.log(a) - logFactorial) / 2) - square;
        let sumRe = 0;
        let sumIm = 0;
        if (logStart < LOWEST_LOG) {
          const functions = laguerreFunctions(k, a, length);
          for (let m = 0; m < length; m++) {
            sumRe += functions[m]! * re[m]!;
            sumIm += functions[m]! * im[m]!;
          }
        } else {
          let before = 0;
          let here = Math.exp(logStart);
          for (let m = 0; m < length; m++) {
            sumRe += here * re[m]!;
            sumIm += here * im[m]!;
            const next = ((diagonal[m]! - a) * here - below[m]! * before) * inverse[m]!;
            before = here;
            here = next;
          }
        }
        if (k === 0) values[i * xs.length + j]! += sumRe;
        else {
          const angle = k * Math.atan2(p, x);
          values[i * xs.length + j]! += sumRe * Math.cos(angle) - sumIm * Math.sin(angle);
        }
      }
    }
  }
  return values;
}

function hasCoherence(state: NumberState, k: number): boolean {
  if (state.kind === 'diagonal') return k === 0;
  for (let m = 0; m + k < state.levels; m++) {
    const { re, im } = elementOf(state, m, m + k);
    if (Math.abs(re) > 1e-18 || Math.abs(im) > 1e-18) return true;
  }
  return false;
}

function logOfFactorial(k: number): number {
  let sum = 0;
  for (let j = 2; j <= k; j++) sum += Math.log(j);
  return sum;
}
