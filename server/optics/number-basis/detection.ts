import { binomialProbability } from '../special/distributions';
import { channelsOf, isChannel, type Channel, type State } from '../state';
import { asLossAndGain } from './channels-on-numbers';

type Detected = Extract<State, { readonly kind: 'output' | 'heralded' | 'clicked' }>;

/** The probability of a detector of efficiency η with dark counts to tell something of n photons. */
export const clickWeight = (n: number, eta: number, dark: number): number =>
  eta === 1 && n > 0 ? 1 : -Math.expm1((n === 0 ? 0 : n * Math.log1p(-eta)) - dark);

/**
 * What is left to do for the state of one mode of two. Losses and amplifiers on the mode that is left commute with what
 * is done to the other; those on the other change what its detector tells of a photon number.
 */
export function detection(state: Detected): {
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
