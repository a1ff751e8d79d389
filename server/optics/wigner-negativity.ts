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

/** Samples of a sign below this part of the largest value are rounding. */
const NOISE = 1e-14;
/** Most lines of constant p that are looked at. */
const MOST_LINES = 6000;

/**
 * 2 ∫ dp ∫ |W| over the negative stretches of each line of constant p (∫W = 1 is exact).
 *
 * Stretches appear and vanish at values of p where the integral over x has a branch point of power 3/2; these are
 * found first, and between them p = middle − half cos θ makes the integrand smooth for Gauss and Legendre.
 */
function planeNegativity(levels: number, grid: WignerGrid): NegativityEstimate {
  const radius = radiusOf(levels);
  const step = Math.min(0.12, 1.2 / Math.sqrt(levels + 1));
  const count = Math.ceil((2 * radius) / step);
  // Not symmetric about 0, where many states have zero lines.
  const xs = Float64Array.from({ length: count + 1 }, (_, k) => -radius + 0.37 * step + step * k);
  const coarse = grid(xs, xs);
  const floor = NOISE * coarse.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
  const search: LineSearch = { grid, xs, floor, lines: 0 };
  const breaks: number[] = [];
  const counts = Array.from(
    { length: count + 1 },
    (_, i) => signChanges(coarse.subarray(i * (count + 1), (i + 1) * (count + 1)), floor).length,
  );
  for (let i = 0; i < count; i++) findBreaks(search, xs[i]!, counts[i]!, xs[i + 1]!, counts[i + 1]!, breaks);
  const ends = [xs[0]!, ...breaks, xs[count]!];
  const [high, low] = [integrateBetween(search, ends, 24), integrateBetween(search, ends, 16)];
  return { value: 2 * high, error: 2 * Math.abs(high - low) + 1e-11 };
}

interface LineSearch {
  readonly grid: WignerGrid;
  readonly xs: Float64Array;
  readonly floor: number;
  lines: number;
}

function lineOf(search: LineSearch, p: number): Float64Array {
  if (++search.lines > MOST_LINES) throw new MethodDoesNotApply('the zero lines of the Wigner function are too many');
  return search.grid(search.xs, Float64Array.of(p));
}

/** Pairs of samples between which a line changes sign; samples that are rounding are passed over. */
function signChanges(values: Float64Array, floor: number): (readonly [number, number])[] {
  const changes: (readonly [number, number])[] = [];
  let last = -1;
  for (let k = 0; k < values.length; k++) {
    if (Math.abs(values[k]!) <= floor) continue;
    if (last >= 0 && values[last]! * values[k]! < 0) changes.push([last, k]);
    last = k;
  }
  return changes;
}

/** Values of p between two lines at which the number of sign changes differs. */
function findBreaks(search: LineSearch, p1: number, n1: number, p2: number, n2: number, breaks: number[]): void {
  if (n1 === n2) return;
  if (p2 - p1 < 1e-7) {
    breaks.push((p1 + p2) / 2);
    return;
  }
  const middle = (p1 + p2) / 2;
  const n = signChanges(lineOf(search, middle), search.floor).length;
  findBreaks(search, p1, n1, middle, n, breaks);
  findBreaks(search, middle, n, p2, n2, breaks);
}

function integrateBetween(search: LineSearch, ends: readonly number[], nodes: number): number {
  const rule = gaussLegendre(nodes);
  let total = 0;
  for (let k = 0; k + 1 < ends.length; k++) {
    const [from, to] = [ends[k]!, ends[k + 1]!];
    const pieces = Math.max(1, Math.ceil((to - from) / 1.5));
    for (let piece = 0; piece < pieces; piece++) {
      // θ runs over [0, π] in pieces.
      const a = (Math.PI * piece) / pieces;
      const b = (Math.PI * (piece + 1)) / pieces;
      for (const { x, w } of rule) {
        const theta = (a + b) / 2 + (x * (b - a)) / 2;
        const p = (from + to) / 2 - ((to - from) / 2) * Math.cos(theta);
        const slope = ((to - from) / 2) * Math.sin(theta) * ((b - a) / 2);
        total += w * slope * negativeOf(search, p);
      }
    }
  }
  return total;
}

/** ∫|W| dx over the negative stretches of one line. */
function negativeOf(search: LineSearch, p: number): number {
  const { xs, grid } = search;
  const line = Float64Array.of(p);
  const values = lineOf(search, p);
  const changes = signChanges(values, search.floor);
  if (changes.length === 0) return 0;
  const roots = rootsOf((at) => grid(at, line), xs, values, changes);
  const first = changes[0]!;
  // Stretches between roots alternate in sign; those that begin or end outside are rounding.
  const edges = [xs[0]!, ...roots, xs[xs.length - 1]!];
  let negative = values[first[0]]! < 0;
  let sum = 0;
  for (let k = 0; k + 1 < edges.length; k++, negative = !negative) {
    if (!negative) continue;
    const pieces = Math.max(1, Math.ceil((edges[k + 1]! - edges[k]!) / 0.8));
    for (let piece = 0; piece < pieces; piece++) {
      const width = (edges[k + 1]! - edges[k]!) / pieces;
      const from = edges[k]! + width * piece;
      const at = Float64Array.from(NODES, ({ x }) => from + (width * (1 + x)) / 2);
      const w = grid(at, line);
      NODES.forEach((node, j) => (sum -= (w[j]! * node.w * width) / 2));
    }
  }
  return sum;
}

/** Zeros of a line in given brackets, all at once: false position with halved ends (Illinois). */
function rootsOf(
  f: (xs: Float64Array) => Float64Array,
  xs: Float64Array,
  values: Float64Array,
  brackets: readonly (readonly [number, number])[],
): Float64Array {
  const a = Float64Array.from(brackets, ([k]) => xs[k]!);
  const b = Float64Array.from(brackets, ([, k]) => xs[k]!);
  const fa = Float64Array.from(brackets, ([k]) => values[k]!);
  const fb = Float64Array.from(brackets, ([, k]) => values[k]!);
  const root = a.slice();
  for (let step = 0; step < 40; step++) {
    let widest = 0;
    for (let k = 0; k < root.length; k++) {
      root[k] = (a[k]! * fb[k]! - b[k]! * fa[k]!) / (fb[k]! - fa[k]!);
      if (!(root[k]! > Math.min(a[k]!, b[k]!) && root[k]! < Math.max(a[k]!, b[k]!))) root[k] = (a[k]! + b[k]!) / 2;
    }
    const found = f(root);
    for (let k = 0; k < root.length; k++) {
      const value = found[k]!;
      if (value * fb[k]! < 0) {
        a[k] = b[k]!;
        fa[k] = fb[k]!;
      } else {
        fa[k]! /= 2;
      }
      const moved = Math.abs(b[k]! - root[k]!);
      b[k] = root[k]!;
      fb[k] = value === 0 ? fb[k]! : value;
      if (value !== 0) widest = Math.max(widest, moved);
    }
    if (widest < 1e-11) break;
  }
  return root.sort();
}
