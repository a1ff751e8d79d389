import { abs2, complex, times } from '../complex';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import { channelsOf, type Channel, type State } from '../state';
import { displacement, squeezer, type NumberUnitary } from './displaced-numbers';
import {
  amplifyKets,
  applyToMode,
  checkJointSize,
  combineKets,
  isEmptyKet,
  loseKets,
  productKet,
  shiftKet,
  sizeOfKets,
  sliceOf,
  splitKets,
  twinKet,
  weightOf,
  type JointKet,
} from './joint-ket';
import { factorOf } from './linear-algebra';
import {
  asLossAndGain,
  beforeMixing,
  mixedIn,
  numberState,
  resolve,
  type Conditioned,
  type Resolution,
} from './number-states';
import { checkDensityLevels, diagonalOf, simplest, type NumberState } from './one-mode';

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

const EPS = 2 ** -52;

const cache = new WeakMap<State, Map<string, JointState>>();

/**
 * A joint state in a number basis.
 *
 * @throws MethodDoesNotApply where it would be too large
 */
export function jointState(state: State, resolution: Resolution): JointState {
  const key = `${resolution.logWeight}/${resolution.least}`;
  let known = cache.get(state);
  if (known === undefined) {
    known = new Map();
    cache.set(state, known);
  }
  let built = known.get(key);
  if (built === undefined) {
    built = build(state, resolution);
    known.set(key, built);
  }
  return built;
}

/** A description of the state that one factor becomes, so that the one-mode rules apply to it. */
function ofFactor(state: State, first: State, second: State, mode: 1 | 2, change: (factor: State) => State): State {
  const changed = change(mode === 1 ? first : second);
  return {
    kind: 'product',
    modes: 2,
    pure: state.pure,
    first: mode === 1 ? changed : first,
    second: mode === 2 ? changed : second,
  };
}

/** Operations on one mode of a product are carried into its factor. */
export function pushedIn(state: State): State {
  switch (state.kind) {
    case 'displaced':
    case 'squeeze':
    case 'phaseShift':
    case 'lose':
    case 'amplify': {
      const inner = pushedIn(state.state);
      if (inner.kind !== 'product') return state;
      return ofFactor(state, inner.first, inner.second, state.mode, (factor) => ({
        ...state,
        modes: 1,
        mode: 1,
        state: factor,
        pure: factor.pure && state.pure,
      }));
    }
    default:
      return state;
  }
}

function build(given: State, resolution: Resolution): JointState {
  const state = pushedIn(given);
  switch (state.kind) {
    case 'product':
      return {
        kind: 'factored',
        first: numberState(state.first, resolution),
        second: numberState(state.second, resolution),
      };
    case 'twinBeam': {
      const { levels, outside } = resolve(state, resolution);
      return { kind: 'ensemble', kets: [twinKet(state.r, state.direction, levels)], levels, noise: 0, outside };
    }
    case 'beamSplitter': {
      const inner = ensembleOf(state.state, resolution);
      const kets = splitKets(inner.kets, state.transmittance, state.direction);
      return { ...inner, kets, noise: inner.noise + 2 * EPS };
    }
    case 'phaseShift': {
      const inner = ensembleOf(state.state, resolution);
      return { ...inner, kets: inner.kets.map((ket) => shiftKet(ket, state.mode, state.direction)) };
    }
    case 'lose':
    case 'amplify': {
      const { channels, inner } = channelsOf(state);
      return channels.reduce(
        (ensemble, channel) => throughChannel(ensemble, channel, () => resolve(state, resolution)),
        ensembleOf(inner, resolution),
      );
    }
    case 'displaced': {
      const inner = ensembleOf(state.state, beforeMixing(resolution));
      const { levels, outside } = resolve(state, resolution);
      checkUnitary(inner, levels);
      if (abs2(state.alpha) === 0) return inner;
      return onMode(inner, state.mode, displacement(state.alpha, inner.levels, levels), levels, outside);
    }
    case 'squeeze': {
      const inner = ensembleOf(state.state, beforeMixing(resolution));
      const { levels, outside } = resolve(state, resolution);
      checkUnitary(inner, levels);
      if (state.r === 0) return inner;
      return onMode(inner, state.mode, squeezer(state.r, state.direction, inner.levels, levels), levels, outside);
    }
    case 'twoModeSqueeze': {
      // Two squeezers between two balanced splitters.
      const finer = beforeMixing(resolution);
      const inner = ensembleOf(state.state, finer);
      if (state.r === 0) return inner;
      const { levels, outside } = resolve(state, finer);
      checkUnitary(inner, levels);
      const mixed = { ...inner, kets: splitKets(inner.kets, 0.5, complex(1)) };
      // In between the two modes are as wide as the result is: the total bound holds for both.
      const one = onMode(
        mixed,
        1,
        squeezer(state.r, times(state.direction, -1), mixed.levels, levels),
        levels,
        outside,
      );
      const two = onMode(one, 2, squeezer(state.r, state.direction, one.levels, levels), levels, outside);
      return { ...two, kets: splitKets(two.kets, 0.5, complex(-1)) };
    }
    case 'mixture': {
      const parts = state.states
        .map((part, index) => ({ part, probability: state.probabilities[index] ?? 0 }))
        .filter(({ probability }) => probability > 0)
        .map(({ part, probability }) => ({ inner: ensembleOf(part, resolution), probability }));
      return {
        kind: 'ensemble',
        kets: parts.flatMap(({ inner, probability }) =>
          inner.kets.map((ket) => combineKets([ket], [complex(Math.sqrt(probability))], inner.levels)),
        ),
        levels: Math.max(...parts.map(({ inner }) => inner.levels)),
        noise: Math.max(...parts.map(({ inner }) => inner.noise)),
        outside: parts.reduce((sum, { inner, probability }) => sum + probability * inner.outside, 0),
      };
    }
    case 'superposition':
      return superposed(state, resolution);
    default:
      throw new MethodDoesNotApply('a state of one mode is not one of two');
  }
}

function throughChannel(
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

type JointSuperposition = Extract<State, { readonly kind: 'superposition' }>;

function superposed(state: JointSuperposition, resolution: Resolution): Ensemble {
  const attempt = (finer: Resolution) => {
    const parts = state.terms
      .filter((term) => abs2(term.amplitude) > 0)
      .map((term) => ({ inner: ensembleOf(term.state, finer), amplitude: term.amplitude }));
    const kets = parts.map(({ inner }) => {
      const [only, ...others] = inner.kets;
      if (only === undefined || others.length > 0) throw new MethodDoesNotApply('not a ket in the number basis');
      return only;
    });
    const levels = Math.max(1, ...parts.map(({ inner }) => inner.levels));
    const ket = combineKets(
      kets,
      parts.map(({ amplitude }) => amplitude),
      levels,
    );
    const reference = parts.reduce((sum, { amplitude }) => sum + abs2(amplitude), 0);
    const spread = parts.reduce((sum, { inner, amplitude }) => sum + Math.sqrt(abs2(amplitude) * inner.outside), 0);
    const noise = parts.reduce((most, { inner }) => Math.max(most, inner.noise), EPS);
    return { ket, levels, norm: weightOf(ket), reference, outside: spread * spread, noise };
  };
  let made = attempt(resolution);
  if (!(made.norm > 1e3 * made.noise * made.noise * made.reference)) {
    throw new StateVanishes('the norm vanishes to rounding');
  }
  if (made.outside / made.norm > 1.01 * Math.exp(resolution.logWeight)) {
    made = attempt({
      ...resolution,
      logWeight: resolution.logWeight + Math.log(made.norm / (made.reference * state.terms.length)),
    });
  }
  const scale = 1 / Math.sqrt(made.norm);
  return {
    kind: 'ensemble',
    kets: [combineKets([made.ket], [complex(scale)], made.levels)],
    levels: made.levels,
    noise: made.noise * scale * Math.sqrt(made.reference),
    outside: made.outside / made.norm,
  };
}

function checkUnitary(inner: Ensemble, levels: number): void {
  checkJointSize((inner.kets.length * levels * levels) / 2, inner.kets.length * inner.levels ** 2 * levels);
  if (inner.levels * levels > 4e6) throw new MethodDoesNotApply('the joint state would take too long');
}

function onMode(inner: Ensemble, mode: 1 | 2, unitary: NumberUnitary, levels: number, outside: number): Ensemble {
  return {
    kind: 'ensemble',
    kets: inner.kets.map((ket) => applyToMode(ket, mode, unitary, levels)),
    levels,
    noise: inner.noise + 4 * EPS,
    outside: outside + mixedIn(inner.outside),
  };
}

/** A joint state as kets in blocks; a factored one is multiplied out. */
export function ensembleOf(state: State, resolution: Resolution): Ensemble {
  const joint = jointState(state, resolution);
  if (joint.kind === 'ensemble') return joint;
  const known = multipliedOut.get(joint);
  if (known !== undefined) return known;
  const size = resolve(state, resolution);
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
  const made: Ensemble = {
    kind: 'ensemble',
    kets,
    levels,
    // What the factors leave over is rounding, not weight at high numbers.
    noise: joint.first.noise + joint.second.noise + first.rest + second.rest,
    outside: size.outside + joint.first.outside + joint.second.outside,
  };
  multipliedOut.set(joint, made);
  return made;
}

const multipliedOut = new WeakMap<FactoredState, Ensemble>();

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

/** The probability of a detector of efficiency η with dark counts to tell something of n photons. */
export const clickWeight = (n: number, eta: number, dark: number): number =>
  eta === 1 && n > 0 ? 1 : -Math.expm1((n === 0 ? 0 : n * Math.log1p(-eta)) - dark);

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
      const slice = sliceOf(ket, other, n);
      const count = filled(slice);
      if (count === 0) continue;
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
