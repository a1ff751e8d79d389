import { MethodDoesNotApply } from './method-does-not-apply';
import { levelsFor } from './photon-bounds';
import type { State } from './state';

/** Values of a Wigner function on a grid, row by row of p. */
export type WignerGrid = (xs: Float64Array, ps: Float64Array) => Float64Array;

interface NegativityEstimate {
  readonly value: number;
  readonly error: number;
}

/** Gaussian Wigner functions are nowhere negative. */
export const gaussianNegativity: NegativityEstimate = { value: 0, error: 0 };

/** Nodes and weights of Gauss and Legendre on [−1, 1]. */
const NODES = gaussLegendre(16);

function gaussLegendre(count: number): readonly { readonly x: number; readonly w: number }[] {
  return Array.from({ length: count }, (_, k) => {
    let x = Math.cos((Math.PI * (k + 0.75)) / (count + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let before = 1;
      let here = x;
      for (let n = 1; n < count; n++) {
        const next = ((2 * n + 1) * x * here - n * before) / (n + 1);
        before = here;
        here = next;
      }
      slope = (count * (x * here - before)) / (x * x - 1);
      const move = here / slope;
      x -= move;
      if (Math.abs(move) < 1e-16) break;
    }
    return { x, w: 2 / ((1 - x * x) * slope * slope) };
  });
}

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
 * ∫|W| dx dp − 1.
 *
 * @param state the state, for its size and symmetry
 * @param grid its Wigner function
 * @returns relative error about 1e-10 for round states, 1e-7 for others
 * @throws MethodDoesNotApply where the state is too large
 */
export function negativityOf(state: State, grid: WignerGrid): NegativityEstimate {
  const size = levelsFor(state, Math.log(1e-13));
  if (size.levels > 400) throw new MethodDoesNotApply('the Wigner function has too fine a structure to be integrated');
  return isRound(state) ? roundNegativity(size.levels, grid) : planeNegativity(size.levels, grid);
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

/** Lines of constant p: each is integrated exactly between its zeros by interpolation, then over p. */
function planeNegativity(levels: number, grid: WignerGrid): NegativityEstimate {
  const radius = radiusOf(levels);
  const coarse = planeSum(grid, radius, Math.min(600, Math.max(200, 10 * levels)));
  const fine = planeSum(grid, radius, Math.min(1200, Math.max(400, 20 * levels)));
  // Kinks along the zero lines leave errors of second order and better; halving the step measures them.
  const value = Math.max(0, fine - 1);
  return { value, error: Math.abs(fine - coarse) + 1e-11 };
}

function planeSum(grid: WignerGrid, radius: number, steps: number): number {
  const h = (2 * radius) / steps;
  const xs = Float64Array.from({ length: steps + 1 }, (_, k) => -radius + h * k);
  const values = grid(xs, xs);
  const side = steps + 1;
  let total = 0;
  for (let i = 0; i < side; i++) total += lineSum(values.subarray(i * side, (i + 1) * side), h);
  return total * h;
}

/** ∫|f| of a smooth sampled function: the trapezoid rule, exact to all orders, corrected at each zero. */
function lineSum(f: Float64Array, h: number): number {
  let sum = 0;
  for (let k = 0; k < f.length; k++) sum += Math.abs(f[k]!);
  let correction = 0;
  for (let k = 1; k + 2 < f.length; k++) {
    const [a, b] = [f[k]!, f[k + 1]!];
    if (a * b >= 0) continue;
    correction += kinkCorrection(f[k - 1]!, a, b, f[k + 2]!);
  }
  return (sum + correction) * h;
}

/**
 * What the trapezoid rule misses of |f| in a cell where f changes sign: Euler and Maclaurin's terms of both sides at
 * the zero, in units of the step, from the cubic through four samples.
 */
function kinkCorrection(before: number, a: number, b: number, after: number): number {
  // Cubic through −1, 0, 1, 2.
  const c0 = a;
  const c2 = (before + b) / 2 - a;
  const c3 = (after - 3 * b + 3 * a - before) / 6;
  const c1 = (b - before) / 2 - c3;
  const value = (t: number) => c0 + t * (c1 + t * (c2 + t * c3));
  let [low, high] = [0, 1];
  for (let step = 0; step < 50; step++) {
    const middle = (low + high) / 2;
    if (value(middle) * a > 0) low = middle;
    else high = middle;
  }
  const t = (low + high) / 2;
  const sign = a > 0 ? 1 : -1;
  const d1 = (c1 + t * (2 * c2 + t * 3 * c3)) * sign;
  const d2 = (2 * c2 + 6 * c3 * t) * sign;
  const d3 = 6 * c3 * sign;
  // ∫|f| − Σ|f| = Σ_m 2 B_m(t)/m! f^{(m−1)}(zero) with Bernoulli polynomials; f itself is 0 there.
  const b2 = t * t - t + 1 / 6;
  const b3 = t * (t * t - 1.5 * t + 0.5);
  const b4 = t * t * (t * t - 2 * t + 1) - 1 / 30;
  return -(d1 * b2) * -1 * 1 + d2 * (b3 / 3) * -1 + d3 * (b4 / 12);
}
