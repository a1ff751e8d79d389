import { StateVanishes } from '../method-does-not-apply';
import type { NumberState } from './one-mode';
import type { Resolution } from './resolution';

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
export function conditioned(resolution: Resolution, make: (finer: Resolution) => Conditioned): NumberState {
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
