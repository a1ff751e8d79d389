import { ArgumentReader } from './arguments';
import type { Complex } from './complex';
import { defaultConvention, type Convention } from './convention';
import type { State } from './state';
import { readState } from './states';
import { OpticsError } from './optics-error';

/** A figure asked of a state, with its checked arguments; angles, x and p are in the convention's own scale. */
export type FigureRequest =
  | { readonly kind: 'photonProbability'; readonly state: State; readonly n: number }
  | { readonly kind: 'photonDistribution'; readonly state: State; readonly nmax: number }
  | { readonly kind: 'meanPhotons' | 'photonVariance' | 'mandelQ' | 'fanoFactor' | 'parity'; readonly state: State }
  | { readonly kind: 'g2' | 'amplitude' | 'wignerNegativity' | 'entropy'; readonly state: State }
  | { readonly kind: 'purity' | 'covariance'; readonly state: State }
  | { readonly kind: 'gN'; readonly state: State; readonly order: number }
  | {
      readonly kind: 'countProbability';
      readonly state: State;
      readonly m: number;
      readonly eta: number;
      readonly dark: number;
    }
  | { readonly kind: 'quadratureMean' | 'quadratureVariance'; readonly state: State; readonly theta: number }
  | { readonly kind: 'quadratureDensity'; readonly state: State; readonly x: number; readonly theta: number }
  | { readonly kind: 'wigner'; readonly state: State; readonly x: number; readonly p: number }
  | { readonly kind: 'husimi' | 'pFunction'; readonly state: State; readonly alpha: Complex }
  | { readonly kind: 'characteristic'; readonly state: State; readonly xi: Complex; readonly s: number }
  | { readonly kind: 'fidelity' | 'overlap'; readonly state: State; readonly other: State }
  | { readonly kind: 'matrixElement'; readonly state: State; readonly m: number; readonly n: number }
  | { readonly kind: 'densityMatrix'; readonly state: State; readonly nmax: number }
  | { readonly kind: 'atomInversion'; readonly state: State; readonly coupling: number; readonly t: number }
  | { readonly kind: 'jointProbability'; readonly state: State; readonly n: number; readonly m: number }
  | { readonly kind: 'coincidence' | 'g2Cross' | 'visibility'; readonly state: State }
  | { readonly kind: 'fieldCorrelation' | 'logNegativity'; readonly state: State }
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

function plain(kind: 'meanPhotons' | 'photonVariance' | 'mandelQ' | 'fanoFactor' | 'parity'): FigureFunction;
function plain(kind: 'g2' | 'amplitude' | 'wignerNegativity' | 'entropy'): FigureFunction;
function plain(
  kind:
    | 'meanPhotons'
    | 'photonVariance'
    | 'mandelQ'
    | 'fanoFactor'
    | 'parity'
    | 'g2'
    | 'amplitude'
    | 'wignerNegativity'
    | 'entropy',
): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(1, 1);
    return { kind, state: readState(reader, 0, 1), convention };
  };
}

function ofAnyState(kind: 'purity' | 'covariance'): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(1, 1);
    return { kind, state: readState(reader, 0, 'any'), convention };
  };
}

function ofJointState(
  kind: 'coincidence' | 'g2Cross' | 'visibility' | 'fieldCorrelation' | 'logNegativity',
): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(1, 1);
    return { kind, state: readState(reader, 0, 2), convention };
  };
}

function ofAngle(kind: 'quadratureMean' | 'quadratureVariance'): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(2, 2);
    return { kind, state: readState(reader, 0, 1), theta: reader.real(1, 'angle'), convention };
  };
}

function ofAmplitude(kind: 'husimi' | 'pFunction'): FigureFunction {
  return (args, convention = defaultConvention) => {
    const reader = new ArgumentReader(kind, args);
    reader.expectCount(2, 2);
    return { kind, state: readState(reader, 0, 1), alpha: reader.complex(1, 'amplitude'), convention };
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
  meanPhotons: plain('meanPhotons'),
  photonVariance: plain('photonVariance'),
  mandelQ: plain('mandelQ'),
  fanoFactor: plain('fanoFactor'),
  parity: plain('parity'),
  g2: plain('g2'),
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
  amplitude: plain('amplitude'),
  quadratureMean: ofAngle('quadratureMean'),
  quadratureVariance: ofAngle('quadratureVariance'),
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
  husimi: ofAmplitude('husimi'),
  pFunction: ofAmplitude('pFunction'),
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
  wignerNegativity: plain('wignerNegativity'),
  purity: ofAnyState('purity'),
  entropy: plain('entropy'),
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
        `⟨ψ|φ⟩ is defined for pure states only, and \`${operand.kind}\` here is not one; \`fidelity\` takes any`,
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
  covariance: ofAnyState('covariance'),
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
  coincidence: ofJointState('coincidence'),
  g2Cross: ofJointState('g2Cross'),
  visibility: ofJointState('visibility'),
  fieldCorrelation: ofJointState('fieldCorrelation'),
  logNegativity: ofJointState('logNegativity'),
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
