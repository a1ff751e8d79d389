import type { State } from '../state';

/** A description of the state that one factor becomes, so that the one-mode rules apply to it. */
function ofFactor(state: State, first: State, second: State, mode: 1 | 2, change: (factor: State) => State): State {
  const changed = change(mode === 1 ? first : second);
  return {
    kind: 'product',
    modes: 2,
    pure: state.pure,
    first: mode === 1 ? changed : first,
    second: mode === 2 ? changed : second,
  };
}

/** Operations on one mode of a product are carried into its factor. */
export function pushedIn(state: State): State {
  switch (state.kind) {
    case 'displaced':
    case 'squeeze':
    case 'phaseShift':
    case 'lose':
    case 'amplify': {
      const inner = pushedIn(state.state);
      if (inner.kind !== 'product') return state;
      return ofFactor(state, inner.first, inner.second, state.mode, (factor) => ({
        ...state,
        modes: 1,
        mode: 1,
        state: factor,
        pure: factor.pure && state.pure,
      }));
    }
    default:
      return state;
  }
}
