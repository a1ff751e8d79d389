import { ArgumentReader, LARGEST_PHOTON_NUMBER, LARGEST_SQUEEZING } from './arguments';
import { abs2, phase, times, type Complex } from './complex';
import { defaultConvention, type Convention } from './convention';
import { OpticsError } from './optics-error';
import { isState, type Mode, type State, type SuperpositionTerm } from './state';

/** Makes a state out of the arguments of a call, after checking their number, kinds and ranges. */
export type StateFunction = (args: readonly unknown[], convention?: Convention) => State;

/** Reads a state of one mode, of two, or of either. */
export function readState(reader: ArgumentReader, index: number, modes: 1 | 2 | 'any'): State {
  const given = reader.at(index);
  const wanted = modes === 'any' ? 'a state' : modes === 1 ? 'a state of one mode' : 'a state of two modes';
  const hint = modes === 1 ? ' (`output(joint, mode)` is the state of one mode of a joint state)' : '';
  if (!isState(given)) return reader.refuse(index, `argument ${index + 1}`, `be ${wanted}`);
  if (modes !== 'any' && given.modes !== modes) {
    return reader.refuse(index, `argument ${index + 1}`, `be ${wanted}${given.modes === 2 ? hint : ''}`);
  }
  return given;
}

/**
 * Reads `(state, …)` or `(joint, mode, …)`: where the mode is written for a state of one mode, or missing
 * for one of two, the count of arguments says so.
 */
function readStateAndMode(
  reader: ArgumentReader,
  extraLeast: number,
  extraMost: number,
): { readonly state: State; readonly mode: Mode; readonly next: number } {
  const state = readState(reader, 0, 'any');
  if (state.modes === 1) {
    reader.expectCount(1 + extraLeast, 1 + extraMost);
    return { state, mode: 1, next: 1 };
  }
  reader.expectCount(2 + extraLeast, 2 + extraMost);
  return { state, mode: reader.mode(1), next: 2 };
}

function readDirection(reader: ArgumentReader, index: number, sign: 1 | -1): Complex {
  return times(phase(reader.real(index, 'angle', 0)), sign);
}

function readPhase(reader: ArgumentReader, index: number, argument: string, fallback: number): Complex {
  return phase(reader.real(index, argument, fallback));
}

const fockState = (n: number): State => ({ kind: 'fock', modes: 1, pure: true, n });

const productState = (first: State, second: State): State => ({
  kind: 'product',
  modes: 2,
  pure: first.pure && second.pure,
  first,
  second,
});

/** The largest κt, so that gains and losses stay finite numbers. */
const LARGEST_EXPONENT = 700;

function readOscillator(name: string, args: readonly unknown[]) {
  const reader = new ArgumentReader(name, args);
  reader.expectCount(3, 5);
  const state = readState(reader, 0, 1);
  const kappa = reader.atLeast(1, 'decay rate', 0);
  const t = reader.atLeast(2, 'time', 0);
  const nbar = reader.atLeast(3, 'bath occupation', 0, 0);
  const omega = reader.real(4, 'frequency', 0);
  if (!Number.isFinite(kappa * t) || !Number.isFinite(omega * t)) {
    reader.refuse(2, 'time', 'keep kappa*t and omega*t finite');
  }
  return { reader, state, kappa, t, nbar, omega };
}

/** Every state and every operation of the key language, by name. */
export const stateFunctions = {
  vacuum: (args) => {
    new ArgumentReader('vacuum', args).expectCount(0, 0);
    return fockState(0);
  },

  fock: (args) => {
    const reader = new ArgumentReader('fock', args);
    reader.expectCount(1, 1);
    return fockState(reader.whole(0, 'photon number'));
  },

  ket: (args) => {
    const reader = new ArgumentReader('ket', args);
    reader.expectCount(1, 2);
    const first = fockState(reader.whole(0, 'photon number'));
    return reader.count === 1 ? first : productState(first, fockState(reader.whole(1, 'photon number')));
  },

  coherent: (args) => {
    const reader = new ArgumentReader('coherent', args);
    reader.expectCount(1, 1);
    return { kind: 'coherent', modes: 1, pure: true, alpha: reader.amplitude(0) };
  },

  thermal: (args) => {
    const reader = new ArgumentReader('thermal', args);
    reader.expectCount(1, 1);
    const nbar = reader.atLeast(0, 'mean photon number', 0);
    return { kind: 'thermal', modes: 1, pure: nbar === 0, nbar };
  },

  squeezed: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('squeezed', args);
    reader.expectCount(1, 2);
    return {
      kind: 'squeezed',
      modes: 1,
      pure: true,
      r: reader.between(0, 'squeezing', 0, LARGEST_SQUEEZING),
      direction: readDirection(reader, 1, convention.squeezingSign),
    };
  },

  cat: (args) => {
    const reader = new ArgumentReader('cat', args);
    reader.expectCount(1, 2);
    const alpha = reader.amplitude(0);
    const theta = reader.real(1, 'phase', 0);
    const half = Math.cos(theta / 2);
    // 1 + cos θ e^{−2|α|²} without cancellation.
    if (2 * half * half + Math.cos(theta) * Math.expm1(-2 * abs2(alpha)) < 1e-30) {
      reader.refuse(0, 'amplitude', 'be large enough for the difference of the two coherent states not to vanish');
    }
    return { kind: 'cat', modes: 1, pure: true, alpha, theta };
  },

  displaced: (args) => {
    const reader = new ArgumentReader('displaced', args);
    const { state, mode, next } = readStateAndMode(reader, 1, 1);
    return {
      kind: 'displaced',
      modes: state.modes,
      pure: state.pure,
      state,
      mode,
      alpha: reader.amplitude(next, 'displacement'),
    };
  },

  squeeze: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('squeeze', args);
    const { state, mode, next } = readStateAndMode(reader, 1, 2);
    return {
      kind: 'squeeze',
      modes: state.modes,
      pure: state.pure,
      state,
      mode,
      r: reader.between(next, 'squeezing', 0, LARGEST_SQUEEZING),
      direction: readDirection(reader, next + 1, convention.squeezingSign),
    };
  },

  mixture: (args) => {
    const reader = new ArgumentReader('mixture', args);
    reader.expectCount(2, 2);
    const probabilities = reader.reals(0, 'probabilities');
    const given = reader.list(1, 'states');
    if (given.length !== probabilities.length || given.length === 0) {
      reader.refuse(1, 'states', `be as many as the ${probabilities.length} probabilities, and at least one`);
    }
    const states = given.map((entry) =>
      isState(entry) ? entry : reader.refuse(1, 'states', 'be a list of states of light'),
    );
    const modes = states[0]?.modes ?? 1;
    if (states.some((state) => state.modes !== modes)) reader.refuse(1, 'states', 'have the same number of modes');
    if (probabilities.some((p) => p < 0 || p > 1)) reader.refuse(0, 'probabilities', 'lie between 0 and 1');
    const sum = probabilities.reduce((total, p) => total + p, 0);
    if (Math.abs(sum - 1) > 1e-9) {
      throw new OpticsError(`probabilities must add to 1 within 1e-9, got ${sum}`, {
        functionName: 'mixture',
        argument: 'probabilities',
        argumentIndex: 0,
        given: sum,
        allowed: 'add to 1 within 1e-9',
      });
    }
    const present = states.filter((_, index) => (probabilities[index] ?? 0) > 0);
    return {
      kind: 'mixture',
      modes,
      pure: present.length === 1 && present[0]?.pure === true,
      probabilities,
      states,
    };
  },

  phaseAveraged: (args) => {
    const reader = new ArgumentReader('phaseAveraged', args);
    reader.expectCount(1, 1);
    return { kind: 'phaseAveraged', modes: 1, pure: false, state: readState(reader, 0, 1) };
  },

  dephased: (args) => {
    const reader = new ArgumentReader('dephased', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 1);
    const sigma = reader.atLeast(1, 'phase spread', 0);
    return { kind: 'dephased', modes: 1, pure: state.pure && sigma === 0, state, sigma };
  },

  photonAdded: (args) => {
    const reader = new ArgumentReader('photonAdded', args);
    reader.expectCount(1, 2);
    const state = readState(reader, 0, 1);
    const k = reader.whole(1, 'number of photons', 0, LARGEST_PHOTON_NUMBER, 1);
    return { kind: 'photonAdded', modes: 1, pure: state.pure, state, k };
  },

  photonSubtracted: (args) => {
    const reader = new ArgumentReader('photonSubtracted', args);
    reader.expectCount(1, 2);
    const state = readState(reader, 0, 1);
    const k = reader.whole(1, 'number of photons', 0, LARGEST_PHOTON_NUMBER, 1);
    return { kind: 'photonSubtracted', modes: 1, pure: state.pure, state, k };
  },

  product: (args) => {
    const reader = new ArgumentReader('product', args);
    reader.expectCount(2, 2);
    return productState(readState(reader, 0, 1), readState(reader, 1, 1));
  },

  twinBeam: (args) => {
    const reader = new ArgumentReader('twinBeam', args);
    reader.expectCount(1, 2);
    const r = reader.between(0, 'squeezing', 0, LARGEST_SQUEEZING);
    return { kind: 'twinBeam', modes: 2, pure: true, r, direction: readDirection(reader, 1, 1) };
  },

  noon: (args) => {
    const reader = new ArgumentReader('noon', args);
    reader.expectCount(1, 2);
    const n = reader.whole(0, 'photon number');
    const direction = readPhase(reader, 1, 'phase', 0);
    const terms: readonly SuperpositionTerm[] = [
      { amplitude: { re: Math.SQRT1_2, im: 0 }, state: productState(fockState(n), fockState(0)) },
      { amplitude: times(direction, Math.SQRT1_2), state: productState(fockState(0), fockState(n)) },
    ];
    return { kind: 'superposition', modes: 2, pure: true, terms };
  },

  twoModeSqueeze: (args) => {
    const reader = new ArgumentReader('twoModeSqueeze', args);
    reader.expectCount(2, 3);
    const state = readState(reader, 0, 2);
    const r = reader.between(1, 'squeezing', 0, LARGEST_SQUEEZING);
    return { kind: 'twoModeSqueeze', modes: 2, pure: state.pure, state, r, direction: readDirection(reader, 2, 1) };
  },

  beamSplitter: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('beamSplitter', args);
    reader.expectCount(2, 3);
    const state = readState(reader, 0, 2);
    const transmittance = reader.between(1, 'transmittance', 0, 1);
    const direction = readPhase(reader, 2, 'reflection phase', convention.splitterPhase);
    return { kind: 'beamSplitter', modes: 2, pure: state.pure, state, transmittance, direction };
  },

  phaseShift: (args) => {
    const reader = new ArgumentReader('phaseShift', args);
    const { state, mode, next } = readStateAndMode(reader, 1, 1);
    const direction = readPhase(reader, next, 'phase', 0);
    return { kind: 'phaseShift', modes: state.modes, pure: state.pure, state, mode, direction };
  },

  machZehnder: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('machZehnder', args);
    reader.expectCount(4, 4);
    const state = readState(reader, 0, 2);
    const reflection = phase(convention.splitterPhase);
    const { pure } = state;
    const split: State = {
      kind: 'beamSplitter',
      modes: 2,
      pure,
      state,
      transmittance: reader.between(1, 'transmittance of the first splitter', 0, 1),
      direction: reflection,
    };
    const direction = phase(reader.real(2, 'phase'));
    const shifted: State = { kind: 'phaseShift', modes: 2, pure, state: split, mode: 1, direction };
    return {
      kind: 'beamSplitter',
      modes: 2,
      pure,
      state: shifted,
      transmittance: reader.between(3, 'transmittance of the second splitter', 0, 1),
      direction: reflection,
    };
  },

  lose: (args) => {
    const reader = new ArgumentReader('lose', args);
    const { state, mode, next } = readStateAndMode(reader, 1, 1);
    const eta = reader.between(next, 'transmissivity', 0, 1);
    return { kind: 'lose', modes: state.modes, pure: state.pure && eta === 1, state, mode, eta };
  },

  damp: (args) => {
    const { state, kappa, t, nbar, omega } = readOscillator('damp', args);
    return { kind: 'damp', modes: 1, pure: state.pure && kappa * t === 0, state, kappa, t, nbar, omega };
  },

  amplify: (args) => {
    const reader = new ArgumentReader('amplify', args);
    const { state, mode, next } = readStateAndMode(reader, 1, 2);
    const gain = reader.atLeast(next, 'gain', 1);
    const nbar = reader.atLeast(next + 1, 'bath occupation', 0, 0);
    return { kind: 'amplify', modes: state.modes, pure: state.pure && gain === 1, state, mode, gain, nbar };
  },

  invert: (args) => {
    const { reader, state, kappa, t, nbar, omega } = readOscillator('invert', args);
    if (kappa * t > LARGEST_EXPONENT) reader.refuse(2, 'time', `keep kappa*t at most ${LARGEST_EXPONENT}`);
    return { kind: 'invert', modes: 1, pure: state.pure && kappa * t === 0, state, kappa, t, nbar, omega };
  },

  output: (args) => {
    const reader = new ArgumentReader('output', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 2);
    const mode = reader.mode(1);
    const pure = state.kind === 'product' && (mode === 1 ? state.first : state.second).pure;
    return { kind: 'output', modes: 1, pure, state, mode };
  },

  heralded: (args) => {
    const reader = new ArgumentReader('heralded', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 2);
    const mode = reader.mode(1);
    return { kind: 'heralded', modes: 1, pure: state.pure, state, mode, n: reader.whole(2, 'photon number') };
  },

  clicked: (args) => {
    const reader = new ArgumentReader('clicked', args);
    reader.expectCount(2, 4);
    const state = readState(reader, 0, 2);
    const mode = reader.mode(1);
    const eta = reader.between(2, 'efficiency', 0, 1, 1);
    return { kind: 'clicked', modes: 1, pure: false, state, mode, eta, dark: reader.atLeast(3, 'dark counts', 0, 0) };
  },
} as const satisfies Readonly<Record<string, StateFunction>>;

/** The name of a function that makes a state. */
export type StateFunctionName = keyof typeof stateFunctions;
