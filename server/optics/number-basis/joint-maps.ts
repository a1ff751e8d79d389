import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import type { Channel } from '../state';
import { asLossAndGain } from './channels-on-numbers';
import type { Conditioned } from './conditions';
import type { NumberUnitary } from './displaced-numbers';
import {
  amplifyKets,
  applyToMode,
  checkJointSize,
  isEmptyKet,
  loseKets,
  productKet,
  sizeOfKets,
  filledIn,
  sliceOf,
  type JointKet,
} from './joint-ket';
import { factorOf } from './linear-algebra';
import { checkDensityLevels, diagonalOf, simplest, type NumberState } from './one-mode';
import { mixedIn } from './resolution';

const EPS = 2 ** -52;

/** Two modes that know nothing of each other. */
export interface FactoredState {
  readonly kind: 'factored';
  readonly first: NumberState;
  readonly second: NumberState;
}

/** Σ |ψ_k⟩⟨ψ_k| of joint kets, each with its weight in its norm. */
export interface Ensemble {
  readonly kind: 'ensemble';
  readonly kets: readonly JointKet[];
  /** Total photon numbers 0 … levels − 1 are kept. */
  readonly levels: number;
  readonly noise: number;
  readonly outside: number;
}

/** A state of two modes in a number basis: factored, or kets in blocks of constant total number. */
export type JointState = FactoredState | Ensemble;

/** A loss, an amplifier or both on one mode; `amplified` is asked only where levels are added. */
export function throughChannel(
  inner: Ensemble,
  channel: Channel,
  amplified: () => { readonly levels: number; readonly outside: number },
): Ensemble {
  const { eta, amplification } = asLossAndGain(channel);
  const lost = loseKets(inner.kets, channel.mode, eta);
  if (amplification === 1) return { ...inner, kets: lost };
  const { levels, outside } = amplified();
  const kets = amplifyKets(lost, channel.mode, amplification, levels);
  return { kind: 'ensemble', kets, levels, noise: inner.noise, outside: outside + inner.outside };
}

/** Refuses a displacement or squeezer of one mode that would take too long. */
export function checkUnitary(inner: Ensemble, levels: number): void {
  checkJointSize((inner.kets.length * levels * levels) / 2, inner.kets.length * inner.levels ** 2 * levels);
  if (inner.levels * levels > 4e6) throw new MethodDoesNotApply('the joint state would take too long');
}

/** A unitary of one mode on every ket. */
export function onMode(
  inner: Ensemble,
  mode: 1 | 2,
  unitary: NumberUnitary,
  levels: number,
  outside: number,
): Ensemble {
  return {
    kind: 'ensemble',
    kets: inner.kets.map((ket) => applyToMode(ket, mode, unitary, levels)),
    levels,
    noise: inner.noise + 4 * EPS,
    outside: outside + mixedIn(inner.outside),
  };
}

/** A factored state as kets in blocks. */
export function multipliedOut(
  joint: FactoredState,
  size: { readonly levels: number; readonly outside: number },
): Ensemble {
  const first = ketsOf(joint.first);
  const second = ketsOf(joint.second);
  const highest = joint.first.levels + joint.second.levels - 1;
  const levels = Math.min(size.levels, highest);
  let amplitudes = 0;
  for (const left of first.kets) for (const right of second.kets) amplitudes += filled(left) * filled(right);
  // Every ket holds a list of blocks, most of them empty.
  checkJointSize(Math.max(amplitudes, 4 * first.kets.length * second.kets.length * levels));
  const kets: JointKet[] = [];
  for (const left of first.kets) {
    for (const right of second.kets) {
      const ket = productKet(left, right, levels);
      if (!isEmptyKet(ket)) kets.push(ket);
    }
  }
  checkJointSize(sizeOfKets(kets));
  return {
    kind: 'ensemble',
    kets,
    levels,
    // What the factors leave over is rounding, not weight at high numbers.
    noise: joint.first.noise + joint.second.noise + first.rest + second.rest,
    outside: size.outside + joint.first.outside + joint.second.outside,
  };
}

interface Amplitudes {
  readonly re: Float64Array;
  readonly im: Float64Array;
}

function filled({ re, im }: Amplitudes): number {
  let count = 0;
  for (let n = 0; n < re.length; n++) if (re[n] !== 0 || im[n] !== 0) count++;
  return count;
}

/** A state of one mode as kets whose norms are their weights. */
export function ketsOf(state: NumberState): { readonly kets: readonly Amplitudes[]; readonly rest: number } {
  if (state.kind === 'ket') return { kets: [state], rest: 0 };
  if (state.kind === 'diagonal') {
    const kets: Amplitudes[] = [];
    for (let n = 0; n < state.levels; n++) {
      if (state.p[n] === 0) continue;
      const re = new Float64Array(n + 1);
      re[n] = Math.sqrt(state.p[n]!);
      kets.push({ re, im: new Float64Array(n + 1) });
    }
    return { kets, rest: 0 };
  }
  const { columns, rest } = factorOf(state.levels, state.re, state.im, 1e-16);
  return { kets: columns, rest };
}

/** The reduced state of one mode. */
export function outputOf(joint: JointState, mode: 1 | 2): NumberState {
  if (joint.kind === 'factored') return mode === 1 ? joint.first : joint.second;
  return gather(joint, mode, () => 1).state;
}

/**
 * The other mode where a detector on `mode` told something.
 *
 * @param weight its probability to tell it of n photons
 */
export function conditionedOn(joint: JointState, mode: 1 | 2, weight: (n: number) => number): Conditioned {
  if (joint.kind === 'factored') {
    const { p } = diagonalOf(mode === 1 ? joint.first : joint.second);
    const probability = p.reduce((sum, value, n) => sum + (value === 0 ? 0 : value * weight(n)), 0);
    if (!(probability > 0)) throw new StateVanishes('the condition has no weight in the number basis');
    return { state: mode === 1 ? joint.second : joint.first, probability: 1, reference: 1 };
  }
  return gather(joint, mode === 1 ? 2 : 1, weight);
}

/** Σ over the other mode's numbers, each with a weight, of what is left of the kept mode. */
function gather(joint: Ensemble, kept: 1 | 2, weight: (other: number) => number): Conditioned {
  const { levels, noise, outside } = joint;
  const other = kept === 1 ? 2 : 1;
  const slices: Amplitudes[] = [];
  let diagonal = true;
  for (const ket of joint.kets) {
    for (let n = 0; n < levels; n++) {
      const factor = weight(n);
      if (factor === 0) continue;
      const count = filledIn(ket, other, n);
      if (count === 0) continue;
      const slice = sliceOf(ket, other, n);
      if (count > 1) diagonal = false;
      const root = Math.sqrt(factor);
      if (factor !== 1) {
        for (let m = 0; m < slice.re.length; m++) {
          slice.re[m]! *= root;
          slice.im[m]! *= root;
        }
      }
      slices.push(slice);
    }
  }
  const [only, ...more] = slices;
  if (only !== undefined && more.length === 0) {
    const probability = only.re.reduce((sum, value, m) => sum + value * value + only.im[m]! ** 2, 0);
    return { state: { kind: 'ket', levels: only.re.length, ...only, noise, outside }, probability, reference: 1 };
  }
  if (diagonal) {
    const p = new Float64Array(levels);
    for (const { re, im } of slices) for (let m = 0; m < re.length; m++) p[m]! += re[m]! ** 2 + im[m]! ** 2;
    const probability = p.reduce((sum, value) => sum + value, 0);
    return { state: { kind: 'diagonal', levels, p, noise: 2 * noise, outside }, probability, reference: 1 };
  }
  checkDensityLevels(levels);
  const work = slices.reduce((sum, { re }) => sum + re.length ** 2, 0);
  checkJointSize(0, work);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  let probability = 0;
  for (const slice of slices) {
    const count = slice.re.length;
    for (let m = 0; m < count; m++) {
      const a = slice.re[m]!;
      const b = slice.im[m]!;
      if (a === 0 && b === 0) continue;
      probability += a * a + b * b;
      for (let n = 0; n < count; n++) {
        re[m * levels + n]! += a * slice.re[n]! + b * slice.im[n]!;
        im[m * levels + n]! += b * slice.re[n]! - a * slice.im[n]!;
      }
    }
  }
  const state = simplest({ kind: 'density', levels, re, im, noise: 2 * noise, outside });
  return { state, probability, reference: 1 };
}
