import { abs2, conjugate, multiply, phase, times, type Complex } from '../complex';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import { DEFAULT_LOG_WEIGHT, levelsFor } from '../photon-bounds';
import { binomialProbability, geometric, poisson } from '../special/distributions';
import { channelChain, channelsOf, isChannel, type Channel, type State } from '../state';
import { applyUnitary, displacement, squeezer, type NumberUnitary } from './displaced-numbers';
import { amplifyDensity, amplifyDiagonal, logAdded, loseDensity, loseDiagonal } from './number-maps';
import {
  checkDensityLevels,
  densityOf,
  diagonalOf,
  simplest,
  type NumberDensity,
  type NumberDiagonal,
  type NumberKet,
  type NumberState,
} from './one-mode';
import { clickWeight, conditionedOn, jointState, outputOf } from './joint-states';

/** How finely a state is to be built. */
export interface Resolution {
  /** ln of the weight that may be left outside. */
  readonly logWeight: number;
  /** Levels that are wanted at least, for figures far out. */
  readonly least: number;
}

export const defaultResolution: Resolution = { logWeight: DEFAULT_LOG_WEIGHT, least: 1 };

/**
 * How finely a state is to be built that a displacement or squeezer then mixes over all numbers: an amplitude that is
 * left out shows in the result in proportion to itself, not to its square.
 */
export const beforeMixing = ({ logWeight }: Resolution): Resolution => ({ logWeight: 2 * logWeight, least: 1 });

/** The weight that may be hidden in a result by what was left outside before it was mixed. */
export const mixedIn = (outside: number): number => Math.sqrt(outside);

const EPS = 2 ** -52;

const cache = new WeakMap<State, Map<string, NumberState>>();

/**
 * A state of one mode in a number basis whose levels follow from a bound on the weight outside.
 *
 * @throws MethodDoesNotApply where the basis would be too large
 */
export function numberState(state: State, resolution: Resolution = defaultResolution): NumberState {
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

/** Levels of a state at a resolution, with the bound on the weight outside. */
export function resolve(
  state: State,
  { logWeight, least }: Resolution,
): { readonly levels: number; readonly outside: number } {
  // Entries that stand alone need no more levels than are asked for.
  if (logWeight >= 0) return { levels: least, outside: 0 };
  const { levels, outsideWeight } = levelsFor(state, logWeight);
  return { levels: Math.max(levels, least), outside: outsideWeight };
}

function build(state: State, resolution: Resolution): NumberState {
  switch (state.kind) {
    case 'fock': {
      const re = new Float64Array(state.n + 1);
      re[state.n] = 1;
      return { kind: 'ket', levels: state.n + 1, re, im: new Float64Array(state.n + 1), noise: 0, outside: 0 };
    }
    case 'coherent':
      return coherentKet(state.alpha, resolve(state, resolution));
    case 'thermal': {
      const { levels, outside } = resolve(state, resolution);
      const p = Float64Array.from({ length: levels }, (_, n) => geometric(n, state.nbar));
      return { kind: 'diagonal', levels, p, noise: 0, outside };
    }
    case 'squeezed':
      return squeezedKet(state.r, state.direction, resolve(state, resolution));
    case 'cat':
      return catKet(state.alpha, state.theta, resolve(state, resolution));
    case 'displaced': {
      if (state.state.kind === 'squeezed')
        return displacedSqueezedKet(state.alpha, state.state, resolve(state, resolution));
      const inner = numberState(state.state, beforeMixing(resolution));
      if (abs2(state.alpha) === 0) return inner;
      const { levels, outside } = resolve(state, resolution);
      checkUnitaryWork(inner, levels);
      return transform(inner, displacement(state.alpha, inner.levels, levels), outside);
    }
    case 'squeeze': {
      const inner = numberState(state.state, beforeMixing(resolution));
      if (state.r === 0) return inner;
      const { levels, outside } = resolve(state, resolution);
      checkUnitaryWork(inner, levels);
      return transform(inner, squeezer(state.r, state.direction, inner.levels, levels), outside);
    }
    case 'mixture':
      return mix(
        state.states.map((part, index) => ({ part, probability: state.probabilities[index] ?? 0 })),
        resolution,
      );
    case 'phaseAveraged':
      return diagonalOf(numberState(state.state, resolution));
    case 'dephased':
      return dephase(numberState(state.state, resolution), state.sigma);
    case 'photonAdded':
    case 'photonSubtracted':
      return conditioned(resolution, (finer) => movePhotons(state, finer));
    case 'phaseShift':
      return shift(numberState(state.state, resolution), state.direction);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { channel, inner: source } = channelChain(state);
      const inner = simplest(numberState(source, resolution));
      const turned = channel.rotation === 0 ? inner : shift(inner, phase(channel.rotation));
      return applyChannel(turned, channel, () => resolve(state, resolution));
    }
    case 'output':
    case 'heralded':
    case 'clicked': {
      const { joint, kept, weight } = detection(state);
      const before =
        state.kind === 'output'
          ? outputOf(jointState(joint, resolution), state.mode)
          : conditioned(resolution, (finer) => conditionedOn(jointState(joint, finer), state.mode, weight));
      if (kept === undefined) return before;
      return applyChannel(simplest(before), kept, () => resolve(state, resolution));
    }
    case 'superposition':
      return conditioned(resolution, (finer) => {
        const parts = state.terms
          .filter((term) => abs2(term.amplitude) > 0)
          .map((term) => ({ amplitude: term.amplitude, ket: asKet(numberState(term.state, finer)) }));
        return superpose(parts);
      });
    default:
      throw new MethodDoesNotApply('a state of two modes is not one of one');
  }
}

type Detected = Extract<State, { readonly kind: 'output' | 'heralded' | 'clicked' }>;

/**
 * What is left to do for the state of one mode of two. Losses and amplifiers on the mode that is left commute with what
 * is done to the other; those on the other change what its detector tells of a photon number.
 */
function detection(state: Detected): {
  readonly joint: State;
  /** The channel on the mode that is left. */
  readonly kept: Channel | undefined;
  /** What the detector tells of n photons: its probability. */
  readonly weight: (n: number) => number;
} {
  const { channels, inner } = isChannel(state.state) ? channelsOf(state.state) : { channels: [], inner: state.state };
  const left = state.kind === 'output' ? state.mode : state.mode === 1 ? 2 : 1;
  const kept = channels.find(({ mode }) => mode === left);
  const { eta, amplification } = asLossAndGain(
    channels.find(({ mode }) => mode !== left) ?? { gain: 1, noise: 0, rotation: 0, mode: state.mode },
  );
  const joint = inner;
  if (state.kind === 'output') return { joint, kept, weight: () => 1 };
  if (state.kind === 'heralded') {
    if (eta === 1 && amplification === 1) return { joint, kept, weight: (n) => (n === state.n ? 1 : 0) };
    return { joint, kept, weight: (n) => countedAs(state.n, n, eta, amplification) };
  }
  // ⟨(1 − λ)ⁿ⟩ behind an amplifier is 1/(1 + (G − 1)λ) times ⟨(1 − λ')ⁿ⟩ before it, λ' = Gλ/(1 + (G − 1)λ).
  const spread = 1 + (amplification - 1) * state.eta;
  const seen = (eta * amplification * state.eta) / spread;
  return { joint, kept, weight: (n) => clickWeight(n, Math.min(1, seen), state.dark + Math.log(spread)) };
}

/** The probability that n photons are m behind a loss and an amplifier. */
function countedAs(m: number, n: number, eta: number, gain: number): number {
  if (gain === 1) return n < m ? 0 : binomialProbability(n, m, eta);
  let sum = 0;
  for (let k = 0; k <= Math.min(m, n); k++)
    sum += (binomialProbability(n, k, eta) * binomialProbability(m, k, 1 / gain)) / gain;
  return sum;
}

const LIKELY_LOG_PROBABILITY = Math.log(0.01);

/** A state before it is normalised, and the weight to divide by. */
export interface Conditioned {
  readonly state: NumberState;
  /** Probability, or squared norm, of the condition. */
  readonly probability: number;
  /** What it would be if nothing had been lost in the condition: 1, or the squared norm of orthogonal terms. */
  readonly reference: number;
}

/**
 * Normalises a conditioned state. What was left outside counts more the rarer the condition: where that matters
 * the state is built again with as much less outside.
 */
function conditioned(resolution: Resolution, make: (finer: Resolution) => Conditioned): NumberState {
  // A condition of one in a hundred is common: allowing for it at once saves building most states twice.
  let made = make({
    ...resolution,
    logWeight: resolution.logWeight + (resolution.logWeight < 0 ? LIKELY_LOG_PROBABILITY : 0),
  });
  let outside = Infinity;
  for (let attempt = 0; attempt < 3; attempt++) {
    const ratio = made.probability / made.reference;
    if (!(ratio > 1e-300)) throw new StateVanishes('the condition has no weight in the number basis');
    outside = made.state.outside / ratio;
    if (outside <= Math.exp(resolution.logWeight) * 1.01) break;
    made = make({ ...resolution, logWeight: resolution.logWeight + Math.log(ratio) });
  }
  return scaleState(made.state, 1 / made.probability, Math.max(outside, 0));
}

/** A state times a positive number (its weight, not its amplitude). */
function scaleState(state: NumberState, factor: number, outside: number): NumberState {
  if (state.kind === 'ket') {
    const root = Math.sqrt(factor);
    return {
      ...state,
      re: state.re.map((x) => x * root),
      im: state.im.map((x) => x * root),
      noise: state.noise * root,
      outside,
    };
  }
  if (state.kind === 'diagonal') {
    return { ...state, p: state.p.map((x) => x * factor), noise: state.noise * factor, outside };
  }
  return {
    ...state,
    re: state.re.map((x) => x * factor),
    im: state.im.map((x) => x * factor),
    noise: state.noise * factor,
    outside,
  };
}

function coherentKet(alpha: Complex, { levels, outside }: { levels: number; outside: number }): NumberKet {
  const mean = abs2(alpha);
  const angle = Math.atan2(alpha.im, alpha.re);
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  for (let n = 0; n < levels; n++) {
    const size = Math.sqrt(poisson(n, mean));
    const turn = phase(angle * n);
    re[n] = size * turn.re;
    im[n] = size * turn.im;
  }
  return { kind: 'ket', levels, re, im, noise: 0, outside };
}

function squeezedKet(
  r: number,
  direction: Complex,
  { levels, outside }: { levels: number; outside: number },
): NumberKet {
  const angle = Math.atan2(-direction.im, -direction.re);
  const tau = Math.tanh(r);
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let size = 1 / Math.sqrt(Math.cosh(r));
  for (let k = 0; 2 * k < levels; k++) {
    const turn = phase(angle * k);
    re[2 * k] = size * turn.re;
    im[2 * k] = size * turn.im;
    size *= tau * Math.sqrt((2 * k + 1) / (2 * k + 2));
  }
  return { kind: 'ket', levels, re, im, noise: 0, outside };
}

/**
 * D(α)S(ζ)|0⟩ from a(μ) + ν a† = β on it, without a matrix.
 *
 * Formula: μ√(n+1) ψ_{n+1} = β ψ_n − ν√n ψ_{n−1} with μ = cosh r, ν = e^{iφ} sinh r, β = μα + να*; the phase of ψ_0 is
 * that of exp(−e^{iφ} tanh r α*²/2).
 */
function displacedSqueezedKet(
  alpha: Complex,
  { r, direction }: Extract<State, { readonly kind: 'squeezed' }>,
  { levels, outside }: { levels: number; outside: number },
): NumberKet {
  const mu = Math.cosh(r);
  const nu = times(direction, Math.sinh(r));
  const turned = multiply(nu, conjugate(alpha));
  const beta = { re: mu * alpha.re + turned.re, im: mu * alpha.im + turned.im };
  const start = multiply(times(direction, -Math.tanh(r) / 2), multiply(conjugate(alpha), conjugate(alpha)));
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let [beforeRe, beforeIm] = [0, 0];
  let { re: hereRe, im: hereIm } = phase(start.im);
  for (let n = 0; n < levels; n++) {
    re[n] = hereRe;
    im[n] = hereIm;
    const [root, below] = [1 / (mu * Math.sqrt(n + 1)), Math.sqrt(n)];
    const nextRe = (beta.re * hereRe - beta.im * hereIm - below * (nu.re * beforeRe - nu.im * beforeIm)) * root;
    const nextIm = (beta.re * hereIm + beta.im * hereRe - below * (nu.re * beforeIm + nu.im * beforeRe)) * root;
    [beforeRe, beforeIm, hereRe, hereIm] = [hereRe, hereIm, nextRe, nextIm];
    if (Math.abs(hereRe) + Math.abs(hereIm) < 1e140) continue;
    for (let k = 0; k <= n; k++) {
      re[k]! *= 1e-140;
      im[k]! *= 1e-140;
    }
    beforeRe *= 1e-140;
    beforeIm *= 1e-140;
    hereRe *= 1e-140;
    hereIm *= 1e-140;
  }
  let weight = 0;
  for (let n = 0; n < levels; n++) weight += re[n]! ** 2 + im[n]! ** 2;
  const scale = 1 / Math.sqrt(weight);
  for (let n = 0; n < levels; n++) {
    re[n]! *= scale;
    im[n]! *= scale;
  }
  return { kind: 'ket', levels, re, im, noise: 4 * EPS, outside };
}

function catKet(alpha: Complex, theta: number, size: { levels: number; outside: number }): NumberKet {
  const base = coherentKet(alpha, size);
  const mean = abs2(alpha);
  const half = Math.cos(theta / 2);
  const halfSine = Math.sin(theta / 2);
  const norm = 4 * half * half + 2 * Math.cos(theta) * Math.expm1(-2 * mean);
  const scale = 1 / Math.sqrt(norm);
  // 1 ± e^{iθ} = 2 cos(θ/2) e^{iθ/2} or −2i sin(θ/2) e^{iθ/2}.
  const turn = phase(theta / 2);
  const even = { re: 2 * half * turn.re * scale, im: 2 * half * turn.im * scale };
  const odd = { re: 2 * halfSine * turn.im * scale, im: -2 * halfSine * turn.re * scale };
  const re = new Float64Array(base.levels);
  const im = new Float64Array(base.levels);
  for (let n = 0; n < base.levels; n++) {
    const factor = n % 2 === 0 ? even : odd;
    re[n] = base.re[n]! * factor.re - base.im[n]! * factor.im;
    im[n] = base.re[n]! * factor.im + base.im[n]! * factor.re;
  }
  return { ...base, re, im };
}

function checkUnitaryWork(inner: NumberState, levels: number): void {
  let columns = 0;
  for (let n = 0; n < inner.levels; n++) {
    const filled =
      inner.kind === 'ket'
        ? inner.re[n] !== 0 || inner.im[n] !== 0
        : inner.kind === 'diagonal'
          ? inner.p[n] !== 0
          : true;
    if (filled) columns++;
  }
  if (inner.levels * levels > 4e6 || columns * levels > 4e6) {
    throw new MethodDoesNotApply('the displaced or squeezed number states would take too long');
  }
}

function transform(inner: NumberState, unitary: NumberUnitary, outside: number): NumberState {
  const { levels } = unitary;
  if (inner.kind === 'ket') {
    const { re, im } = applyUnitary(unitary, inner.re, inner.im);
    let terms = 0;
    for (let n = 0; n < inner.levels; n++) if (inner.re[n] !== 0 || inner.im[n] !== 0) terms++;
    // One column keeps its own digits; a sum of several has noise of the size of its terms.
    const noise = terms > 1 ? 4 * EPS + inner.noise : inner.noise;
    return { kind: 'ket', levels, re, im, noise, outside: outside + mixedIn(inner.outside) };
  }
  checkDensityLevels(levels);
  // U ρ U†: columns of ρ first, then rows by the conjugate.
  const source = densityOf(inner);
  const from = source.levels;
  const halfRe = new Float64Array(levels * from);
  const halfIm = new Float64Array(levels * from);
  for (let n = 0; n < from; n++) {
    const re = Float64Array.from({ length: from }, (_, m) => source.re[m * from + n]!);
    const im = Float64Array.from({ length: from }, (_, m) => source.im[m * from + n]!);
    const moved = applyUnitary(unitary, re, im);
    for (let m = 0; m < levels; m++) {
      halfRe[m * from + n] = moved.re[m]!;
      halfIm[m * from + n] = moved.im[m]!;
    }
  }
  const outRe = new Float64Array(levels * levels);
  const outIm = new Float64Array(levels * levels);
  for (let m = 0; m < levels; m++) {
    const re = halfRe.subarray(m * from, (m + 1) * from);
    const im = halfIm.subarray(m * from, (m + 1) * from).map((x) => -x);
    const moved = applyUnitary(unitary, re, im);
    for (let n = 0; n < levels; n++) {
      outRe[m * levels + n] = moved.re[n]!;
      outIm[m * levels + n] = -moved.im[n]!;
    }
  }
  const noise = 4 * EPS + inner.noise;
  return { kind: 'density', levels, re: outRe, im: outIm, noise, outside: outside + mixedIn(inner.outside) };
}

function mix(
  parts: readonly { readonly part: State; readonly probability: number }[],
  resolution: Resolution,
): NumberState {
  const built = parts
    .filter(({ probability }) => probability > 0)
    .map(({ part, probability }) => ({ state: simplest(numberState(part, resolution)), probability }));
  const only = built[0];
  if (built.length === 1 && only !== undefined) return only.state;
  const levels = Math.max(...built.map(({ state }) => state.levels));
  const outside = built.reduce((sum, { state, probability }) => sum + probability * state.outside, 0);
  const noise = built.reduce((sum, { state, probability }) => sum + probability * state.noise, 0);
  if (built.every(({ state }) => state.kind === 'diagonal')) {
    const p = new Float64Array(levels);
    for (const { state, probability } of built) {
      if (state.kind === 'diagonal') for (let n = 0; n < state.levels; n++) p[n]! += probability * state.p[n]!;
    }
    return { kind: 'diagonal', levels, p, noise, outside };
  }
  checkDensityLevels(levels);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  for (const { state, probability } of built) {
    const density = densityOf(state);
    for (let m = 0; m < density.levels; m++) {
      for (let n = 0; n < density.levels; n++) {
        re[m * levels + n]! += probability * density.re[m * density.levels + n]!;
        im[m * levels + n]! += probability * density.im[m * density.levels + n]!;
      }
    }
  }
  return { kind: 'density', levels, re, im, noise: noise + EPS, outside };
}

function dephase(inner: NumberState, sigma: number): NumberState {
  if (inner.kind === 'diagonal' || sigma === 0) return inner;
  const density = densityOf(inner);
  const { levels } = density;
  const factors = Float64Array.from({ length: levels }, (_, d) => Math.exp((-sigma * sigma * d * d) / 2));
  const re = density.re.map((x, at) => x * factors[Math.abs(Math.floor(at / levels) - (at % levels))]!);
  const im = density.im.map((x, at) => x * factors[Math.abs(Math.floor(at / levels) - (at % levels))]!);
  return { ...density, re, im };
}

function shift(inner: NumberState, direction: Complex): NumberState {
  if (inner.kind === 'diagonal') return inner;
  const angle = Math.atan2(direction.im, direction.re);
  const { levels } = inner;
  const turns = Array.from({ length: levels }, (_, n) => phase(angle * n));
  const re = new Float64Array(inner.re.length);
  const im = new Float64Array(inner.im.length);
  for (let at = 0; at < re.length; at++) {
    let turn = turns[inner.kind === 'ket' ? at : Math.floor(at / levels)]!;
    if (inner.kind === 'density') {
      const back = turns[at % levels]!;
      turn = { re: turn.re * back.re + turn.im * back.im, im: turn.im * back.re - turn.re * back.im };
    }
    re[at] = inner.re[at]! * turn.re - inner.im[at]! * turn.im;
    im[at] = inner.re[at]! * turn.im + inner.im[at]! * turn.re;
  }
  return { ...inner, re, im };
}

/** An amplifier with noise is a loss before an amplifier without: η·G' = gain, G' − 1 = noise. */
export function asLossAndGain({ gain, noise }: Channel): { readonly eta: number; readonly amplification: number } {
  const amplification = noise === 0 && gain <= 1 ? 1 : 1 + noise;
  return { eta: Math.min(1, gain / amplification), amplification };
}

function applyChannel(
  inner: NumberState,
  channel: Channel,
  size: () => { readonly levels: number; readonly outside: number },
): NumberState {
  const { eta, amplification } = asLossAndGain(channel);
  if (inner.kind === 'diagonal') {
    const lost = loseDiagonal(inner, eta);
    if (amplification === 1) return lost;
    const { levels, outside } = size();
    return amplifyDiagonal(lost, amplification, levels, outside + inner.outside);
  }
  if (eta === 1 && amplification === 1) return inner;
  const density: NumberDensity = loseDensity(densityOf(inner), eta);
  if (amplification === 1) return density;
  const { levels, outside } = size();
  checkDensityLevels(levels);
  return amplifyDensity(density, amplification, levels, outside + inner.outside);
}

/** A channel on photon probabilities alone, for figures that need no coherences. */
export function channelOnDiagonal(
  inner: NumberDiagonal,
  channel: Channel,
  size: () => { readonly levels: number; readonly outside: number },
): NumberDiagonal {
  const mapped = applyChannel(inner, { ...channel, rotation: 0 }, size);
  return diagonalOf(mapped);
}

type Moved = Extract<State, { readonly kind: 'photonAdded' | 'photonSubtracted' }>;

/** √((n+k)!/n!) or √(n!/(n−k)!) on each amplitude, scaled so that nothing overflows. */
function movePhotons(state: Moved, resolution: Resolution): Conditioned {
  const { k } = state;
  const added = state.kind === 'photonAdded';
  const wanted = added ? resolution : { ...resolution, least: resolution.least + k };
  const size = resolve(state, resolution);
  const inner = numberState(state.state, { ...wanted, least: Math.max(wanted.least, size.levels + (added ? -k : k)) });
  return moveNumbers(inner, k, added, size.outside);
}

/** The same for a state of numbers; `probability` is that of the move divided by k!. */
export function moveNumbers(inner: NumberState, k: number, added: boolean, outside: number): Conditioned {
  const levels = Math.max(1, added ? inner.levels + k : inner.levels - k);
  const reference = logAdded(0, k);
  // Factor for the target number m: from m − k up, or from m + k down.
  const factor = Float64Array.from({ length: levels }, (_, m) => {
    const low = added ? m - k : m;
    return low < 0 ? 0 : Math.exp((logAdded(low, k) - reference) / 2);
  });
  const from = (m: number) => (added ? m - k : m + k);
  if (inner.kind === 'ket') {
    const re = new Float64Array(levels);
    const im = new Float64Array(levels);
    let probability = 0;
    for (let m = 0; m < levels; m++) {
      re[m] = factor[m]! * (inner.re[from(m)] ?? 0);
      im[m] = factor[m]! * (inner.im[from(m)] ?? 0);
      probability += re[m]! ** 2 + im[m]! ** 2;
    }
    const noise = inner.noise * Math.max(...factor);
    return { state: { kind: 'ket', levels, re, im, noise, outside }, probability, reference: 1 };
  }
  if (inner.kind === 'diagonal') {
    const p = Float64Array.from({ length: levels }, (_, m) => factor[m]! ** 2 * (inner.p[from(m)] ?? 0));
    const probability = p.reduce((sum, value) => sum + value, 0);
    const noise = inner.noise * Math.max(...factor) ** 2;
    return { state: { kind: 'diagonal', levels, p, noise, outside }, probability, reference: 1 };
  }
  checkDensityLevels(levels);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  let probability = 0;
  for (let m = 0; m < levels; m++) {
    if (from(m) < 0 || from(m) >= inner.levels) continue;
    for (let n = 0; n < levels; n++) {
      if (from(n) < 0 || from(n) >= inner.levels) continue;
      const both = factor[m]! * factor[n]!;
      re[m * levels + n] = both * inner.re[from(m) * inner.levels + from(n)]!;
      im[m * levels + n] = both * inner.im[from(m) * inner.levels + from(n)]!;
    }
    probability += re[m * levels + m]!;
  }
  const noise = inner.noise * Math.max(...factor) ** 2;
  return { state: { kind: 'density', levels, re, im, noise, outside }, probability, reference: 1 };
}

/** The amplitudes of a state that is pure. */
export function asKet(state: NumberState): NumberKet {
  if (state.kind === 'ket') return state;
  if (state.kind === 'diagonal') {
    let at = -1;
    for (let n = 0; n < state.levels; n++) {
      if (state.p[n] === 0) continue;
      if (at >= 0) throw new MethodDoesNotApply('not a ket in the number basis');
      at = n;
    }
    const re = new Float64Array(state.levels);
    if (at >= 0) re[at] = 1;
    return {
      kind: 'ket',
      levels: state.levels,
      re,
      im: new Float64Array(state.levels),
      noise: state.noise,
      outside: state.outside,
    };
  }
  throw new MethodDoesNotApply('not a ket in the number basis');
}

function superpose(parts: readonly { readonly amplitude: Complex; readonly ket: NumberKet }[]): Conditioned {
  const levels = Math.max(1, ...parts.map(({ ket }) => ket.levels));
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let reference = 0;
  let spread = 0;
  let noise = 0;
  const several = new Uint8Array(levels);
  for (const { amplitude, ket } of parts) {
    const size = Math.sqrt(abs2(amplitude));
    reference += size * size;
    spread += size * Math.sqrt(ket.outside);
    noise += size * ket.noise;
    for (let n = 0; n < ket.levels; n++) {
      const a = ket.re[n]!;
      const b = ket.im[n]!;
      if (a === 0 && b === 0) continue;
      several[n]!++;
      re[n]! += amplitude.re * a - amplitude.im * b;
      im[n]! += amplitude.re * b + amplitude.im * a;
    }
  }
  let probability = 0;
  for (let n = 0; n < levels; n++) probability += re[n]! ** 2 + im[n]! ** 2;
  // Where several terms meet, what cancels leaves noise of their size.
  if (several.some((count) => count > 1)) noise += EPS * Math.sqrt(reference);
  if (!(probability > 1e3 * (noise * noise + EPS * EPS * reference))) {
    throw new StateVanishes('the norm vanishes to rounding');
  }
  return { state: { kind: 'ket', levels, re, im, noise, outside: spread * spread }, probability, reference: 1 };
}

/** Photon probabilities only: channels, dephasing and moved photons need no coherences for them. */
export function numberDiagonal(state: State, resolution: Resolution = defaultResolution): NumberDiagonal {
  switch (state.kind) {
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { channel, inner } = channelChain(state);
      return channelOnDiagonal(numberDiagonal(inner, resolution), channel, () => resolve(state, resolution));
    }
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
      return numberDiagonal(state.state, resolution);
    case 'photonAdded':
    case 'photonSubtracted': {
      const made = conditioned(resolution, (finer) => {
        const added = state.kind === 'photonAdded';
        const size = resolve(state, finer);
        const least = Math.max(finer.least, size.levels) + (added ? 0 : state.k);
        const inner = numberDiagonal(state.state, { ...finer, least });
        return moveNumbers(inner, state.k, added, size.outside);
      });
      return diagonalOf(made);
    }
    case 'mixture': {
      const parts = state.states
        .map((part, index) => ({ part, probability: state.probabilities[index] ?? 0 }))
        .filter(({ probability }) => probability > 0)
        .map(({ part, probability }) => ({ diagonal: numberDiagonal(part, resolution), probability }));
      const levels = Math.max(...parts.map(({ diagonal }) => diagonal.levels));
      const p = new Float64Array(levels);
      let outside = 0;
      let noise = 0;
      for (const { diagonal, probability } of parts) {
        for (let n = 0; n < diagonal.levels; n++) p[n]! += probability * diagonal.p[n]!;
        outside += probability * diagonal.outside;
        noise += probability * diagonal.noise;
      }
      return { kind: 'diagonal', levels, p, noise, outside };
    }
    case 'output': {
      const { joint, kept } = detection(state);
      const before = diagonalOf(outputOf(jointState(joint, resolution), state.mode));
      return kept === undefined ? before : channelOnDiagonal(before, kept, () => resolve(state, resolution));
    }
    default:
      return diagonalOf(numberState(state, resolution));
  }
}
