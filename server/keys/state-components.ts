import { MethodDoesNotApply } from '../optics/method-does-not-apply';
import { eachAmplitude, type JointKet } from '../optics/number-basis/joint-ket';
import { ensembleOf, numberState } from '../optics/number-basis/number-states';
import { defaultResolution } from '../optics/number-basis/resolution';
import type { NumberState } from '../optics/number-basis/one-mode';
import type { State } from '../optics/state';
import { KeyError } from './key-error';

/** ⟨photons|ψ⟩. */
export interface StateAmplitude {
  readonly photons: readonly number[];
  readonly re: number;
  readonly im: number;
}

/** ⟨row|ρ|column⟩. */
export interface StateElement {
  readonly row: readonly number[];
  readonly column: readonly number[];
  readonly re: number;
  readonly im: number;
}

/**
 * A state in a number basis, as plain data: a pure state by its amplitudes, a mixed one of one mode by its density matrix,
 * a mixed one of two modes by kets whose projectors add to it. What lies outside the basis is bounded by 1e-14.
 */
export type StateComponents =
  | { readonly modes: 1 | 2; readonly amplitudes: readonly StateAmplitude[] }
  | { readonly modes: 1 | 2; readonly elements: readonly StateElement[] }
  | { readonly modes: 1 | 2; readonly kets: readonly (readonly StateAmplitude[])[] };

/** Most entries that are handed on: a density matrix of 512 levels has as many. */
const mostEntries = 512 ** 2;

/**
 * Writes a state of light out in a number basis, so that an answer in Dirac notation can be compared with it.
 *
 * @throws KeyError where it vanishes, or would take more than 512 levels as a density matrix or 16,384 as a ket
 */
export function stateComponents(state: State): StateComponents {
  try {
    if (state.modes === 1) return ofOneMode(numberState(state, defaultResolution));
    const { kets } = ensembleOf(state, defaultResolution);
    const written = kets.map(amplitudesOfKet);
    if (written.reduce((sum, ket) => sum + ket.length, 0) > mostEntries) throw tooLarge();
    const [only] = written;
    return only && written.length === 1 ? { modes: 2, amplitudes: only } : { modes: 2, kets: written };
  } catch (error) {
    if (!(error instanceof MethodDoesNotApply)) throw error;
    throw new KeyError(`The state cannot be compared with answers: ${error.message}.`, null);
  }
}

const tooLarge = () => new KeyError('The state has too many components to be compared with answers.', null);

function amplitudesOfKet(ket: JointKet): readonly StateAmplitude[] {
  const amplitudes: StateAmplitude[] = [];
  eachAmplitude(ket, (n1, n2, re, im) => void amplitudes.push({ photons: [n1, n2], re, im }));
  return amplitudes;
}

function ofOneMode(state: NumberState): StateComponents {
  if (state.kind === 'ket') {
    const amplitudes = Array.from({ length: state.levels }, (_, n) => ({
      photons: [n],
      re: state.re[n] ?? 0,
      im: state.im[n] ?? 0,
    }));
    return { modes: 1, amplitudes: amplitudes.filter(({ re, im }) => re !== 0 || im !== 0) };
  }
  if (state.kind === 'diagonal') {
    const filled = [...state.p.entries()].filter(([, p]) => p !== 0);
    const [only] = filled;
    if (only && filled.length === 1) return { modes: 1, amplitudes: [{ photons: [only[0]], re: 1, im: 0 }] };
    return { modes: 1, elements: filled.map(([n, p]) => ({ row: [n], column: [n], re: p, im: 0 })) };
  }
  const elements: StateElement[] = [];
  for (let m = 0; m < state.levels; m += 1) {
    for (let n = 0; n < state.levels; n += 1) {
      const [re, im] = [state.re[m * state.levels + n] ?? 0, state.im[m * state.levels + n] ?? 0];
      if (re !== 0 || im !== 0) elements.push({ row: [m], column: [n], re, im });
    }
  }
  return { modes: 1, elements };
}
