import { abs2, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import type { FigureEstimate } from '../moments/moment-figures';
import type { State } from '../state';
import { checkJointSize, innerProductOf, sliceOf, weightOf, type JointKet } from './joint-ket';
import { ketsOf } from './joint-maps';
import { singularValues } from './linear-algebra';
import { ensembleOf, jointState, numberState } from './number-states';
import { asKet } from './one-mode-maps';
import { beforeMixing, type Resolution } from './resolution';
import { diagonalOf, simplest, type NumberState } from './one-mode';
import { transposedNorm } from './transposed-norm';

const EPS = 2 ** -52;
/** Largest matrices whose eigenvalues or singular values are found here in time. */
const MOST_COLUMNS = 220;

interface Truncated extends FigureEstimate {
  readonly truncation: number;
  readonly dimension: number;
  readonly outsideWeight: number;
}

const result = (
  value: FigureEstimate['value'],
  error: number,
  truncation: number,
  dimension: number,
  outsideWeight: number,
): Truncated => ({ value, error, truncation, dimension, outsideWeight });

/** Tr ρ². */
export function purityOf(state: NumberState): Truncated {
  let value = 0;
  if (state.kind === 'ket') value = diagonalOf(state).p.reduce((sum, p) => sum + p, 0) ** 2;
  else if (state.kind === 'diagonal') value = state.p.reduce((sum, p) => sum + p * p, 0);
  else for (let k = 0; k < state.re.length; k++) value += state.re[k]! ** 2 + state.im[k]! ** 2;
  const rounding = EPS * 32 * value + 2 * state.noise * Math.sqrt(state.levels);
  return result(value, rounding, 2 * state.outside, state.levels, state.outside);
}

/** −Σ λ ln λ of the eigenvalues, found as singular values of a factor of ρ. */
export function entropyOf(given: NumberState): Truncated {
  const state = simplest(given);
  const { levels, outside, noise } = state;
  if (state.kind === 'ket') return result(0, 0, 0, levels, outside);
  const weights = state.kind === 'diagonal' ? Array.from(state.p) : eigenvaluesOf(state);
  // The largest weight, where it is nearly 1, has its logarithm from what the others leave.
  const first = weights.indexOf(Math.max(...weights));
  let rest = 0;
  let value = 0;
  let rounding = 0;
  weights.forEach((weight, index) => {
    if (index === first || !(weight > 0)) return;
    rest += weight;
    value -= weight * Math.log(weight);
    rounding += EPS * weight * (8 + Math.abs(Math.log(weight)));
  });
  const largest = weights[first] ?? 0;
  if (largest > 0) {
    const part = rest < 0.5 ? -(1 - rest) * Math.log1p(-rest) : -largest * Math.log(largest);
    value += part;
    rounding += EPS * 8 * part;
  }
  const lost = outside > 0 ? outside * (1 - Math.log(outside) + Math.log(levels)) : 0;
  const noisy = noise > 0 ? noise * Math.sqrt(levels) * (1 - Math.log(noise)) : 0;
  const left = state.kind === 'density' ? 1e-16 * 40 : 0;
  return result(value, rounding + noisy + left, lost, levels, outside);
}

function eigenvaluesOf(state: NumberState): number[] {
  const { kets } = ketsOf(state);
  checkColumns(kets.length);
  return singularValues(copies(kets)).map((s) => s * s);
}

function checkColumns(count: number): void {
  if (count > MOST_COLUMNS) {
    throw new MethodDoesNotApply(`eigenvalues of a matrix of ${count} columns would take too long`);
  }
}

const copies = (kets: readonly { readonly re: Float64Array; readonly im: Float64Array }[]) => {
  const length = Math.max(0, ...kets.map(({ re }) => re.length));
  return kets.map(({ re, im }) => {
    const wideRe = new Float64Array(length);
    const wideIm = new Float64Array(length);
    wideRe.set(re);
    wideIm.set(im);
    return { re: wideRe, im: wideIm };
  });
};

/** (Tr √(√ρ σ √ρ))². */
export function fidelityOf(givenLeft: NumberState, givenRight: NumberState): Truncated {
  const left = simplest(givenLeft);
  const right = simplest(givenRight);
  const dimension = Math.max(left.levels, right.levels);
  const outside = left.outside + right.outside;
  const noise = left.noise + right.noise;
  if (left.kind === 'ket' || right.kind === 'ket') {
    const [ket, other] = left.kind === 'ket' ? [left, right] : [right, left];
    if (ket.kind !== 'ket') throw new MethodDoesNotApply('neither state is a ket');
    const { kets } = ketsOf(other);
    let value = 0;
    for (const part of kets) value += abs2(innerOf(part, ket));
    const rounding = EPS * 32 * value + 4 * noise * Math.sqrt(value) + 4 * noise * noise;
    return result(value, rounding, crossing(value, left, right), dimension, outside);
  }
  if (left.kind === 'diagonal' && right.kind === 'diagonal') {
    let root = 0;
    for (let n = 0; n < Math.min(left.levels, right.levels); n++) root += Math.sqrt(left.p[n]! * right.p[n]!);
    const lost = Math.sqrt(left.outside * right.outside);
    const tail = tailOf(left, right);
    return result(root * root, EPS * 16 * root * root, 2 * root * (lost + tail), dimension, outside);
  }
  const value = traceNorm(ketsOf(left).kets, ketsOf(right).kets) ** 2;
  // Roots of what was left over in factoring the two matrices.
  const floor = 2 * Math.sqrt(value) * 1e-8 * Math.sqrt(Math.min(1, left.outside + right.outside + 1e-16));
  return result(
    value,
    EPS * 64 * value + floor + 4 * noise,
    2 * Math.sqrt(value) * tailOf(left, right) + Math.sqrt(left.outside * right.outside) * 4 + 4 * outside,
    dimension,
    outside,
  );
}

/** An overlap of tails: at most the geometric mean of their weights. */
function crossing(value: number, left: NumberState, right: NumberState): number {
  const tails = Math.sqrt(left.outside * right.outside) + tailOf(left, right);
  return 2 * Math.sqrt(value) * tails + tails * tails;
}

/** Where only one of two distributions reaches on, the rest of the sum is at most the root of what is outside. */
function tailOf(left: NumberState, right: NumberState): number {
  const shorter = left.levels <= right.levels ? left : right;
  const longer = shorter === left ? right : left;
  let beyond = longer.outside;
  const { p } = diagonalOf(longer);
  for (let n = shorter.levels; n < longer.levels; n++) beyond += p[n]!;
  return Math.sqrt(shorter.outside * beyond);
}

function innerOf(
  bra: { readonly re: Float64Array; readonly im: Float64Array },
  ket: { readonly re: Float64Array; readonly im: Float64Array },
): Complex {
  let re = 0;
  let im = 0;
  const count = Math.min(bra.re.length, ket.re.length);
  for (let n = 0; n < count; n++) {
    re += bra.re[n]! * ket.re[n]! + bra.im[n]! * ket.im[n]!;
    im += bra.re[n]! * ket.im[n]! - bra.im[n]! * ket.re[n]!;
  }
  return { re, im };
}

type Vectors = readonly { readonly re: Float64Array; readonly im: Float64Array }[];

/** ‖A†B‖₁ of two lists of columns. */
function traceNorm(left: Vectors, right: Vectors): number {
  checkColumns(Math.min(left.length, right.length));
  checkColumns(Math.max(left.length, right.length) / 4);
  const [outer, inner] = left.length <= right.length ? [left, right] : [right, left];
  const columns = outer.map((a) => {
    const re = new Float64Array(inner.length);
    const im = new Float64Array(inner.length);
    inner.forEach((b, k) => {
      const product = innerOf(b, a);
      re[k] = product.re;
      im[k] = product.im;
    });
    return { re, im };
  });
  return singularValues(columns).reduce((sum, s) => sum + s, 0);
}

/** ⟨ψ|φ⟩ of pure states of one or two modes. */
export function overlapOf(left: State, right: State, resolution: Resolution): Truncated {
  if (left.modes === 1) {
    const psi = asKet(numberState(left, resolution));
    const phi = asKet(numberState(right, resolution));
    const value = innerOf(psi, phi);
    const noise = psi.noise + phi.noise;
    let spread = 0;
    for (let n = 0; n < Math.min(psi.levels, phi.levels); n++) {
      spread += Math.hypot(psi.re[n]!, psi.im[n]!) * Math.hypot(phi.re[n]!, phi.im[n]!);
    }
    return result(
      value,
      EPS * 16 * spread + 4 * noise,
      Math.sqrt(psi.outside * phi.outside) + tailOf(psi, phi),
      Math.max(psi.levels, phi.levels),
      psi.outside + phi.outside,
    );
  }
  const psi = ensembleOf(left, resolution);
  const phi = ensembleOf(right, resolution);
  const [one] = psi.kets;
  const [two] = phi.kets;
  if (one === undefined || two === undefined || psi.kets.length + phi.kets.length !== 2) {
    throw new MethodDoesNotApply('not kets in the number basis');
  }
  return result(
    innerProductOf(one, two),
    EPS * 32 + 4 * (psi.noise + phi.noise),
    Math.sqrt(psi.outside * phi.outside) + Math.max(psi.outside, phi.outside),
    Math.max(psi.levels, phi.levels),
    psi.outside + phi.outside,
  );
}

/** Tr ρ² of two modes. */
export function jointPurity(state: State, resolution: Resolution): Truncated {
  const joint = jointState(state, resolution);
  if (joint.kind === 'factored') {
    const one = purityOf(joint.first);
    const two = purityOf(joint.second);
    const [a, b] = [Number(one.value), Number(two.value)];
    return result(
      a * b,
      one.error * b + two.error * a,
      one.truncation * b + two.truncation * a,
      Math.max(one.dimension, two.dimension),
      one.outsideWeight + two.outsideWeight,
    );
  }
  const { kets, levels, outside, noise } = joint;
  checkJointSize(0, (kets.length ** 2 * levels ** 2) / 4);
  let value = 0;
  for (let j = 0; j < kets.length; j++) {
    value += weightOf(kets[j]!) ** 2;
    for (let k = j + 1; k < kets.length; k++) value += 2 * abs2(innerProductOf(kets[j]!, kets[k]!));
  }
  return result(value, EPS * 64 * value + 8 * noise, 2 * outside, levels, outside);
}

/** Fidelity of two modes. An amplitude that is left out of one state shows in proportion to itself. */
export function jointFidelity(left: State, right: State, resolution: Resolution): Truncated {
  const finer = beforeMixing(resolution);
  const [one, two] = [ensembleOf(left, finer), ensembleOf(right, finer)].sort((a, b) => a.kets.length - b.kets.length);
  if (one === undefined || two === undefined) throw new MethodDoesNotApply('no states');
  const dimension = Math.max(one.levels, two.levels);
  const outside = one.outside + two.outside;
  const noise = one.noise + two.noise;
  const work = (one.kets.length * two.kets.length * dimension ** 2) / 2;
  checkJointSize(0, work);
  if (one.kets.length === 1 || two.kets.length === 1) {
    let value = 0;
    for (const a of one.kets) for (const b of two.kets) value += abs2(innerProductOf(a, b));
    const hidden = 2 * Math.sqrt(value * outside) + outside;
    return result(value, EPS * 64 * value + 8 * noise, hidden, dimension, outside);
  }
  checkColumns(Math.min(one.kets.length, two.kets.length));
  const columns = one.kets.map((a) => {
    const re = new Float64Array(two.kets.length);
    const im = new Float64Array(two.kets.length);
    two.kets.forEach((b, k) => {
      const product = innerProductOf(b, a);
      re[k] = product.re;
      im[k] = product.im;
    });
    return { re, im };
  });
  const root = singularValues(columns).reduce((sum, s) => sum + s, 0);
  return result(root * root, EPS * 256 * root * root + 16 * noise, 4 * root * Math.sqrt(outside), dimension, outside);
}

/** log₂‖ρ^{T₂}‖₁: of a ket from its Schmidt coefficients, of an ensemble block by block of what is coupled. */
export function logNegativityOf(state: State, resolution: Resolution): Truncated {
  const joint = jointState(state, resolution);
  if (joint.kind === 'factored') {
    const levels = Math.max(joint.first.levels, joint.second.levels);
    return result(0, 0, 0, levels, joint.first.outside + joint.second.outside);
  }
  const { kets, levels, outside, noise } = joint;
  const only = kets[0];
  if (kets.length === 1 && only !== undefined) {
    const root = schmidtSum(only, levels);
    // ‖ρ^{T₂}‖₁ = (Σσ)²; a weight w outside may hide √w in each coefficient.
    return result(
      2 * Math.log2(root),
      (EPS * 32 * levels + 4 * noise * levels) / Math.LN2,
      (4 * Math.sqrt(outside)) / Math.LN2,
      levels,
      outside,
    );
  }
  const norm = transposedNorm(kets, levels);
  return result(
    Math.log2(norm),
    (EPS * 64 * levels + 8 * noise * levels) / Math.LN2 / norm,
    (4 * Math.sqrt(outside)) / Math.LN2,
    levels,
    outside,
  );
}

function schmidtSum(ket: JointKet, levels: number): number {
  const columns = Array.from({ length: levels }, (_, n) => {
    const { re, im } = sliceOf(ket, 2, n);
    const wideRe = new Float64Array(levels);
    const wideIm = new Float64Array(levels);
    wideRe.set(re);
    wideIm.set(im);
    return { re: wideRe, im: wideIm };
  }).filter(({ re, im }) => re.some((x) => x !== 0) || im.some((x) => x !== 0));
  // Columns without a common row are already orthogonal.
  const seen = new Uint8Array(levels);
  let disjoint = true;
  for (const { re, im } of columns) {
    for (let k = 0; k < levels; k++) {
      if (re[k] === 0 && im[k] === 0) continue;
      if (seen[k]) disjoint = false;
      seen[k] = 1;
    }
  }
  if (disjoint) {
    return columns.reduce((sum, { re, im }) => sum + Math.sqrt(re.reduce((s, x, k) => s + x * x + im[k]! ** 2, 0)), 0);
  }
  checkColumns(columns.length);
  return singularValues(columns).reduce((sum, s) => sum + s, 0);
}
