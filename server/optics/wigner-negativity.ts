import { MethodDoesNotApply } from './method-does-not-apply';
import { planeNegativity, type NegativityEstimate, type WignerGrid } from './plane-negativity';
import { levelsFor } from './photon-bounds';
import type { State } from './state';
import { gaussLegendre } from './special/gauss-legendre';

/** Gaussian Wigner functions are nowhere negative. */
export const gaussianNegativity: NegativityEstimate = { value: 0, error: 0 };

const NODES = gaussLegendre(16);

/** Radius in phase space beyond which a state of so many levels has nothing. */
const radiusOf = (levels: number): number => Math.sqrt(2 * levels + 1) + 4;

/** Whether a state's Wigner function depends on the distance from 0 alone. */
function isRound(state: State): boolean {
  switch (state.kind) {
    case 'fock':
    case 'thermal':
    case 'phaseAveraged':
      return true;
    case 'mixture':
      return state.states.every(isRound);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert':
    case 'photonAdded':
    case 'photonSubtracted':
    case 'dephased':
      return isRound(state.state);
    case 'phaseShift':
      return state.modes === 1 && isRound(state.state);
    default:
      return false;
  }
}

/**
 * A state of one mode without the displacements, squeezers and phase shifts that come last: they only move and stretch
 * the Wigner function, so that ∫|W| stays.
 */
export function withoutGaussianUnitaries(state: State): State {
  const last = state.kind === 'displaced' || state.kind === 'squeeze' || state.kind === 'phaseShift';
  return last && state.modes === 1 ? withoutGaussianUnitaries(state.state) : state;
}

/**
 * ∫|W| dx dp − 1.
 *
 * @param state the state, for its size and symmetry
 * @param grid its Wigner function
 * @param exact whether single lines of it are quick to compute; otherwise it is sampled once
 * @returns relative error about 1e-10 for round states, 1e-7 for others
 * @throws MethodDoesNotApply where the state is too large
 */
export function negativityOf(state: State, grid: WignerGrid, exact = false): NegativityEstimate {
  const size = levelsFor(state, Math.log(1e-13));
  if (size.levels > 400) throw new MethodDoesNotApply('the Wigner function has too fine a structure to be integrated');
  return isRound(state)
    ? roundNegativity(size.levels, grid)
    : planeNegativity(size.levels, radiusOf(size.levels), grid, exact);
}

/** 2π ∫ |W(r)| r dr between its zeros. */
function roundNegativity(levels: number, grid: WignerGrid): NegativityEstimate {
  const zero = Float64Array.of(0);
  const at = (rs: Float64Array): Float64Array => grid(rs, zero);
  const radius = radiusOf(levels);
  const steps = Math.max(200, 12 * levels);
  const points = Float64Array.from({ length: steps + 1 }, (_, k) => (radius * k) / steps);
  const values = at(points);
  const largest = values.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
  const roots: number[] = [0];
  for (let k = 0; k < steps; k++) {
    if (values[k]! * values[k + 1]! < 0 && Math.abs(values[k]!) > 1e-15 * largest) {
      roots.push(rootOf((r) => at(Float64Array.of(r))[0]!, points[k]!, points[k + 1]!));
    }
  }
  roots.push(radius);
  let total = 0;
  for (let k = 0; k + 1 < roots.length; k++) {
    const [from, to] = [roots[k]!, roots[k + 1]!];
    const pieces = Math.max(1, Math.ceil((to - from) / 0.7));
    let part = 0;
    for (let piece = 0; piece < pieces; piece++) {
      const a = from + ((to - from) * piece) / pieces;
      const b = from + ((to - from) * (piece + 1)) / pieces;
      const rs = Float64Array.from(NODES, ({ x }) => (a + b) / 2 + (x * (b - a)) / 2);
      const w = at(rs);
      NODES.forEach((node, j) => (part += (w[j]! * rs[j]! * node.w * (b - a)) / 2));
    }
    total += Math.abs(part);
  }
  const value = 2 * Math.PI * total - 1;
  return { value: Math.max(0, value), error: 1e-11 };
}

function rootOf(f: (x: number) => number, from: number, to: number): number {
  let [a, b] = [from, to];
  let fa = f(a);
  for (let step = 0; step < 100 && b - a > 1e-15 * Math.max(1, b); step++) {
    const middle = (a + b) / 2;
    const fm = f(middle);
    if (fm === 0) return middle;
    if (fa * fm < 0) b = middle;
    else {
      a = middle;
      fa = fm;
    }
  }
  return (a + b) / 2;
}
