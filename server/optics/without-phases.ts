import type { State } from './state';
import { StateMemo } from './state-memo';

const cache = new StateMemo<State>();

/**
 * A state of one mode with the same photon numbers but without phase averages, dephasing and phase shifts.
 *
 * They commute with losses, amplifiers and adding or taking photons, and leave every figure of photon numbers
 * alone; without them more states are sums of Gaussians.
 */
export function withoutPhases(state: State): State {
  const known = cache.get(state);
  if (known !== undefined) return known;
  const stripped = strip(state);
  cache.set(state, stripped);
  return stripped;
}

function strip(state: State): State {
  if (state.modes === 2) return state;
  switch (state.kind) {
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
      return withoutPhases(state.state);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert':
    case 'photonAdded':
    case 'photonSubtracted': {
      const inner = withoutPhases(state.state);
      return inner === state.state ? state : { ...state, state: inner, pure: state.pure };
    }
    case 'mixture': {
      const states = state.states.map(withoutPhases);
      return states.every((inner, index) => inner === state.states[index]) ? state : { ...state, states };
    }
    default:
      return state;
  }
}
