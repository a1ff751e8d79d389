import { phase, type Complex } from '../complex';
import { channelOf, type Mode, type State } from '../state';
import { StateMemo } from '../state-memo';

/** A Gaussian state: means and covariances of (x₁, p₁, x₂, p₂), ħ = 1, vacuum variance 1/2. */
export interface GaussianState {
  readonly modes: 1 | 2;
  readonly mean: Float64Array;
  /** Row by row, 2·modes to a side. */
  readonly covariance: Float64Array;
}

const cache = new StateMemo<GaussianState | 'not Gaussian'>();

/** The mean and covariance of a state that is Gaussian by the way it is written; undefined for others. */
export function gaussianOf(state: State): GaussianState | undefined {
  const known = cache.get(state);
  if (known !== undefined) return known === 'not Gaussian' ? undefined : known;
  const built = build(state);
  cache.set(state, built ?? 'not Gaussian');
  return built;
}

function isotropic(modes: 1 | 2, variance: number): GaussianState {
  const side = 2 * modes;
  const covariance = new Float64Array(side * side);
  for (let i = 0; i < side; i++) covariance[i * side + i] = variance;
  return { modes, mean: new Float64Array(side), covariance };
}

const vacuumOf = (modes: 1 | 2): GaussianState => isotropic(modes, 0.5);

function build(state: State): GaussianState | undefined {
  switch (state.kind) {
    case 'fock':
      return state.n === 0 ? vacuumOf(1) : undefined;
    case 'coherent':
      return displace(vacuumOf(1), 1, state.alpha);
    case 'thermal':
      return isotropic(1, state.nbar + 0.5);
    case 'squeezed':
      return squeezeMode(vacuumOf(1), 1, state.r, state.direction);
    case 'cat':
      return state.alpha.re === 0 && state.alpha.im === 0 ? vacuumOf(1) : undefined;
    case 'displaced':
      return map(state.state, (inner) => displace(inner, state.mode, state.alpha));
    case 'squeeze':
      return map(state.state, (inner) => squeezeMode(inner, state.mode, state.r, state.direction));
    case 'mixture': {
      const present = state.states.filter((_, index) => (state.probabilities[index] ?? 0) > 0);
      const only = present[0];
      return present.length === 1 && only !== undefined ? gaussianOf(only) : undefined;
    }
    case 'superposition': {
      const present = state.terms.filter((term) => term.amplitude.re !== 0 || term.amplitude.im !== 0);
      const only = present[0];
      return present.length === 1 && only !== undefined ? gaussianOf(only.state) : undefined;
    }
    case 'product': {
      const first = gaussianOf(state.first);
      const second = gaussianOf(state.second);
      return first === undefined || second === undefined ? undefined : join(first, second);
    }
    case 'twinBeam':
      return twoModeSqueezeGaussian(vacuumOf(2), state.r, state.direction);
    case 'twoModeSqueeze':
      return map(state.state, (inner) => twoModeSqueezeGaussian(inner, state.r, state.direction));
    case 'beamSplitter':
      return map(state.state, (inner) => split(inner, state.transmittance, state.direction));
    case 'phaseShift':
      return map(state.state, (inner) => rotate(inner, state.mode, state.direction));
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { mode, gain, noise, rotation } = channelOf(state);
      return map(state.state, (inner) => {
        const turned = rotation === 0 ? inner : rotate(inner, mode, phase(rotation));
        return channelGaussian(turned, mode, gain, noise + (1 - gain) / 2);
      });
    }
    case 'output':
      return map(state.state, (inner) => reduce(inner, state.mode));
    case 'heralded':
      return state.state.kind === 'product'
        ? gaussianOf(state.mode === 1 ? state.state.second : state.state.first)
        : state.n === 0
          ? map(state.state, (inner) => silent(inner, state.mode))
          : undefined;
    case 'clicked':
      return state.state.kind === 'product'
        ? gaussianOf(state.mode === 1 ? state.state.second : state.state.first)
        : undefined;
    case 'photonAdded':
      return state.k === 0 ? gaussianOf(state.state) : undefined;
    case 'photonSubtracted':
      // A coherent state is an eigenstate of a; nothing else Gaussian stays so.
      return state.k === 0 ||
        (state.state.kind === 'coherent' && (state.state.alpha.re !== 0 || state.state.alpha.im !== 0))
        ? gaussianOf(state.state)
        : undefined;
    case 'phaseAveraged': {
      const inner = gaussianOf(state.state);
      return inner !== undefined && isSymmetric(inner) ? inner : undefined;
    }
    case 'dephased': {
      const inner = gaussianOf(state.state);
      return inner !== undefined && (state.sigma === 0 || isSymmetric(inner)) ? inner : undefined;
    }
  }
}

function map(state: State, change: (inner: GaussianState) => GaussianState): GaussianState | undefined {
  const inner = gaussianOf(state);
  return inner === undefined ? undefined : change(inner);
}

/** Whether a state of one mode has no direction in phase space. */
function isSymmetric({ mean, covariance }: GaussianState): boolean {
  return mean[0] === 0 && mean[1] === 0 && covariance[0] === covariance[3] && covariance[1] === 0;
}

function join(first: GaussianState, second: GaussianState): GaussianState {
  const covariance = new Float64Array(16);
  for (let i = 0; i < 2; i++) {
    for (let j = 0; j < 2; j++) {
      covariance[i * 4 + j] = first.covariance[i * 2 + j]!;
      covariance[(i + 2) * 4 + j + 2] = second.covariance[i * 2 + j]!;
    }
  }
  return { modes: 2, mean: Float64Array.from([...first.mean, ...second.mean]), covariance };
}

function displace(state: GaussianState, mode: Mode, alpha: Complex): GaussianState {
  const mean = state.mean.slice();
  mean[2 * mode - 2]! += Math.SQRT2 * alpha.re;
  mean[2 * mode - 1]! += Math.SQRT2 * alpha.im;
  return { ...state, mean };
}

/** Applies a real linear map of (x, p) pairs: mean → M mean, V → M V Mᵀ. */
function transform(state: GaussianState, matrix: readonly (readonly number[])[]): GaussianState {
  const side = matrix.length;
  const mean = new Float64Array(side);
  const half = new Float64Array(side * side);
  const covariance = new Float64Array(side * side);
  for (let i = 0; i < side; i++) {
    for (let k = 0; k < side; k++) {
      const m = matrix[i]![k]!;
      if (m === 0) continue;
      mean[i]! += m * state.mean[k]!;
      for (let j = 0; j < side; j++) half[i * side + j]! += m * state.covariance[k * side + j]!;
    }
  }
  for (let i = 0; i < side; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = 0; k < side; k++) sum += half[i * side + k]! * matrix[j]![k]!;
      covariance[i * side + j] = sum;
      covariance[j * side + i] = sum;
    }
  }
  return { modes: state.modes, mean, covariance };
}

/** Places a map of one mode into one of the state's modes. */
function onMode(state: GaussianState, mode: Mode, block: readonly (readonly number[])[]): GaussianState {
  const side = 2 * state.modes;
  const start = 2 * mode - 2;
  const matrix = Array.from({ length: side }, (_, i) =>
    Array.from({ length: side }, (__, j) => {
      const inside = i >= start && i < start + 2 && j >= start && j < start + 2;
      return inside ? block[i - start]![j - start]! : i === j ? 1 : 0;
    }),
  );
  return transform(state, matrix);
}

/** The real 2 × 2 matrix of a → u a + v a†. */
function blockOf(u: Complex, v: Complex): readonly (readonly number[])[] {
  return [
    [u.re + v.re, v.im - u.im],
    [u.im + v.im, u.re - v.re],
  ];
}

function squeezeMode(state: GaussianState, mode: Mode, r: number, direction: Complex): GaussianState {
  // Written with e^{±r}, so that the squeezed quadrature keeps its digits.
  const shrink = Math.exp(-r);
  const stretch = Math.exp(r);
  const { re: cos, im: sin } = direction;
  const even = (1 + cos) / 2;
  const odd = (1 - cos) / 2;
  return onMode(state, mode, [
    [shrink * even + stretch * odd, ((shrink - stretch) * sin) / 2],
    [((shrink - stretch) * sin) / 2, shrink * odd + stretch * even],
  ]);
}

function rotate(state: GaussianState, mode: Mode, direction: Complex): GaussianState {
  return onMode(state, mode, blockOf(direction, { re: 0, im: 0 }));
}

function twoModeBlocks(blocks: readonly (readonly (readonly (readonly number[])[])[])[]): number[][] {
  return Array.from({ length: 4 }, (_, i) =>
    Array.from({ length: 4 }, (__, j) => blocks[i >> 1]![j >> 1]![i & 1]![j & 1]!),
  );
}

function split(state: GaussianState, transmittance: number, direction: Complex): GaussianState {
  const none = { re: 0, im: 0 };
  const t = { re: Math.sqrt(transmittance), im: 0 };
  const r = Math.sqrt(1 - transmittance);
  const rho = { re: r * direction.re, im: r * direction.im };
  const back = { re: -rho.re, im: rho.im };
  return transform(
    state,
    twoModeBlocks([
      [blockOf(t, none), blockOf(rho, none)],
      [blockOf(back, none), blockOf(t, none)],
    ]),
  );
}

function twoModeSqueezeGaussian(state: GaussianState, r: number, direction: Complex): GaussianState {
  const none = { re: 0, im: 0 };
  const c = { re: Math.cosh(r), im: 0 };
  const s = { re: Math.sinh(r) * direction.re, im: Math.sinh(r) * direction.im };
  return transform(
    state,
    twoModeBlocks([
      [blockOf(c, none), blockOf(none, s)],
      [blockOf(none, s), blockOf(c, none)],
    ]),
  );
}

function channelGaussian(state: GaussianState, mode: Mode, gain: number, variance: number): GaussianState {
  const root = Math.sqrt(gain);
  const side = 2 * state.modes;
  const factor = (i: number) => (i >> 1 === mode - 1 ? root : 1);
  const mean = state.mean.map((value, i) => value * factor(i));
  const covariance = state.covariance.map((value, index) => {
    const i = Math.floor(index / side);
    const j = index % side;
    const both = i >> 1 === mode - 1 && j >> 1 === mode - 1 ? gain : factor(i) * factor(j);
    return value * both + (i === j && i >> 1 === mode - 1 ? variance : 0);
  });
  return { modes: state.modes, mean, covariance };
}

function reduce(state: GaussianState, mode: Mode): GaussianState {
  const start = 2 * mode - 2;
  const covariance = new Float64Array(4);
  for (let i = 0; i < 2; i++) {
    for (let j = 0; j < 2; j++) covariance[i * 2 + j] = state.covariance[(start + i) * 4 + start + j]!;
  }
  return { modes: 1, mean: state.mean.slice(start, start + 2), covariance };
}

/** The other mode after `mode` was found in the vacuum: a heterodyne result of 0. */
function silent(state: GaussianState, mode: Mode): GaussianState {
  const seen = 2 * mode - 2;
  const kept = 2 - seen;
  const at = (i: number, j: number) => state.covariance[i * 4 + j]!;
  const a = at(seen, seen) + 0.5;
  const b = at(seen, seen + 1);
  const d = at(seen + 1, seen + 1) + 0.5;
  const det = a * d - b * b;
  const inverse = [
    [d / det, -b / det],
    [-b / det, a / det],
  ] as const;
  const mean = new Float64Array(2);
  const covariance = new Float64Array(4);
  for (let i = 0; i < 2; i++) {
    mean[i] = state.mean[kept + i]!;
    for (let j = 0; j < 2; j++) covariance[i * 2 + j] = at(kept + i, kept + j);
    for (let k = 0; k < 2; k++) {
      for (let l = 0; l < 2; l++) {
        const gain = at(kept + i, seen + k) * inverse[k]![l]!;
        mean[i]! -= gain * state.mean[seen + l]!;
        for (let j = 0; j < 2; j++) covariance[i * 2 + j]! -= gain * at(seen + l, kept + j);
      }
    }
  }
  return { modes: 1, mean, covariance };
}
