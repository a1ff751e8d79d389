import { MethodDoesNotApply } from '../method-does-not-apply';
import { isChannel, type State } from '../state';

/** A complex value and an estimate of its absolute error. */
interface Estimate {
  readonly re: number;
  readonly im: number;
  readonly error: number;
}

/** A figure that is linear in the state, of the state turned by an angle: what is asked at a point is turned back. */
export type TurnedFigure = (state: State, angle: number) => Estimate;

const FEWEST_ANGLES = 32;
const MOST_ANGLES = 1024;
const EPS = 2 ** -52;

/**
 * A linear figure of a state in which phases are averaged: the sum over equally spaced angles, which converges
 * faster than any power because the figure is a smooth function of the angle.
 *
 * Formula: of f(φ) = Σ c_k e^{ikφ} the full average is c_0, that of dephasing by σ is Σ c_k e^{−σ²k²/2}.
 * @throws MethodDoesNotApply where 1,024 angles are not enough
 */
export function averagedOverPhase(given: State, figure: TurnedFigure): Estimate {
  return at(given, 0, figure);
}

function at(given: State, angle: number, figure: TurnedFigure): Estimate {
  const state = averageOutermost(given);
  if (state.kind === 'mixture' && state.modes === 1 && state.states.some(isAveraged)) {
    let [re, im, error] = [0, 0, 0];
    state.states.forEach((part, index) => {
      const probability = state.probabilities[index] ?? 0;
      if (probability === 0) return;
      const own = at(part, angle, figure);
      re += probability * own.re;
      im += probability * own.im;
      error += probability * own.error;
    });
    return { re, im, error };
  }
  if (state.kind !== 'phaseAveraged' && state.kind !== 'dephased') return figure(state, angle);
  const sigma = state.kind === 'dephased' ? state.sigma : Infinity;
  const values = new Map<number, Estimate>();
  let before: Estimate | undefined;
  for (let count = FEWEST_ANGLES; count <= MOST_ANGLES; count *= 2) {
    let [re, im, error, size] = [0, 0, 0, 0];
    for (let k = 0; k < count; k++) {
      const turn = k / count;
      let own = values.get(turn);
      if (own === undefined) {
        own = at(state.state, angle + 2 * Math.PI * turn, figure);
        values.set(turn, own);
      }
      const weight = weightOf(turn, count, sigma);
      re += weight * own.re;
      im += weight * own.im;
      error += Math.abs(weight) * own.error;
      size = Math.max(size, Math.hypot(own.re, own.im));
    }
    const here = { re, im, error: error + 8 * EPS * size };
    if (before !== undefined) {
      const moved = Math.hypot(re - before.re, im - before.im);
      if (moved <= 16 * EPS * size) return { ...here, error: here.error + moved };
    }
    before = here;
  }
  throw new MethodDoesNotApply('the average over phases converges too slowly');
}

/** Weight of one of `count` equally spaced angles, `turn` of a whole turn away: the wrapped normal law, band-limited. */
function weightOf(turn: number, count: number, sigma: number): number {
  let sum = 1;
  for (let k = 1; k < count / 2; k++) {
    const damped = Math.exp((-sigma * sigma * k * k) / 2);
    if (damped < 1e-18) break;
    sum += 2 * damped * Math.cos(2 * Math.PI * k * turn);
  }
  return sum / count;
}

const isAveraged = (state: State): boolean => {
  const { kind } = averageOutermost(state);
  return kind === 'phaseAveraged' || kind === 'dephased' || (kind === 'mixture' && containsAverage(state));
};

const containsAverage = (state: State): boolean => state.kind === 'mixture' && state.states.some(isAveraged);

/** Averages over phases commute with channels, phase shifts, and photons added or taken: they are carried outwards. */
function averageOutermost(state: State): State {
  if (state.modes === 2) return state;
  if (
    !isChannel(state) &&
    state.kind !== 'photonAdded' &&
    state.kind !== 'photonSubtracted' &&
    state.kind !== 'phaseShift'
  )
    return state;
  const inner = averageOutermost(state.state);
  if (inner.kind !== 'phaseAveraged' && inner.kind !== 'dephased') return state;
  return { ...inner, state: { ...state, pure: !isChannel(state) && inner.state.pure, state: inner.state } };
}
