import { phase, type Complex } from '../complex';
import { logFactorial } from '../special/factorials';
import type { NumberState } from './one-mode';

const BIG = 1e200;

/**
 * ⟨x|n⟩ for n = 0 … levels − 1, ħ = 1.
 *
 * Formula: φ_{n+1} = √(2/(n+1)) x φ_n − √(n/(n+1)) φ_{n−1}, φ_0 = π^{−1/4} e^{−x²/2}; scaled where φ_0 underflows.
 */
export function hermiteFunctions(x: number, levels: number): Float64Array {
  const values = new Float64Array(levels);
  let logScale = -(x * x) / 2;
  let before = 0;
  let here = Math.PI ** -0.25;
  for (let n = 0; n < levels; n++) {
    values[n] = logScale < -745 ? 0 : here * Math.exp(logScale);
    const next = Math.sqrt(2 / (n + 1)) * x * here - Math.sqrt(n / (n + 1)) * before;
    before = here;
    here = next;
    if (Math.abs(here) > BIG) {
      here /= BIG;
      before /= BIG;
      logScale += Math.log(BIG);
    }
  }
  return values;
}

/** A value and an estimate of its absolute error. */
export interface NumberEstimate {
  readonly value: number;
  readonly error: number;
  /** The part of the error that a larger basis would take away. */
  readonly truncation: number;
}

const EPS = 2 ** -52;

/** Density of x_θ. */
export function densityAt(state: NumberState, x: number, theta: number): NumberEstimate {
  const { levels } = state;
  const phi = hermiteFunctions(x, levels);
  const rounding = EPS * (4 + Math.sqrt(levels) + x * x);
  if (state.kind === 'diagonal') {
    let value = 0;
    for (let n = 0; n < levels; n++) value += state.p[n]! * phi[n]! * phi[n]!;
    return { value, error: value * rounding, truncation: state.outside };
  }
  const turn = phase(-theta);
  const angle = Math.atan2(turn.im, turn.re);
  const cos = new Float64Array(levels);
  const sin = new Float64Array(levels);
  for (let n = 0; n < levels; n++) {
    const at = phase(angle * n);
    cos[n] = at.re * phi[n]!;
    sin[n] = at.im * phi[n]!;
  }
  if (state.kind === 'ket') {
    let re = 0;
    let im = 0;
    let size = 0;
    for (let n = 0; n < levels; n++) {
      re += state.re[n]! * cos[n]! - state.im[n]! * sin[n]!;
      im += state.re[n]! * sin[n]! + state.im[n]! * cos[n]!;
      size += (Math.abs(state.re[n]!) + Math.abs(state.im[n]!)) * Math.abs(phi[n]!);
    }
    const amplitude = Math.hypot(re, im);
    const noise = size * rounding + state.noise * Math.sqrt(levels);
    // What is outside would add at most √outside times the wave function there, of order 1.
    const lost = Math.sqrt(state.outside);
    return {
      value: amplitude * amplitude,
      error: 2 * amplitude * noise + noise * noise,
      truncation: 2 * amplitude * lost + lost * lost,
    };
  }
  let value = 0;
  let size = 0;
  for (let m = 0; m < levels; m++) {
    let re = 0;
    let im = 0;
    for (let n = 0; n < levels; n++) {
      const a = state.re[m * levels + n]!;
      const b = state.im[m * levels + n]!;
      re += a * cos[n]! + b * sin[n]!;
      im += b * cos[n]! - a * sin[n]!;
    }
    value += cos[m]! * re - sin[m]! * im;
    size += Math.abs(phi[m]!) * Math.hypot(re, im);
  }
  return { value, error: size * rounding + state.noise * levels, truncation: 2 * Math.sqrt(state.outside) };
}

/**
 * √(n!/(n+k)!) A^{k/2} e^{−A/2} L_n^{(k)}(A) for n = 0 … count − 1: matrix elements of displacements.
 *
 * Formula: three-term recurrence in n, scaled where the start underflows.
 * @param values where they go, if they need no array of their own
 */
export function laguerreFunctions(
  k: number,
  a: number,
  count: number,
  values: Float64Array = new Float64Array(count),
): Float64Array {
  let logScale = a === 0 ? (k === 0 ? 0 : -Infinity) : (k * Math.log(a) - logFactorial(k) - a) / 2;
  let before = 0;
  let here = 1;
  let factor = Math.exp(logScale);
  for (let n = 0; n < count; n++) {
    values[n] = here * factor;
    const next = ((2 * n + 1 + k - a) * here - Math.sqrt(n * (n + k)) * before) / Math.sqrt((n + 1) * (n + 1 + k));
    before = here;
    here = next;
    if (Math.abs(here) > BIG) {
      here /= BIG;
      before /= BIG;
      logScale += Math.log(BIG);
      factor = Math.exp(logScale);
    }
  }
  return values;
}

/**
 * Σ_mn ρ_mn ⟨n|X|m⟩ for X = D(ξ) (`alternating` false), or for X = D(ξ) with each |m⟩ times (−1)ᵐ (true).
 *
 * Formula: ⟨n|D(ξ)|m⟩ = √(m!/n!) ξ^{n−m} e^{−|ξ|²/2} L_m^{(n−m)}(|ξ|²) for n ≥ m; the other half by ξ → −ξ*.
 */
export function displacementTrace(
  state: NumberState,
  xi: Complex,
  alternating: boolean,
): { readonly re: number; readonly im: number; readonly error: number; readonly truncation: number } {
  const { levels } = state;
  const a = xi.re * xi.re + xi.im * xi.im;
  const angle = Math.atan2(xi.im, xi.re);
  let re = 0;
  let im = 0;
  let size = 0;
  const highest = state.kind === 'diagonal' ? 1 : levels;
  const shared = new Float64Array(levels);
  for (let k = 0; k < highest; k++) {
    const functions = laguerreFunctions(k, a, levels - k, shared);
    const turn = phase(angle * k);
    // ⟨m+k|D|m⟩ has e^{iθk}, ⟨m|D|m+k⟩ has (−1)ᵏ e^{−iθk}.
    const back = k % 2 === 0 ? 1 : -1;
    let upRe = 0;
    let upIm = 0;
    let downRe = 0;
    let downIm = 0;
    for (let m = 0; m + k < levels; m++) {
      const value = functions[m]!;
      if (value === 0) continue;
      const n = m + k;
      let aRe: number;
      let aIm: number;
      if (state.kind === 'diagonal') {
        aRe = state.p[m]!;
        aIm = 0;
      } else if (state.kind === 'ket') {
        aRe = state.re[m]! * state.re[n]! + state.im[m]! * state.im[n]!;
        aIm = state.im[m]! * state.re[n]! - state.re[m]! * state.im[n]!;
      } else {
        aRe = state.re[m * levels + n]!;
        aIm = state.im[m * levels + n]!;
      }
      // ρ_{m, n} ⟨n|X|m⟩ and ρ_{n, m} ⟨m|X|n⟩.
      const signUp = alternating && m % 2 === 1 ? -1 : 1;
      const signDown = (alternating && n % 2 === 1 ? -1 : 1) * back;
      upRe += signUp * value * aRe;
      upIm += signUp * value * aIm;
      if (k > 0) {
        downRe += signDown * value * aRe;
        downIm -= signDown * value * aIm;
      }
      size += Math.abs(value) * (Math.abs(aRe) + Math.abs(aIm));
    }
    re += upRe * turn.re - upIm * turn.im + downRe * turn.re + downIm * turn.im;
    im += upRe * turn.im + upIm * turn.re - downRe * turn.im + downIm * turn.re;
  }
  const error = size * EPS * (8 + Math.sqrt(levels) + a / 4) + state.noise * levels;
  // Without coherences what is outside counts once; with them the root of it may stand beside the diagonal.
  const truncation = state.kind === 'diagonal' ? state.outside : 2 * Math.sqrt(state.outside);
  return { re, im, error, truncation };
}

/** W(x, p) = Tr[ρ D(2α) (−1)ⁿ]/π with α = (x + ip)/√2. */
export function wignerAt(state: NumberState, x: number, p: number): NumberEstimate {
  const xi = { re: Math.SQRT2 * x, im: Math.SQRT2 * p };
  const { re, error, truncation } = displacementTrace(state, xi, true);
  return { value: re / Math.PI, error: error / Math.PI, truncation: truncation / Math.PI };
}

/** Q(α) = ⟨α|ρ|α⟩/π. */
export function husimiAt(state: NumberState, alpha: Complex): NumberEstimate {
  const { levels } = state;
  const mean = alpha.re * alpha.re + alpha.im * alpha.im;
  const angle = Math.atan2(alpha.im, alpha.re);
  const vRe = new Float64Array(levels);
  const vIm = new Float64Array(levels);
  for (let n = 0; n < levels; n++) {
    const logSize = (mean === 0 ? (n === 0 ? 0 : -Infinity) : n * Math.log(mean)) - logFactorial(n) - mean;
    const size = Math.exp(logSize / 2);
    const turn = phase(-angle * n);
    vRe[n] = size * turn.re;
    vIm[n] = size * turn.im;
  }
  const rounding = EPS * (8 + mean + levels / 8);
  if (state.kind === 'diagonal') {
    let value = 0;
    for (let n = 0; n < levels; n++) value += state.p[n]! * (vRe[n]! ** 2 + vIm[n]! ** 2);
    return { value: value / Math.PI, error: (value * rounding) / Math.PI, truncation: state.outside / Math.PI };
  }
  if (state.kind === 'ket') {
    let re = 0;
    let im = 0;
    let size = 0;
    for (let n = 0; n < levels; n++) {
      re += vRe[n]! * state.re[n]! - vIm[n]! * state.im[n]!;
      im += vRe[n]! * state.im[n]! + vIm[n]! * state.re[n]!;
      size += Math.hypot(vRe[n]!, vIm[n]!) * Math.hypot(state.re[n]!, state.im[n]!);
    }
    const amplitude = Math.hypot(re, im);
    const noise = size * rounding + state.noise;
    const lost = Math.sqrt(state.outside);
    return {
      value: (amplitude * amplitude) / Math.PI,
      error: (2 * amplitude * noise + noise * noise) / Math.PI,
      truncation: (2 * amplitude * lost + lost * lost) / Math.PI,
    };
  }
  let value = 0;
  let size = 0;
  for (let m = 0; m < levels; m++) {
    let re = 0;
    let im = 0;
    for (let n = 0; n < levels; n++) {
      // ⟨α|m⟩ ρ_mn ⟨n|α⟩.
      const a = state.re[m * levels + n]!;
      const b = state.im[m * levels + n]!;
      re += a * vRe[n]! + b * vIm[n]!;
      im += b * vRe[n]! - a * vIm[n]!;
    }
    value += vRe[m]! * re - vIm[m]! * im;
    size += Math.hypot(vRe[m]!, vIm[m]!) * Math.hypot(re, im);
  }
  return {
    value: value / Math.PI,
    error: (size * rounding + state.noise) / Math.PI,
    truncation: (2 * Math.sqrt(state.outside)) / Math.PI,
  };
}
