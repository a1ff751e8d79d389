import type { Channel } from '../state';
import { amplifyDensity, amplifyDiagonal, loseDensity, loseDiagonal } from './number-maps';
import {
  checkDensityLevels,
  densityOf,
  diagonalOf,
  type NumberDensity,
  type NumberDiagonal,
  type NumberState,
} from './one-mode';

/** An amplifier with noise is a loss before an amplifier without: η·G' = gain, G' − 1 = noise. */
export function asLossAndGain({ gain, noise }: Channel): { readonly eta: number; readonly amplification: number } {
  const amplification = noise === 0 && gain <= 1 ? 1 : 1 + noise;
  return { eta: Math.min(1, gain / amplification), amplification };
}

/** A loss, an amplifier or both on a state of one mode in numbers; `size` is asked only where levels are added. */
export function applyChannel(
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
