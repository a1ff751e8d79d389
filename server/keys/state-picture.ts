import { amplitudePath } from '../optics/amplitude-path';
import { compareMethods } from '../optics/compare-methods';
import { quadratureScale, type Convention } from '../optics/convention';
import { figureByMethods } from '../optics/figure-by-methods';
import { figureFunctions, type FigureValue } from '../optics/figures';
import { MethodDoesNotApply } from '../optics/method-does-not-apply';
import { numberState } from '../optics/number-basis/number-states';
import { wignerAt } from '../optics/number-basis/wave-functions';
import { OpticsError } from '../optics/optics-error';
import { wignerOnPoints } from '../optics/phase-space/wigner-pictures';
import { isState, type Mode, type State } from '../optics/state';
import type { CompiledKey } from './compile-key';
import { KeyError } from './key-error';
import type { Value } from './value';

/** A picture of the state that an expression is about. */
export interface PictureWanted {
  readonly kind: 'picture';
  readonly convention: Convention;
  /** The mode that is shown of a joint state. */
  readonly mode: Mode;
}

/** P(n), n = first, first + step, …; where next to nothing is likely is left out. */
export interface PictureBars {
  readonly first: number;
  /** More than 1 where the distribution is too broad for a bar each. */
  readonly step: number;
  readonly probabilities: readonly number[];
}

/** The Wigner function on a square grid, in the convention's own quadratures. */
export interface PictureWigner {
  /** Points along each axis. */
  readonly points: number;
  /** Centres of the outermost points along x and p. */
  readonly x: readonly [number, number];
  readonly p: readonly [number, number];
  /** The largest magnitude, which the map's colours end at. */
  readonly scale: number;
  /** Row by row of p from the lowest, in thousandths of `scale`. */
  readonly values: readonly number[];
  readonly least: number;
  readonly most: number;
}

/** What the state in a key looks like. */
export interface StatePicture {
  /** Modes of the state; of two, `mode` is shown. */
  readonly modes: 1 | 2;
  readonly mode: Mode;
  readonly mean: number;
  readonly bars: PictureBars | null;
  readonly wigner: PictureWigner | null;
  readonly path: {
    readonly passages: readonly string[];
    readonly points: readonly { readonly x: number; readonly p: number; readonly spread: number }[];
  } | null;
  /** The photon number whose probability the key asks for. */
  readonly asked: number | null;
}

/** Points along each axis of the finest picture. */
const finest = 121;
/** Points of a first look that finds where the state is. */
const coarse = 41;
/** Milliseconds that the fine picture may take. */
const patience = 600;
/** The largest photon number that a distribution lists. */
const largestListed = 9_999;
/** Bars that are shown at most. */
const mostBars = 64;

/** Draws the state that an expression is about. @throws KeyError where it is about none */
export function pictureOf(
  compiled: CompiledKey,
  values: ReadonlyMap<string, Value>,
  { mode, convention }: PictureWanted,
): StatePicture {
  const { state, asked } = stateIn(compiled, values);
  const shown: State = state.modes === 1 ? state : { kind: 'output', modes: 1, pure: false, state, mode };
  const mean = tried(() => Number(figure('meanPhotons', shown, convention)));
  return {
    modes: state.modes,
    mode,
    // Without the sign of −0.
    mean: (mean ?? 0) + 0,
    bars: mean === null ? null : tried(() => barsOf(shown, mean, convention)),
    wigner: tried(() => wignerOf(shown, convention)),
    path: tried(() => pathOf(shown, convention)),
    asked,
  };
}

/** The outermost state of light in an expression, the first of several. */
function stateIn(
  compiled: CompiledKey,
  values: ReadonlyMap<string, Value>,
): { readonly state: State; readonly asked: number | null } {
  let found: { readonly state: State; readonly asked: number | null } | undefined;
  const look = (name: string, args: readonly Value[]) => {
    const state = args.find(isState);
    const [, n] = args;
    if (state) found ??= { state, asked: name === 'photonProbability' && typeof n === 'number' ? n : null };
  };
  try {
    const { value } = compiled.run(values, look);
    if (isState(value)) return { state: value, asked: null };
  } catch (error) {
    // A figure may be undefined for a state that can be drawn all the same.
    if (!(error instanceof KeyError) || !found) throw error;
  }
  if (!found) throw new KeyError('No state of light is asked here.', null);
  return found;
}

/** What a picture lacks it lacks: a state may have no Wigner function that can be drawn, and bars all the same. */
function tried<Part>(make: () => Part): Part | null {
  try {
    return make();
  } catch (error) {
    if (error instanceof MethodDoesNotApply || error instanceof OpticsError) return null;
    throw error;
  }
}

type FigureOfState = 'meanPhotons' | 'photonVariance' | 'photonDistribution' | 'quadratureMean' | 'quadratureVariance';

function figure(name: FigureOfState, state: State, convention: Convention, ...more: readonly number[]): FigureValue {
  return compareMethods(name, figureByMethods(figureFunctions[name]([state, ...more], convention))).value;
}

function barsOf(state: State, mean: number, convention: Convention): PictureBars {
  const variance = Number(figure('photonVariance', state, convention));
  const reach = Math.ceil(mean + 7 * Math.sqrt(Math.max(variance, 0)) + 4);
  const listed = figure('photonDistribution', state, convention, Math.min(reach, largestListed));
  const all = Array.isArray(listed) ? (listed as readonly number[]) : [];
  const most = Math.max(...all, 0);
  const shows = (p: number | undefined) => (p ?? 0) > most / 500;
  let end = all.length;
  while (end > 8 && !shows(all[end - 1])) end--;
  let first = 0;
  if (end > mostBars) while (first < end - mostBars && !shows(all[first])) first++;
  const step = Math.ceil((end - first) / mostBars);
  return { first, step, probabilities: all.slice(first, end).filter((_, index) => index % step === 0) };
}

/** A grid in the quadratures of the engine (vacuum variance 1/2). */
interface Grid {
  readonly xs: Float64Array;
  readonly ps: Float64Array;
  readonly values: Float64Array;
}

function wignerOf(state: State, convention: Convention): PictureWigner {
  const own = { ...convention, vacuumVariance: 0.5 };
  const place = (theta: number) => {
    const mean = Number(figure('quadratureMean', state, own, theta));
    const spread = Math.sqrt(Math.max(0, Number(figure('quadratureVariance', state, own, theta))));
    return { mean, spread };
  };
  const [x, p] = [place(0), place(Math.PI / 2)];
  const began = performance.now();
  const rough = gridOf(state, { x: x.mean, p: p.mean, half: 3.2 * Math.max(x.spread, p.spread) + 1.2 }, coarse);
  const each = (performance.now() - began) / coarse ** 2;
  const points = Math.max(coarse, Math.min(finest, 2 * Math.floor(Math.sqrt(patience / Math.max(each, 1e-6)) / 2) + 1));
  const { xs, ps, values } = gridOf(state, boxAround(rough), points);
  const factor = quadratureScale(convention);
  const [least, most] = [Math.min(0, ...extremes(values)), Math.max(0, ...extremes(values))];
  const scale = Math.max(-least, most);
  return {
    points,
    x: [(xs[0] ?? 0) * factor, (xs.at(-1) ?? 0) * factor],
    p: [(ps[0] ?? 0) * factor, (ps.at(-1) ?? 0) * factor],
    scale: scale / factor ** 2,
    values: Array.from(values, (value) => Math.round((1000 * value) / scale) + 0),
    least: least / factor ** 2,
    most: most / factor ** 2,
  };
}

function extremes(values: Float64Array): readonly [number, number] {
  let [least, most] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < least) least = value;
    if (value > most) most = value;
  }
  return [least, most];
}

interface Box {
  readonly x: number;
  readonly p: number;
  readonly half: number;
}

function gridOf(state: State, { x, p, half }: Box, points: number): Grid {
  const axis = (middle: number) =>
    Float64Array.from({ length: points }, (_, index) => middle - half + (2 * half * index) / (points - 1));
  const [xs, ps] = [axis(x), axis(p)];
  return { xs, ps, values: valuesOn(state, xs, ps) };
}

function valuesOn(state: State, xs: Float64Array, ps: Float64Array): Float64Array {
  try {
    return wignerOnPoints(state, xs, ps);
  } catch (error) {
    if (!(error instanceof MethodDoesNotApply)) throw error;
  }
  const numbers = numberState(state);
  // A density matrix takes levels² multiplications a point.
  const work = numbers.kind === 'density' ? numbers.levels ** 2 : numbers.levels;
  if (work * xs.length * ps.length > 4e7) throw new MethodDoesNotApply('the Wigner function would take too long');
  const values = new Float64Array(xs.length * ps.length);
  for (const [row, at] of ps.entries()) {
    for (const [column, x] of xs.entries()) values[row * xs.length + column] = wignerAt(numbers, x, at).value;
  }
  return values;
}

/** The square around what shows of a first look; around the origin where that is near, since then its place is seen. */
function boxAround({ xs, ps, values }: Grid): Box {
  const [least, most] = extremes(values);
  const shows = 0.01 * Math.max(-least, most);
  let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const [row, p] of ps.entries()) {
    for (const [column, x] of xs.entries()) {
      if (Math.abs(values[row * xs.length + column] ?? 0) < shows) continue;
      [left, right, low, high] = [Math.min(left, x), Math.max(right, x), Math.min(low, p), Math.max(high, p)];
    }
  }
  const step = (xs[1] ?? 0) - (xs[0] ?? 0);
  const own = Math.max(right - left, high - low) / 2 + 1.5 * step;
  const around = Math.max(right, -left, high, -low) + 1.5 * step;
  const near = around <= 2.2 * own;
  const half = Math.max(2.4, near ? around : own);
  return near ? { x: 0, p: 0, half } : { x: (left + right) / 2, p: (low + high) / 2, half };
}

function pathOf(state: State, convention: Convention): StatePicture['path'] {
  const path = amplitudePath(state);
  // Losses alone show in the other pictures; a path is for what moves in time or gains.
  if (!path || path.passages.every((passage) => passage === 'lose')) return null;
  const factor = quadratureScale(convention);
  return {
    passages: path.passages,
    points: path.points.map(({ x, p, spread }) => ({ x: x * factor + 0, p: p * factor + 0, spread: spread * factor })),
  };
}
