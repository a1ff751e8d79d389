import { MethodDoesNotApply } from './method-does-not-apply';
import { gaussLegendre } from './special/gauss-legendre';

/** Values of a Wigner function on a grid, row by row of p. */
export type WignerGrid = (xs: Float64Array, ps: Float64Array) => Float64Array;

/** ∫|W| dx dp − 1 and an estimate of its absolute error. */
export interface NegativityEstimate {
  readonly value: number;
  readonly error: number;
}

const NODES = gaussLegendre(16);

/** Samples of a sign below this part of the largest value are rounding; the series between samples has more of it. */
const NOISE = 1e-14;
const SERIES_NOISE = 1e-11;
/** How far χ still reaches beyond, in |ξ|. */
const TAIL = 5;
/** Most lines of constant p that are looked at: about two seconds. */
const MOST_LINES = 12_000;
const MOST_LOOKS = 120_000;
const tooMany = () => new MethodDoesNotApply('the zero lines of the Wigner function are too many');
/** Nodes of a piece between two breaks. */
const PANEL = gaussLegendre(8);
/** Two halves may differ by this from the whole. */
const WANTED = 1e-10;
const MOST_HALVINGS = 12;
/** Breaks are found to this: what is missed there goes with its power 5/2. */
const CLOSEST = 1e-5;

/**
 * 2 ∫ dp ∫ |W| over the negative stretches of each line of constant p (∫W = 1 is exact).
 *
 * Stretches appear and vanish at values of p where the integral over x has a branch point of power 3/2; these are
 * found first, and between them p = middle − half cos θ makes the integrand smooth for Gauss and Legendre.
 */
export function planeNegativity(levels: number, radius: number, grid: WignerGrid, exact: boolean): NegativityEstimate {
  // W is band-limited but for tails: χ of fewer than `levels` levels ends near |ξ| = 2√levels, k = √2|ξ|.
  const step = (0.8 * Math.PI) / (Math.SQRT2 * (2 * Math.sqrt(levels) + TAIL));
  const count = Math.ceil((2 * radius) / step);
  // Not symmetric about 0, where many states have zero lines.
  const xs = Float64Array.from({ length: count + 1 }, (_, k) => -radius + 0.37 * step + step * k);
  const coarse = grid(xs, xs);
  const floor = (exact ? NOISE : SERIES_NOISE) * coarse.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
  const search: LineSearch = { samples: coarse, grid: exact ? grid : undefined, xs, step, floor, lines: 0, looks: 0 };
  const breaks: number[] = [];
  const counts = Array.from(
    { length: count + 1 },
    (_, i) => signChanges({ search, p: xs[i]!, line: coarse.subarray(i * (count + 1), (i + 1) * (count + 1)) }).length,
  );
  for (let i = 0; i < count; i++) findBreaks(search, xs[i]!, counts[i]!, xs[i + 1]!, counts[i + 1]!, breaks);
  const ends = [xs[0]!, ...breaks, xs[count]!];
  const found = integrateBetween(search, ends);
  const value = 2 * found.value;
  const error = 2 * found.error;
  return { value, error: error + 1e-11 };
}

interface LineSearch {
  /** W on the grid of `xs` in both directions, row by row of p. */
  readonly samples: Float64Array;
  readonly xs: Float64Array;
  readonly step: number;
  /** W itself, where it is quicker than the series. */
  readonly grid: WignerGrid | undefined;
  readonly floor: number;
  lines: number;
  /** How often points between samples were asked for. */
  looks: number;
}

/**
 * Weights of the samples for the value at a point between them: Whittaker's cardinal series, exact for what is
 * band-limited.
 */
function cardinalWeights({ xs, step }: LineSearch, at: number, weights: Float64Array): void {
  const t = (at - xs[0]!) / step;
  const near = Math.round(t);
  const d = t - near;
  const sine = d === 0 ? 0 : Math.sin(Math.PI * d) / Math.PI;
  for (let k = 0; k < xs.length; k++) {
    const away = t - k;
    const sign = (near - k) % 2 === 0 ? 1 : -1;
    weights[k] = k === near ? (d === 0 ? 1 : sine / d) : (sign * sine) / away;
  }
}

/** W on the samples of x at a value of p. */
interface Line {
  readonly search: LineSearch;
  readonly p: number;
  readonly line: Float64Array;
}

const lineAt = (search: LineSearch, p: number): Line => ({ search, p, line: lineOf(search, p) });

function lineOf(search: LineSearch, p: number): Float64Array {
  if (++search.lines > MOST_LINES) throw tooMany();
  const { samples, xs, grid } = search;
  if (grid !== undefined) return grid(xs, Float64Array.of(p));
  const side = xs.length;
  const weights = new Float64Array(side);
  cardinalWeights(search, p, weights);
  const line = new Float64Array(side);
  for (let i = 0; i < side; i++) {
    const weight = weights[i]!;
    if (weight === 0) continue;
    for (let j = 0, from = i * side; j < side; j++, from++) line[j]! += weight * samples[from]!;
  }
  return line;
}

/** W at points of a line. */
function along(search: LineSearch, p: number, line: Float64Array, at: Float64Array): Float64Array {
  if (++search.looks > MOST_LOOKS) throw tooMany();
  if (search.grid !== undefined) return search.grid(at, Float64Array.of(p));
  const weights = new Float64Array(line.length);
  return at.map((x) => {
    cardinalWeights(search, x, weights);
    let sum = 0;
    for (let k = 0; k < line.length; k++) sum += weights[k]! * line[k]!;
    return sum;
  });
}

/** Two points of a line between which W changes sign, with its values there. */
interface Bracket {
  readonly from: number;
  readonly to: number;
  readonly before: number;
  readonly after: number;
}

/**
 * Where W changes sign along a line. A dip towards 0 between two samples of one sign is followed to its bottom, so that
 * stretches narrower than the grid are not missed; samples that are rounding are passed over.
 */
function signChanges({ search, p, line }: Line): Bracket[] {
  const { xs, floor } = search;
  const brackets: Bracket[] = [];
  let last = -1;
  for (let k = 0; k < line.length; k++) {
    const here = line[k]!;
    if (Math.abs(here) <= floor) continue;
    if (last >= 0) {
      const before = line[last]!;
      if (before * here < 0) brackets.push({ from: xs[last]!, to: xs[k]!, before, after: here });
    }
    last = k;
    const [left, right] = [line[k - 1], line[k + 1]];
    if (left === undefined || right === undefined || left * here <= 0 || right * here <= 0) continue;
    const size = Math.abs(here);
    if (size > Math.abs(left) || size > Math.abs(right)) continue;
    const curvature = Math.abs(left) + Math.abs(right) - 2 * size;
    const lowest = size - (Math.abs(right) - Math.abs(left)) ** 2 / (8 * curvature || 1);
    if (lowest > size / 2 && size > curvature / 8) continue;
    const bottom = bottomOf(search, p, line, k);
    if (bottom === undefined) continue;
    brackets.push({ from: xs[k - 1]!, to: bottom.x, before: left, after: bottom.value });
    brackets.push({ from: bottom.x, to: xs[k + 1]!, before: bottom.value, after: right });
  }
  return brackets;
}

const GOLDEN = (Math.sqrt(5) - 1) / 2;

/** A point beside sample k at which W has the other sign, if there is one. */
function bottomOf(
  search: LineSearch,
  p: number,
  line: Float64Array,
  k: number,
): { readonly x: number; readonly value: number } | undefined {
  const { xs, floor } = search;
  const sign = Math.sign(line[k]!);
  const at = (x: number): number => sign * along(search, p, line, Float64Array.of(x))[0]!;
  let [from, to] = [xs[k - 1]!, xs[k + 1]!];
  let [one, two] = [to - GOLDEN * (to - from), from + GOLDEN * (to - from)];
  let [low, high] = [at(one), at(two)];
  for (let step = 0; step < 18; step++) {
    if (low < -floor) return { x: one, value: sign * low };
    if (high < -floor) return { x: two, value: sign * high };
    if (low < high) {
      [to, two, high] = [two, one, low];
      one = to - GOLDEN * (to - from);
      low = at(one);
    } else {
      [from, one, low] = [one, two, high];
      two = from + GOLDEN * (to - from);
      high = at(two);
    }
  }
  return undefined;
}

/** Values of p between two lines at which the number of sign changes differs. */
function findBreaks(search: LineSearch, p1: number, n1: number, p2: number, n2: number, breaks: number[]): void {
  if (n1 === n2) return;
  if (p2 - p1 < CLOSEST) {
    breaks.push((p1 + p2) / 2);
    return;
  }
  const middle = (p1 + p2) / 2;
  const n = signChanges(lineAt(search, middle)).length;
  findBreaks(search, p1, n1, middle, n, breaks);
  findBreaks(search, middle, n, p2, n2, breaks);
}

/** ∫ dp between each two ends that follow each other. */
function integrateBetween(search: LineSearch, ends: readonly number[]): NegativityEstimate {
  let value = 0;
  let error = 0;
  for (let k = 0; k + 1 < ends.length; k++) {
    const [from, to] = [ends[k]!, ends[k + 1]!];
    const middle = (from + to) / 2;
    const half = (to - from) / 2;
    const integrand = (theta: number): number =>
      half * Math.sin(theta) * negativeOf(search, middle - half * Math.cos(theta));
    const pieces = Math.max(1, Math.ceil((to - from) / 1.5));
    for (let piece = 0; piece < pieces; piece++) {
      const [a, b] = [(Math.PI * piece) / pieces, (Math.PI * (piece + 1)) / pieces];
      const part = halved(integrand, a, b, gauss(integrand, a, b), MOST_HALVINGS);
      value += part.value;
      error += part.error;
    }
  }
  return { value, error };
}

function gauss(integrand: (theta: number) => number, a: number, b: number): number {
  return PANEL.reduce((sum, { x, w }) => sum + (w * (b - a) * integrand((a + b) / 2 + (x * (b - a)) / 2)) / 2, 0);
}

/**
 * An integral by halves of halves, until two halves make what the whole made: where zero lines cross without a change
 * of their number the integrand has a kink that no break marks.
 */
function halved(
  integrand: (theta: number) => number,
  a: number,
  b: number,
  whole: number,
  left: number,
): NegativityEstimate {
  const middle = (a + b) / 2;
  const [one, two] = [gauss(integrand, a, middle), gauss(integrand, middle, b)];
  const difference = Math.abs(one + two - whole);
  // A kink of the third power, the mildest kind, gains a factor of 16 at each halving; smooth parts far more.
  if (difference < WANTED || left === 0) return { value: one + two, error: difference / 16 };
  const lower = halved(integrand, a, middle, one, left - 1);
  const upper = halved(integrand, middle, b, two, left - 1);
  return { value: lower.value + upper.value, error: lower.error + upper.error };
}

/** ∫|W| dx over the negative stretches of one line. */
function negativeOf(search: LineSearch, p: number): number {
  const { xs } = search;
  const here = lineAt(search, p);
  const values = here.line;
  const changes = signChanges(here);
  const [first] = changes;
  if (first === undefined) return 0;
  const roots = rootsOf((at) => along(search, p, values, at), changes);
  // Stretches between roots alternate in sign; those that begin or end outside are rounding.
  const edges = [xs[0]!, ...roots, xs[xs.length - 1]!];
  let negative = first.before < 0;
  let sum = 0;
  for (let k = 0; k + 1 < edges.length; k++, negative = !negative) {
    if (!negative) continue;
    const pieces = Math.max(1, Math.ceil((edges[k + 1]! - edges[k]!) / 0.8));
    for (let piece = 0; piece < pieces; piece++) {
      const width = (edges[k + 1]! - edges[k]!) / pieces;
      const from = edges[k]! + width * piece;
      const at = Float64Array.from(NODES, ({ x }) => from + (width * (1 + x)) / 2);
      const w = along(search, p, values, at);
      NODES.forEach((node, j) => (sum -= (w[j]! * node.w * width) / 2));
    }
  }
  return sum;
}

/** Zeros of a line in given brackets, all at once: false position with halved ends (Illinois). */
function rootsOf(f: (xs: Float64Array) => Float64Array, brackets: readonly Bracket[]): Float64Array {
  const a = Float64Array.from(brackets, ({ from }) => from);
  const b = Float64Array.from(brackets, ({ to }) => to);
  const fa = Float64Array.from(brackets, ({ before }) => before);
  const fb = Float64Array.from(brackets, ({ after }) => after);
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
