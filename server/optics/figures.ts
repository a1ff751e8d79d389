import { ArgumentReader } from './arguments';
import type { Complex } from './complex';
import { defaultConvention, type Convention } from './convention';
import type { State } from './state';
import { readState } from './states';
import { OpticsError } from './optics-error';

/** Requests that have a state and nothing more. */
type OfState<K extends string> = K extends string ? { readonly kind: K; readonly state: State } : never;

/** A figure asked of a state, with its checked arguments; angles, x and p are in the convention's own scale. */
export type FigureRequest =
  | OfState<'meanPhotons' | 'photonVariance' | 'mandelQ' | 'fanoFactor' | 'parity' | 'g2' | 'amplitude'>
  | OfState<'wignerNegativity' | 'entropy' | 'purity' | 'covariance'>
  | OfState<'coincidence' | 'g2Cross' | 'visibility' | 'fieldCorrelation' | 'logNegativity'>
  | { readonly kind: 'photonProbability'; readonly state: State; readonly n: number }
  | { readonly kind: 'photonDistribution'; readonly state: State; readonly nmax: number }
  | { readonly kind: 'gN'; readonly state: State; readonly order: number }
  | {
      readonly kind: 'countProbability';
      readonly state: State;
      readonly m: number;
      readonly eta: number;
      readonly dark: number;
    }
  | { readonly kind: 'quadratureMean'; readonly state: State; readonly theta: number }
  | { readonly kind: 'quadratureVariance'; readonly state: State; readonly theta: number }
  | { readonly kind: 'quadratureDensity'; readonly state: State; readonly x: number; readonly theta: number }
  | { readonly kind: 'wigner'; readonly state: State; readonly x: number; readonly p: number }
  | { readonly kind: 'husimi'; readonly state: State; readonly alpha: Complex }
  | { readonly kind: 'pFunction'; readonly state: State; readonly alpha: Complex }
  | { readonly kind: 'characteristic'; readonly state: State; readonly xi: Complex; readonly s: number }
  | { readonly kind: 'fidelity'; readonly state: State; readonly other: State }
  | { readonly kind: 'overlap'; readonly state: State; readonly other: State }
  | { readonly kind: 'matrixElement'; readonly state: State; readonly m: number; readonly n: number }
  | { readonly kind: 'densityMatrix'; readonly state: State; readonly nmax: number }
  | { readonly kind: 'atomInversion'; readonly state: State; readonly coupling: number; readonly t: number }
  | { readonly kind: 'jointProbability'; readonly state: State; readonly n: number; readonly m: number }
  | { readonly kind: 'heraldProbability'; readonly state: State; readonly mode: 1 | 2; readonly n: number }
  | {
      readonly kind: 'clickProbability';
      readonly state: State;
      readonly mode: 1 | 2;
      readonly eta: number;
      readonly dark: number;
    };

export type FigureKind = FigureRequest['kind'];

/** A figure and the convention that its arguments and its value are in. */
export type Figure = FigureRequest & { readonly convention: Convention };

/** The request of one kind of figure. */
export type FigureOf<K extends FigureKind> = Extract<FigureRequest, { readonly kind: K }>;

/** What a figure evaluates to: a number, a complex number, a list, or a matrix as rows. */
export type FigureValue = number | Complex | readonly number[] | readonly (readonly (number | Complex)[])[];

/** Makes a figure out of the arguments of a call, after checking their number, kinds and ranges. */
export type FigureFunction = (args: readonly unknown[], convention?: Convention) => Figure;

/** The largest block of a density matrix that a figure lists: 100 × 100 entries. */
const LARGEST_BLOCK = 99;
const LARGEST_LISTED = 9_999;
/** The highest order of a correlation function: 32 photons at once. */
const LARGEST_ORDER = 32;

/** A figure of `(state)` alone. */
function ofState<K extends OfState<FigureKind>['kind']>(kind: K, modes: 1 | 2 | 'any'): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(1, 1);
    // Every kind in K is a request that has a state and nothing more.
    return { kind, state: readState(reader, 0, modes), convention } as Figure;
  };
}

/** Every figure of the key language, by name. */
export const figureFunctions = {
  photonProbability: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('photonProbability', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 1);
    return { kind: 'photonProbability', state, n: reader.whole(1, 'photon number'), convention };
  },
  photonDistribution: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('photonDistribution', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 1);
    const nmax = reader.whole(1, 'largest photon number', 0, LARGEST_LISTED);
    return { kind: 'photonDistribution', state, nmax, convention };
  },
  meanPhotons: ofState('meanPhotons', 1),
  photonVariance: ofState('photonVariance', 1),
  mandelQ: ofState('mandelQ', 1),
  fanoFactor: ofState('fanoFactor', 1),
  parity: ofState('parity', 1),
  g2: ofState('g2', 1),
  gN: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('gN', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 1);
    return { kind: 'gN', state, order: reader.whole(1, 'order', 1, LARGEST_ORDER), convention };
  },
  countProbability: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('countProbability', args);
    reader.expectCount(2, 4);
    return {
      kind: 'countProbability',
      state: readState(reader, 0, 1),
      m: reader.whole(1, 'number of counts'),
      eta: reader.between(2, 'efficiency', 0, 1, 1),
      dark: reader.atLeast(3, 'dark counts', 0, 0),
      convention,
    };
  },
  amplitude: ofState('amplitude', 1),
  quadratureMean: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('quadratureMean', args);
    reader.expectCount(2, 2);
    return { kind: 'quadratureMean', state: readState(reader, 0, 1), theta: reader.real(1, 'angle'), convention };
  },
  quadratureVariance: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('quadratureVariance', args);
    reader.expectCount(2, 2);
    return { kind: 'quadratureVariance', state: readState(reader, 0, 1), theta: reader.real(1, 'angle'), convention };
  },
  quadratureDensity: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('quadratureDensity', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 1);
    return { kind: 'quadratureDensity', state, x: reader.real(1, 'x'), theta: reader.real(2, 'angle'), convention };
  },
  wigner: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('wigner', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 1);
    return { kind: 'wigner', state, x: reader.real(1, 'x'), p: reader.real(2, 'p'), convention };
  },
  husimi: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('husimi', args);
    reader.expectCount(2, 2);
    return { kind: 'husimi', state: readState(reader, 0, 1), alpha: reader.complex(1, 'amplitude'), convention };
  },
  pFunction: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('pFunction', args);
    reader.expectCount(2, 2);
    return { kind: 'pFunction', state: readState(reader, 0, 1), alpha: reader.complex(1, 'amplitude'), convention };
  },
  characteristic: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('characteristic', args);
    reader.expectCount(2, 3);
    return {
      kind: 'characteristic',
      state: readState(reader, 0, 1),
      xi: reader.complex(1, 'argument'),
      s: reader.between(2, 'order', -1, 1, 0),
      convention,
    };
  },
  wignerNegativity: ofState('wignerNegativity', 1),
  purity: ofState('purity', 'any'),
  entropy: ofState('entropy', 1),
  fidelity: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('fidelity', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 'any');
    return { kind: 'fidelity', state, other: readState(reader, 1, state.modes), convention };
  },
  overlap: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('overlap', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 'any');
    const other = readState(reader, 1, state.modes);
    for (const [index, operand] of [state, other].entries()) {
      if (operand.pure) continue;
      throw new OpticsError(
        `state must be pure for ⟨ψ|φ⟩ (\`fidelity\` takes any), got one made by \`${operand.kind}\``,
        { functionName: 'overlap', argument: 'state', argumentIndex: index, given: operand, allowed: 'a pure state' },
      );
    }
    return { kind: 'overlap', state, other, convention };
  },
  matrixElement: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('matrixElement', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 1);
    const m = reader.whole(1, 'row');
    return { kind: 'matrixElement', state, m, n: reader.whole(2, 'column'), convention };
  },
  densityMatrix: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('densityMatrix', args);
    reader.expectCount(2, 2);
    const state = readState(reader, 0, 1);
    return {
      kind: 'densityMatrix',
      state,
      nmax: reader.whole(1, 'largest photon number', 0, LARGEST_BLOCK),
      convention,
    };
  },
  covariance: ofState('covariance', 'any'),
  atomInversion: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('atomInversion', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 1);
    const coupling = reader.real(1, 'coupling');
    const t = reader.atLeast(2, 'time', 0);
    if (!Number.isFinite(coupling * t)) reader.refuse(2, 'time', 'keep g*t finite');
    return { kind: 'atomInversion', state, coupling, t, convention };
  },
  jointProbability: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('jointProbability', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 2);
    const n = reader.whole(1, 'photon number of mode 1');
    return { kind: 'jointProbability', state, n, m: reader.whole(2, 'photon number of mode 2'), convention };
  },
  coincidence: ofState('coincidence', 2),
  g2Cross: ofState('g2Cross', 2),
  visibility: ofState('visibility', 2),
  fieldCorrelation: ofState('fieldCorrelation', 2),
  logNegativity: ofState('logNegativity', 2),
  heraldProbability: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('heraldProbability', args);
    reader.expectCount(3, 3);
    const state = readState(reader, 0, 2);
    const mode = reader.mode(1);
    return { kind: 'heraldProbability', state, mode, n: reader.whole(2, 'photon number'), convention };
  },
  clickProbability: (args, convention = defaultConvention) => {
    const reader = new ArgumentReader('clickProbability', args);
    reader.expectCount(2, 4);
    const state = readState(reader, 0, 2);
    const mode = reader.mode(1);
    const eta = reader.between(2, 'efficiency', 0, 1, 1);
    return {
      kind: 'clickProbability',
      state,
      mode,
      eta,
      dark: reader.atLeast(3, 'dark counts', 0, 0),
      convention,
    };
  },
} as const satisfies Readonly<Record<FigureKind, FigureFunction>>;
