import { ONE, divide, multiply, type Complex } from './complex';
import { OpticsError } from './optics-error';
import type { State, SuperpositionTerm } from './state';

/** How a state is named in the error of an operation that only takes pure states. */
const notPure = (operation: string, state: State): OpticsError =>
  new OpticsError(
    `only pure states can be ${operation}, and \`${state.kind}\` here is not one; write a mixture with \`mixture\``,
    { functionName: state.kind, given: state, allowed: 'a pure state' },
  );

function termsOf(state: State, operation: string): readonly SuperpositionTerm[] {
  if (!state.pure) throw notPure(operation, state);
  return state.kind === 'superposition' ? state.terms : [{ amplitude: ONE, state }];
}

/** |ψ⟩ + |φ⟩, for the language's `+`. */
export function addStates(left: State, right: State): State {
  return combine(left, right, ONE, 'added');
}

/** |ψ⟩ − |φ⟩, for the language's `-`. */
export function subtractStates(left: State, right: State): State {
  return combine(left, right, { re: -1, im: 0 }, 'subtracted');
}

function combine(left: State, right: State, factor: Complex, operation: string): State {
  const first = termsOf(left, operation);
  const second = termsOf(right, operation);
  if (left.modes !== right.modes) {
    throw new OpticsError(
      `states must have the same number of modes to be ${operation}, got ${left.modes} and ${right.modes}`,
      { functionName: right.kind, given: right, allowed: 'states of the same number of modes' },
    );
  }
  const added = second.map((term) => ({ ...term, amplitude: multiply(term.amplitude, factor) }));
  return { kind: 'superposition', modes: left.modes, pure: true, terms: [...first, ...added] };
}

/** c|ψ⟩, for the language's `*` and unary minus. */
export function multiplyState(factor: Complex | number, state: State): State {
  const amplitude = typeof factor === 'number' ? { re: factor, im: 0 } : factor;
  if (!Number.isFinite(amplitude.re) || !Number.isFinite(amplitude.im)) {
    throw new OpticsError('a state can only be multiplied by a finite number', { functionName: state.kind });
  }
  const terms = termsOf(state, 'multiplied by a number').map((term) => ({
    ...term,
    amplitude: multiply(term.amplitude, amplitude),
  }));
  return { kind: 'superposition', modes: state.modes, pure: true, terms };
}

/** |ψ⟩/c, for the language's `/`. */
export function divideState(state: State, divisor: Complex | number): State {
  const by = typeof divisor === 'number' ? { re: divisor, im: 0 } : divisor;
  if (by.re === 0 && by.im === 0) {
    throw new OpticsError('a state cannot be divided by 0', { functionName: state.kind, given: 0 });
  }
  return multiplyState(divide(ONE, by), state);
}
