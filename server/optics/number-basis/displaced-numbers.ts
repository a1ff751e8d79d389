import { multiply, phase, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';

const BIG = 1e150;
/** Longest column that is worked out. */
const LONGEST_COLUMN = 80_000;

/**
 * Solves a three-term recurrence for a normalised vector that is smallest at both ends: upwards from 0 to where it
 * starts to fall for good, downwards from far above, both joined there. Neither direction meets a solution that
 * grows against it, so that the tails keep their digits.
 *
 * @param count entries
 * @param turn where the two directions meet
 * @param ahead entry k + 1 from entries k and k − 1
 * @param back entry k − 1 from entries k and k + 1
 */
export function solveBothWays(
  count: number,
  turn: number,
  ahead: (k: number, here: number, before: number) => number,
  back: (k: number, here: number, after: number) => number,
): Float64Array {
  const v = new Float64Array(count);
  const meet = Math.min(Math.max(turn, 0), count - 1);
  v[0] = 1;
  for (let k = 0; k < meet; k++) {
    const next = ahead(k, v[k]!, k === 0 ? 0 : v[k - 1]!);
    v[k + 1] = next;
    if (Math.abs(next) > BIG) for (let j = 0; j <= k + 1; j++) v[j]! /= BIG;
  }
  const reached = v[meet]!;
  if (meet < count - 1) {
    let start = count - 1;
    let here = 1e-200;
    let after = 0;
    v[start] = here;
    while (start > meet) {
      const next = back(start, here, after);
      after = here;
      here = next;
      v[start - 1] = here;
      if (Math.abs(here) > BIG) {
        for (let j = start - 1; j < count; j++) v[j]! /= BIG;
        here /= BIG;
        after /= BIG;
      }
      start--;
    }
    const factor = reached / here;
    for (let k = meet; k < count; k++) v[k]! *= factor;
    v[meet] = reached;
  }
  let norm = 0;
  for (let k = 0; k < count; k++) norm += v[k]! * v[k]!;
  const scale = 1 / Math.sqrt(norm);
  for (let k = 0; k < count; k++) v[k]! *= scale;
  return v;
}

/**
 * Real parts ⟨m|D(a)|n⟩ for a real a > 0, m = 0 … levels − 1.
 *
 * Formula: D|n⟩ is the eigenvector of (a† − a)(a − a) with eigenvalue n:
 * a√(m+1) ψ_{m+1} = (m + a² − n) ψ_m − a√m ψ_{m−1}; sign from ⟨0|D|n⟩ ∝ (−1)ⁿ.
 */
export function displacedNumber(n: number, a: number, levels: number): Float64Array {
  const top = Math.max(levels, Math.ceil((Math.sqrt(n) + a + 9) ** 2));
  if (top > LONGEST_COLUMN) throw new MethodDoesNotApply('the displaced number states are too wide');
  const turn = Math.floor((Math.sqrt(n) + a) ** 2);
  const shift = a * a - n;
  const v = solveBothWays(
    top,
    turn,
    (m, here, before) => ((m + shift) * here - a * Math.sqrt(m) * before) / (a * Math.sqrt(m + 1)),
    (m, here, after) => ((m + shift) * here - a * Math.sqrt(m + 1) * after) / (a * Math.sqrt(m)),
  );
  if (n % 2 === 1) for (let m = 0; m < levels; m++) v[m] = -v[m]!;
  return v.subarray(0, levels);
}

/**
 * Real parts ⟨m|S(r)|n⟩ for r > 0, m = 0 … levels − 1.
 *
 * Formula: S|n⟩ is the eigenvector of b†b, b = a cosh r + a† sinh r, with eigenvalue n:
 * cs√((m+1)(m+2)) ψ_{m+2} = (n − c²m − s²(m+1)) ψ_m − cs√(m(m−1)) ψ_{m−2}; the first entry is positive.
 */
export function squeezedNumber(n: number, r: number, levels: number): Float64Array {
  const first = n % 2;
  const c = Math.cosh(r);
  const s = Math.sinh(r);
  const far = Math.ceil(n * Math.exp(2 * r) + 25 * Math.exp(2 * r) + 60);
  const top = Math.max(levels, far);
  if (!(top <= LONGEST_COLUMN)) throw new MethodDoesNotApply('the squeezed number states are too wide');
  const count = Math.ceil((top - first) / 2);
  const turn = Math.floor(((n + 0.5) * Math.exp(2 * r) - first) / 2);
  const cs = c * s;
  const middle = (m: number) => n - c * c * m - s * s * (m + 1);
  const half = solveBothWays(
    count,
    n < 2 ? 0 : turn,
    (k, here, before) => {
      const m = first + 2 * k;
      return (middle(m) * here - cs * Math.sqrt(m * (m - 1)) * before) / (cs * Math.sqrt((m + 1) * (m + 2)));
    },
    (k, here, after) => {
      const m = first + 2 * k;
      return (middle(m) * here - cs * Math.sqrt((m + 1) * (m + 2)) * after) / (cs * Math.sqrt(m * (m - 1)));
    },
  );
  const v = new Float64Array(levels);
  for (let k = 0; first + 2 * k < levels && k < count; k++) v[first + 2 * k] = half[k]!;
  return v;
}

/** A real matrix with phases e^{iφ(m−n)} that a unitary of one mode is in the number basis. */
export interface NumberUnitary {
  /** Column n: ⟨m|U|n⟩ without its phase. */
  readonly columns: readonly Float64Array[];
  /** e^{iφ}, or e^{iφ/2} of a squeezer, whose columns only have m − n even. */
  readonly turn: (difference: number) => Complex;
  readonly levels: number;
}

/** Integer powers of a unit number, found once each. */
function powersOf(direction: Complex): (exponent: number) => Complex {
  const angle = Math.atan2(direction.im, direction.re);
  if (direction.im === 0 && direction.re > 0) return () => ({ re: 1, im: 0 });
  return (exponent) => phase(angle * exponent);
}

/** D(α) from `from` levels to `levels` levels. */
export function displacement(alpha: Complex, from: number, levels: number): NumberUnitary {
  const a = Math.hypot(alpha.re, alpha.im);
  const columns = Array.from({ length: from }, (_, n) => displacedNumber(n, a, levels));
  return { columns, turn: powersOf(alpha), levels };
}

/** S(r e^{iφ}) from `from` levels to `levels` levels. */
export function squeezer(r: number, direction: Complex, from: number, levels: number): NumberUnitary {
  const columns = Array.from({ length: from }, (_, n) => squeezedNumber(n, r, levels));
  const powers = powersOf(direction);
  return { columns, turn: (difference) => powers(difference / 2), levels };
}

/** U|ψ⟩ for a vector of amplitudes. The phases e^{iφ(m−n)} are put on before and after the real matrix. */
export function applyUnitary(
  unitary: NumberUnitary,
  re: Float64Array,
  im: Float64Array,
): { readonly re: Float64Array; readonly im: Float64Array } {
  const { columns, turn, levels } = unitary;
  const outRe = new Float64Array(levels);
  const outIm = new Float64Array(levels);
  // Of a squeezer only m − n even occurs, and only even differences have a phase: the parities go apart.
  for (let parity = 0; parity < 2; parity++) {
    const sumRe = new Float64Array(levels);
    const sumIm = new Float64Array(levels);
    let any = false;
    for (let n = parity; n < re.length; n += 2) {
      if (re[n] === 0 && im[n] === 0) continue;
      any = true;
      const weight = multiply({ re: re[n]!, im: im[n]! }, turn(parity - n));
      const column = columns[n]!;
      for (let m = 0; m < levels; m++) {
        const value = column[m]!;
        sumRe[m]! += value * weight.re;
        sumIm[m]! += value * weight.im;
      }
    }
    if (!any) continue;
    for (let m = 0; m < levels; m++) {
      if (sumRe[m] === 0 && sumIm[m] === 0) continue;
      const after = turn(m - parity);
      outRe[m]! += sumRe[m]! * after.re - sumIm[m]! * after.im;
      outIm[m]! += sumRe[m]! * after.im + sumIm[m]! * after.re;
    }
  }
  return { re: outRe, im: outIm };
}
