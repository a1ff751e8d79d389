import { abs2 } from '../complex';
import type { Figure } from '../figures';
import { largestNumber } from '../photon-bounds';
import { binomialProbability, geometric, poisson } from '../special/distributions';
import { channelsOf, isChannel, type State } from '../state';

/** P(n) of the states that have it in closed form, without a basis around it. */
export function entryAlone(state: State, n: number): number | undefined {
  switch (state.kind) {
    case 'fock':
      return state.n === n ? 1 : 0;
    case 'coherent':
      return poisson(n, abs2(state.alpha));
    case 'thermal':
      return geometric(n, state.nbar);
    case 'lose':
      if (state.state.kind === 'fock') return binomialProbability(state.state.n, n, state.eta);
      return undefined;
    default:
      return undefined;
  }
}

/** Figures of single entries of a basis, which need no more levels than themselves where entries stand alone. */
export function asksForEntries(figure: Figure): boolean {
  switch (figure.kind) {
    case 'photonProbability':
    case 'photonDistribution':
    case 'matrixElement':
    case 'densityMatrix':
      return entriesStandAlone(figure.state);
    case 'jointProbability':
      return isChannel(figure.state) && largestNumber(channelsOf(figure.state).inner) !== undefined;
    default:
      return false;
  }
}

/** Whether each entry in the number basis has a form of its own, whatever else is kept. */
function entriesStandAlone(state: State): boolean {
  switch (state.kind) {
    case 'fock':
    case 'coherent':
    case 'thermal':
    case 'squeezed':
    case 'cat':
      return true;
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
      return state.modes === 1 && entriesStandAlone(state.state);
    case 'mixture':
      return state.modes === 1 && state.states.every(entriesStandAlone);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert':
      // Of a state that ends, each entry is a finite sum.
      return state.modes === 1 && largestNumber(state.state) !== undefined && entriesStandAlone(state.state);
    default:
      return false;
  }
}
