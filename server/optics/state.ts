import type { Complex } from './complex';

/** Mode 1 or mode 2 of a joint state; a state of one mode has mode 1 only. */
export type Mode = 1 | 2;

interface Node {
  /** How many modes of light the state has. */
  readonly modes: 1 | 2;
  /** Whether it is known to be a pure state by the way it is written. */
  readonly pure: boolean;
}

/** |n⟩; the vacuum is |0⟩. */
export interface Fock extends Node {
  readonly kind: 'fock';
  readonly n: number;
}
export interface Coherent extends Node {
  readonly kind: 'coherent';
  readonly alpha: Complex;
}
export interface Thermal extends Node {
  readonly kind: 'thermal';
  readonly nbar: number;
}
/** S(ζ)|0⟩ with S(ζ) = exp[(ζ* a² − ζ a†²)/2]; r = |ζ|. */
export interface Squeezed extends Node {
  readonly kind: 'squeezed';
  readonly r: number;
  /** e^{iφ} of ζ = r e^{iφ}, the convention's sign already in it. */
  readonly direction: Complex;
}
/** ∝ |α⟩ + e^{iθ}|−α⟩. */
export interface Cat extends Node {
  readonly kind: 'cat';
  readonly alpha: Complex;
  readonly theta: number;
}
export interface Displaced extends Node {
  readonly kind: 'displaced';
  readonly state: State;
  readonly mode: Mode;
  readonly alpha: Complex;
}
export interface Squeeze extends Node {
  readonly kind: 'squeeze';
  readonly state: State;
  readonly mode: Mode;
  readonly r: number;
  readonly direction: Complex;
}
export interface Mixture extends Node {
  readonly kind: 'mixture';
  readonly probabilities: readonly number[];
  readonly states: readonly State[];
}
export interface PhaseAveraged extends Node {
  readonly kind: 'phaseAveraged';
  readonly state: State;
}
/** ρ_mn → ρ_mn e^{−σ²(m−n)²/2}. */
export interface Dephased extends Node {
  readonly kind: 'dephased';
  readonly state: State;
  readonly sigma: number;
}
/** a†ᵏ ρ aᵏ, renormalised. */
export interface PhotonAdded extends Node {
  readonly kind: 'photonAdded';
  readonly state: State;
  readonly k: number;
}
/** aᵏ ρ a†ᵏ, renormalised. */
export interface PhotonSubtracted extends Node {
  readonly kind: 'photonSubtracted';
  readonly state: State;
  readonly k: number;
}
export interface Product extends Node {
  readonly kind: 'product';
  readonly first: State;
  readonly second: State;
}
/** Σ (e^{iφ} tanh r)ⁿ/cosh r |n,n⟩. */
export interface TwinBeam extends Node {
  readonly kind: 'twinBeam';
  readonly r: number;
  readonly direction: Complex;
}
/** exp(ζ a₁†a₂† − ζ* a₁a₂). */
export interface TwoModeSqueeze extends Node {
  readonly kind: 'twoModeSqueeze';
  readonly state: State;
  readonly r: number;
  readonly direction: Complex;
}
/** b₁ = √T a₁ + e^{iφ}√R a₂, b₂ = −e^{−iφ}√R a₁ + √T a₂. */
export interface BeamSplitter extends Node {
  readonly kind: 'beamSplitter';
  readonly state: State;
  readonly transmittance: number;
  /** e^{iφ} of the reflection phase φ. */
  readonly direction: Complex;
}
export interface PhaseShift extends Node {
  readonly kind: 'phaseShift';
  readonly state: State;
  readonly mode: Mode;
  /** e^{iφ}. */
  readonly direction: Complex;
}
export interface Lose extends Node {
  readonly kind: 'lose';
  readonly state: State;
  readonly mode: Mode;
  readonly eta: number;
}
export interface Damp extends Node {
  readonly kind: 'damp';
  readonly state: State;
  readonly kappa: number;
  readonly t: number;
  readonly nbar: number;
  readonly omega: number;
}
export interface Amplify extends Node {
  readonly kind: 'amplify';
  readonly state: State;
  readonly mode: Mode;
  readonly gain: number;
  readonly nbar: number;
}
export interface Invert extends Node {
  readonly kind: 'invert';
  readonly state: State;
  readonly kappa: number;
  readonly t: number;
  readonly nbar: number;
  readonly omega: number;
}
/** The reduced state of one mode. */
export interface Output extends Node {
  readonly kind: 'output';
  readonly state: State;
  readonly mode: Mode;
}
/** The other mode's state given that n photons were found in `mode`. */
export interface Heralded extends Node {
  readonly kind: 'heralded';
  readonly state: State;
  readonly mode: Mode;
  readonly n: number;
}
/** The other mode's state given that a detector on `mode` told something from nothing. */
export interface Clicked extends Node {
  readonly kind: 'clicked';
  readonly state: State;
  readonly mode: Mode;
  readonly eta: number;
  readonly dark: number;
}
/** Σ c_j |ψ_j⟩ of pure states, normalised only when a figure is asked of it. */
export interface Superposition extends Node {
  readonly kind: 'superposition';
  readonly terms: readonly SuperpositionTerm[];
}
export interface SuperpositionTerm {
  readonly amplitude: Complex;
  readonly state: State;
}

/** A description of a state of light: how it is made, not numbers in a basis. Immutable and serialisable. */
export type State =
  | Fock
  | Coherent
  | Thermal
  | Squeezed
  | Cat
  | Displaced
  | Squeeze
  | Mixture
  | PhaseAveraged
  | Dephased
  | PhotonAdded
  | PhotonSubtracted
  | Product
  | TwinBeam
  | TwoModeSqueeze
  | BeamSplitter
  | PhaseShift
  | Lose
  | Damp
  | Amplify
  | Invert
  | Output
  | Heralded
  | Clicked
  | Superposition;

const KINDS: ReadonlySet<string> = new Set<State['kind']>([
  'fock',
  'coherent',
  'thermal',
  'squeezed',
  'cat',
  'displaced',
  'squeeze',
  'mixture',
  'phaseAveraged',
  'dephased',
  'photonAdded',
  'photonSubtracted',
  'product',
  'twinBeam',
  'twoModeSqueeze',
  'beamSplitter',
  'phaseShift',
  'lose',
  'damp',
  'amplify',
  'invert',
  'output',
  'heralded',
  'clicked',
  'superposition',
]);

/** Whether a value is a description of a state. */
export function isState(value: unknown): value is State {
  return (
    typeof value === 'object' &&
    value !== null &&
    'kind' in value &&
    typeof value.kind === 'string' &&
    KINDS.has(value.kind) &&
    'modes' in value
  );
}

/** A map a → g·a + noise that treats all quadratures alike: losses, damping, amplifiers. */
export interface Channel {
  /** Intensity gain: ⟨n⟩ → gain·⟨n⟩ + noise. */
  readonly gain: number;
  /** Quanta added in normal order: the P function is convolved with a Gaussian of this ⟨|α|²⟩. */
  readonly noise: number;
  /** e^{−iωt}, or e^{+iωt} of the inverted oscillator. */
  readonly rotation: number;
  readonly mode: Mode;
}

/**
 * What a loss, damping or amplification does to the mode, in one form.
 * ⟨a⟩ → √gain e^{i rotation} ⟨a⟩, ⟨n⟩ → gain ⟨n⟩ + noise.
 */
export function channelOf(state: Lose | Damp | Amplify | Invert): Channel {
  switch (state.kind) {
    case 'lose':
      return { gain: state.eta, noise: 0, rotation: 0, mode: state.mode };
    case 'amplify':
      return { gain: state.gain, noise: (state.gain - 1) * (1 + state.nbar), rotation: 0, mode: state.mode };
    case 'damp':
      return {
        gain: Math.exp(-state.kappa * state.t),
        noise: -state.nbar * Math.expm1(-state.kappa * state.t),
        rotation: -state.omega * state.t,
        mode: 1,
      };
    case 'invert':
      return {
        gain: Math.exp(state.kappa * state.t),
        noise: (1 + state.nbar) * Math.expm1(state.kappa * state.t),
        rotation: state.omega * state.t,
        mode: 1,
      };
  }
}

/** The kinds of state that are a channel on another state. */
export type ChannelState = Lose | Damp | Amplify | Invert;

export const isChannel = (state: State): state is ChannelState =>
  state.kind === 'lose' || state.kind === 'damp' || state.kind === 'amplify' || state.kind === 'invert';

/**
 * Channels that follow each other, as one for each mode: gains multiply, and later gains amplify earlier noise; those
 * of different modes commute.
 *
 * @returns the channels, and the state that they act on
 */
export function channelsOf(state: ChannelState): { readonly channels: readonly Channel[]; readonly inner: State } {
  const found = new Map<Mode, Channel>();
  let inner: State = state;
  while (isChannel(inner)) {
    const earlier = channelOf(inner);
    const later = found.get(earlier.mode) ?? { gain: 1, noise: 0, rotation: 0, mode: earlier.mode };
    found.set(earlier.mode, {
      gain: later.gain * earlier.gain,
      noise: later.noise + later.gain * earlier.noise,
      rotation: later.rotation + earlier.rotation,
      mode: earlier.mode,
    });
    inner = inner.state;
  }
  return { channels: [...found.values()], inner };
}

/** The same of one mode, where there is one channel only. */
export function channelChain(state: ChannelState): { readonly channel: Channel; readonly inner: State } {
  const { channels, inner } = channelsOf(state);
  const [channel = channelOf(state)] = channels;
  return { channel, inner };
}
