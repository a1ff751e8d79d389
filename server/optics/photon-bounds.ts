import { abs2 } from './complex';
import { gaussianOf, type GaussianState } from './gaussian/gaussian-state';
import { MethodDoesNotApply } from './method-does-not-apply';
import { channelOf, type State } from './state';
import { StateMemo } from './state-memo';

/** Levels of the largest ket or diagonal state. */
export const MOST_LEVELS = 16_384;
/** ln of the weight that may be left outside, unless asked otherwise. */
export const DEFAULT_LOG_WEIGHT = Math.log(1e-14);

/**
 * An upper bound on ln⟨tⁿ⟩, t ≥ 1, n the total photon number, of a state normalised as a whole.
 *
 * By Markov's inequality the weight at n ≥ D is at most ⟨tⁿ⟩ t^{−D} for every t; Gaussian states have ⟨tⁿ⟩ in closed
 * form, losses and amplifiers map it exactly, displacements and squeezers are bounded by isotropic Gaussians in
 * antinormal order, which keeps the bound rigorous.
 * @param logT ln t ≥ 0
 * @returns Infinity where the bound does not exist
 */
export function logGenerating(state: State, logT: number): number {
  const gaussian = gaussianOf(state);
  if (gaussian !== undefined) return gaussianGenerating(gaussian, logT);
  const up = Math.expm1(logT);
  switch (state.kind) {
    case 'fock':
      return state.n * logT;
    case 'coherent':
      return up * abs2(state.alpha);
    case 'thermal':
      return state.nbar * up < 1 ? -Math.log1p(-state.nbar * up) : Infinity;
    case 'cat': {
      // ⟨α|tⁿ|α⟩ ≤ e^{(t−1)|α|²}; parity only removes terms. The norm divides.
      const mean = abs2(state.alpha);
      const half = Math.cos(state.theta / 2);
      const norm = 4 * half * half + 2 * Math.cos(state.theta) * Math.expm1(-2 * mean);
      return up * mean + Math.log(4 / Math.max(norm, 1e-300));
    }
    case 'squeezed':
    case 'twinBeam':
      return Infinity;
    case 'displaced': {
      // |β + α|² ≤ (1 + ε)|β|² + (1 + 1/ε)|α|² in ⟨tⁿ⟩ = (1/t)∫Q e^{(1−1/t)|β|²}.
      const mean = abs2(state.alpha);
      if (mean === 0) return logGenerating(state.state, logT);
      const rate = -Math.expm1(-logT);
      let best = Infinity;
      for (const epsilon of [0.03, 0.1, 0.3, 1, 3, 10]) {
        const wider = rate * (1 + epsilon);
        if (wider >= 1) continue;
        const inner = -Math.log1p(-wider);
        const bound = inner - logT + rate * (1 + 1 / epsilon) * mean + logGenerating(state.state, inner);
        best = Math.min(best, bound);
      }
      return best;
    }
    case 'squeeze':
      return squeezedBound(state.state, state.r, logT, 1);
    case 'twoModeSqueeze':
      return squeezedBound(state.state, state.r, logT, 2);
    case 'mixture': {
      let most = -Infinity;
      state.states.forEach((part, index) => {
        if ((state.probabilities[index] ?? 0) > 0) most = Math.max(most, logGenerating(part, logT));
      });
      return most;
    }
    case 'superposition': {
      // Not normalised: the caller adds what its norm takes.
      let most = 0;
      for (const term of state.terms) {
        const size = Math.sqrt(abs2(term.amplitude));
        if (size > 0) most += size * Math.exp(logGenerating(term.state, logT) / 2);
      }
      return 2 * Math.log(most) - Math.log(superpositionNormBound(state.terms));
    }
    case 'product':
      return logGenerating(state.first, logT) + logGenerating(state.second, logT);
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
    case 'beamSplitter':
    case 'output':
    case 'heralded':
    case 'clicked':
      // Conditioned states are bounded unconditioned; whoever divides by their probability asks for less weight.
      return logGenerating(state.state, logT);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { gain, noise } = channelOf(state);
      const spread = 1 - noise * up;
      if (spread <= 0) return Infinity;
      const inner = Math.log1p((gain * up) / spread);
      // Of two modes only one is touched; the other keeps t, so the larger of both bounds the total.
      return -Math.log(spread) + logGenerating(state.state, state.modes === 2 ? Math.max(inner, logT) : inner);
    }
    case 'photonAdded': {
      // (n+1)…(n+k) ≤ k! x^{−n}(1 − x)^{−k−1}, and the norm is at least k!.
      const x = Math.exp(-Math.min(logT, 0.7) / 2 - 1e-3);
      return state.k * logT - (state.k + 1) * Math.log1p(-x) + logGenerating(state.state, logT - Math.log(x));
    }
    case 'photonSubtracted': {
      // n(n−1)…(n−k+1) ≤ k! x^{−n} (x/(1−x))ᵏ; the norm is divided by whoever builds the state.
      const x = Math.exp(-Math.min(logT, 0.7) / 2 - 1e-3);
      let logFactorialK = 0;
      for (let j = 2; j <= state.k; j++) logFactorialK += Math.log(j);
      const ratio = Math.max(0, Math.log(x) - Math.log1p(-x));
      return logFactorialK + state.k * ratio + logGenerating(state.state, logT - Math.log(x));
    }
  }
}

/** The norm of a superposition from below is not known without its overlaps; 1 stands for it and the builder checks. */
const superpositionNormBound = (terms: readonly { readonly amplitude: { re: number; im: number } }[]): number =>
  terms.reduce((sum, term) => sum + abs2(term.amplitude), 0) || 1;

/**
 * tⁿ squeezed is a Gaussian operator; its antinormal symbol is at most an isotropic Gaussian, which is some t'ⁿ.
 */
function squeezedBound(inner: State, r: number, logT: number, modes: 1 | 2): number {
  if (logT === 0) return 0;
  const c = 1 / Math.tanh(logT / 2) / 2;
  const wide = c * Math.exp(2 * r) + 0.5;
  // The symbol is exp[x²/2(c e^{2r} + ½) + p²/2(c e^{−2r} + ½)]; without squeezing c + ½ = t/(t − 1).
  const tight = c * Math.exp(-2 * r) + 0.5;
  const rate = 1 / tight;
  if (!(rate < 1)) return Infinity;
  const innerLogT = -Math.log1p(-rate);
  // Weight of the symbol: c/√((c e^{2r} + ½)(c e^{−2r} + ½)) times 2/(1 + t).
  const weight = Math.log(c) - Math.log(wide * tight) / 2 + Math.log(2) - Math.log1p(Math.exp(logT));
  return modes * (weight + innerLogT) + logGenerating(inner, innerLogT);
}

/** ln⟨tⁿ⟩ of a Gaussian state. Formula: (2/(1+t))ᴹ ∫W e^{κ(x²+p²)}, κ = (t − 1)/(t + 1). */
function gaussianGenerating({ modes, mean, covariance }: GaussianState, logT: number): number {
  const kappa = Math.tanh(logT / 2);
  const side = 2 * modes;
  // Cholesky of 1 − 2κV.
  let logDet = 0;
  let form = 0;
  for (let i = 0; i < side; i++) {
    let rest = mean[i]!;
    for (let j = 0; j < i; j++) {
      let sum = -2 * kappa * covariance[i * side + j]!;
      for (let k = 0; k < j; k++) sum -= scratch[4 * i + k]! * scratch[4 * j + k]!;
      scratch[4 * i + j] = sum / scratch[4 * j + j]!;
      rest -= scratch[4 * i + j]! * forward[j]!;
    }
    let pivot = 1 - 2 * kappa * covariance[i * side + i]!;
    for (let k = 0; k < i; k++) pivot -= scratch[4 * i + k]! ** 2;
    if (pivot <= 0) return Infinity;
    scratch[4 * i + i] = Math.sqrt(pivot);
    logDet += Math.log(pivot);
    forward[i] = rest / scratch[4 * i + i]!;
    form += forward[i]! ** 2;
  }
  return modes * (Math.LN2 - Math.log1p(Math.exp(logT))) - logDet / 2 + kappa * form;
}

/** Rows of a triangular factor and of a solved vector; no call outlives its use of them. */
const scratch = new Float64Array(16);
const forward = new Float64Array(4);

/** Values of ln t that are tried: fine where states are wide, coarse where they are narrow. */
const LOG_TS = Array.from({ length: 64 }, (_, k) => 1e-5 * 1.32 ** k);

/**
 * Levels of a number basis that leave no more than a given weight outside.
 *
 * @param state of one mode, or of two (then of the total photon number)
 * @param logWeight ln of the allowed weight
 * @returns levels 0 … levels − 1, and the bound on the weight outside
 * @throws MethodDoesNotApply where more than 16,384 levels would be needed
 */
export function levelsFor(
  state: State,
  logWeight = DEFAULT_LOG_WEIGHT,
): { readonly levels: number; readonly outsideWeight: number } {
  const finite = largestNumber(state);
  let best = finite === undefined ? Infinity : finite + 1;
  let bestT = 0;
  let bestBound = -Infinity;
  if (finite === undefined) {
    const bounds = boundsOf(state);
    // Levels fall to one minimum and rise again: every fourth value first, then those beside the best.
    let place = -1;
    const consider = (k: number): void => {
      const [logT, bound] = [LOG_TS[k], bounds(k)];
      if (logT === undefined || !Number.isFinite(bound)) return;
      const levels = Math.max(1, Math.ceil((bound - logWeight) / logT));
      if (levels >= best) return;
      [best, bestT, bestBound, place] = [levels, logT, bound, k];
    };
    for (let k = 0; k < LOG_TS.length; k += 4) {
      if (bounds(k) === Infinity) break;
      consider(k);
    }
    const middle = place;
    for (let k = Math.max(0, middle - 3); k <= middle + 3; k++) consider(k);
  }
  if (!(best <= MOST_LEVELS)) {
    throw new MethodDoesNotApply(
      Number.isFinite(best)
        ? `it would take ${best} levels, more than ${MOST_LEVELS}`
        : `it would take more than ${MOST_LEVELS} levels`,
    );
  }
  return { levels: best, outsideWeight: finite === undefined ? Math.exp(bestBound - best * bestT) : 0 };
}

const knownBounds = new StateMemo<Float64Array>();

/** logGenerating at each of LOG_TS, found when it is first asked for. */
function boundsOf(state: State): (k: number) => number {
  const values = knownBounds.get(state) ?? new Float64Array(LOG_TS.length).fill(NaN);
  knownBounds.set(state, values);
  return (k) => {
    const known = values[k] ?? Infinity;
    return Number.isNaN(known) ? (values[k] = logGenerating(state, LOG_TS[k] ?? 0)) : known;
  };
}

/** The largest photon number that a state can have at all, where it has one. */
export function largestNumber(state: State): number | undefined {
  switch (state.kind) {
    case 'fock':
      return state.n;
    case 'coherent':
    case 'cat':
      return state.alpha.re === 0 && state.alpha.im === 0 ? 0 : undefined;
    case 'thermal':
      return state.nbar === 0 ? 0 : undefined;
    case 'squeezed':
    case 'twinBeam':
      return state.r === 0 ? 0 : undefined;
    case 'displaced':
      return state.alpha.re === 0 && state.alpha.im === 0 ? largestNumber(state.state) : undefined;
    case 'squeeze':
    case 'twoModeSqueeze':
      return state.r === 0 ? largestNumber(state.state) : undefined;
    case 'mixture': {
      let most = 0;
      for (const [index, part] of state.states.entries()) {
        if ((state.probabilities[index] ?? 0) === 0) continue;
        const own = largestNumber(part);
        if (own === undefined) return undefined;
        most = Math.max(most, own);
      }
      return most;
    }
    case 'superposition': {
      let most = 0;
      for (const term of state.terms) {
        if (abs2(term.amplitude) === 0) continue;
        const own = largestNumber(term.state);
        if (own === undefined) return undefined;
        most = Math.max(most, own);
      }
      return most;
    }
    case 'product': {
      const first = largestNumber(state.first);
      const second = largestNumber(state.second);
      return first === undefined || second === undefined ? undefined : first + second;
    }
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
    case 'beamSplitter':
    case 'output':
    case 'heralded':
    case 'clicked':
    case 'photonSubtracted':
      return largestNumber(state.state);
    case 'photonAdded': {
      const own = largestNumber(state.state);
      return own === undefined ? undefined : own + state.k;
    }
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { gain, noise } = channelOf(state);
      return noise === 0 && gain <= 1 ? largestNumber(state.state) : undefined;
    }
  }
}
