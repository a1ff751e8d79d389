import { abs, abs2, multiply, type Complex } from '../complex';
import { quadratureScale } from '../convention';
import type { Figure } from '../figures';
import { gaussianOf } from '../gaussian/gaussian-state';
import { MethodDoesNotApply } from '../method-does-not-apply';
import {
  checkMean,
  figureOfMoments,
  isMomentFigure,
  type FigureEstimate,
  type Moment,
} from '../moments/moment-figures';
import { binomialProbability, geometric, poisson } from '../special/distributions';
import { fallingFactorial } from '../special/factorials';
import { largestNumber } from '../photon-bounds';
import { channelsOf, isChannel, type State } from '../state';
import { negativityOf, withoutGaussianUnitaries } from '../wigner-negativity';
import { jointDiagonal } from './joint-diagonal';
import { eachAmplitude } from './joint-ket';
import { clickWeight } from './detection';
import { entropyOf, fidelityOf, jointFidelity, jointPurity, logNegativityOf, overlapOf, purityOf } from './comparisons';
import { loseDiagonal } from './number-maps';
import { ensembleOf, numberDiagonal, numberState } from './number-states';
import { elementOf, simplest, type NumberDiagonal, type NumberState } from './one-mode';
import { pushedIn } from './operations-on-factors';
import { defaultResolution, type Resolution } from './resolution';
import { wignerOnGrid } from './wigner-grid';
import { densityAt, displacementTrace, husimiAt, wignerAt } from './wave-functions';

/** A figure in a number basis, with the basis it took. */
export interface NumberFigure extends FigureEstimate {
  readonly dimension: number;
  readonly outsideWeight: number;
}

const EPS = 2 ** -52;
/** A value's truncation error may be this part of it; otherwise the basis is made larger. */
const WANTED = 1e-13;
const MOST_ATTEMPTS = 4;
/** Moments weigh what is outside with photon numbers, some tens of them. */
const MOMENT_LOG_WEIGHT = Math.log(1e-17);
/** Levels of a state whose Wigner function is integrated in a number basis although phase space can do it. */
const WIDEST_NEGATIVITY = 16;
/** The trace norm of a transposed state feels the root of the weight outside. */
const NEGATIVITY_LOG_WEIGHT = Math.log(1e-26);

/**
 * A figure in a number basis; the basis grows until what is outside does not show in the value.
 *
 * @throws MethodDoesNotApply where the basis would be too large
 * @throws OpticsError where the figure is not defined
 */
export function numberFigure(figure: Figure): NumberFigure {
  if (figure.kind === 'photonProbability') {
    const value = entryAlone(figure.state, figure.n);
    if (value !== undefined) return { value, error: 16 * EPS * value, dimension: figure.n + 1, outsideWeight: 0 };
  }
  let resolution: Resolution = {
    logWeight: firstLogWeight(figure.kind),
    least: leastLevels(figure),
  };
  if (asksForEntries(figure)) {
    const { value, error, dimension } = evaluate(figure, { ...resolution, logWeight: 0 });
    return { value, error, dimension, outsideWeight: 0 };
  }
  let found = evaluate(figure, resolution);
  for (let attempt = 1; attempt < MOST_ATTEMPTS; attempt++) {
    const size = sizeOf(found.value);
    if (found.truncation <= WANTED * size || found.truncation === 0 || found.truncation < 1e-300) break;
    const shrink = size === 0 ? 1e-16 : Math.max(1e-60, (WANTED * size) / found.truncation);
    resolution = { ...resolution, logWeight: resolution.logWeight + Math.log(shrink / 4) };
    const before = found.truncation;
    try {
      found = evaluate(figure, resolution);
      if (found.truncation > before / 2) break;
    } catch (error) {
      if (error instanceof MethodDoesNotApply) break;
      throw error;
    }
    if (size === 0) break;
  }
  const { value, error, dimension, outsideWeight, truncation } = found;
  return { value, error: error + truncation, dimension, outsideWeight };
}

/** The weight that may be left outside at the first attempt: finer where a figure feels the root of it. */
function firstLogWeight(kind: Figure['kind']): number {
  switch (kind) {
    case 'logNegativity':
      return NEGATIVITY_LOG_WEIGHT;
    case 'quadratureDensity':
    case 'wigner':
    case 'husimi':
    case 'characteristic':
      return 2 * defaultResolution.logWeight;
    case 'meanPhotons':
    case 'amplitude':
    case 'quadratureMean':
    case 'fieldCorrelation':
    case 'visibility':
      return MOMENT_LOG_WEIGHT;
    case 'photonVariance':
    case 'mandelQ':
    case 'fanoFactor':
    case 'quadratureVariance':
    case 'covariance':
    case 'g2':
    case 'gN':
    case 'coincidence':
    case 'g2Cross':
      return 2 * MOMENT_LOG_WEIGHT - defaultResolution.logWeight;
    default:
      return defaultResolution.logWeight;
  }
}

interface Truncated extends NumberFigure {
  /** The part of the error that a larger basis would take away. */
  readonly truncation: number;
}

function sizeOf(value: FigureEstimate['value']): number {
  if (typeof value === 'number') return Math.abs(value);
  if ('re' in value) return abs(value);
  return value.reduce<number>((most, entry) => {
    if (typeof entry === 'number') return Math.max(most, Math.abs(entry));
    return Math.max(most, ...entry.map((cell) => (typeof cell === 'number' ? Math.abs(cell) : abs(cell))));
  }, 0);
}

/** Levels that a figure asks for by its own arguments. */
function leastLevels(figure: Figure): number {
  switch (figure.kind) {
    case 'photonProbability':
      return figure.n + 1;
    case 'photonDistribution':
    case 'densityMatrix':
      return figure.nmax + 1;
    case 'matrixElement':
      return Math.max(figure.m, figure.n) + 1;
    case 'countProbability':
      return figure.m + 1;
    case 'jointProbability':
      return figure.n + figure.m + 1;
    case 'heraldProbability':
      return figure.n + 1;
    default:
      return 1;
  }
}

function of(state: NumberState, value: FigureEstimate['value'], error: number, truncation: number): Truncated {
  return { value, error, truncation, dimension: state.levels, outsideWeight: state.outside };
}

/** P(n) of the states that have it in closed form, without a basis around it. */
function entryAlone(state: State, n: number): number | undefined {
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

/** Whether phases are averaged somewhere in a state of one mode, so that it is no finite sum of Gaussians. */
function containsAverage(state: State): boolean {
  if (state.kind === 'phaseAveraged' || state.kind === 'dephased') return true;
  if (state.kind === 'mixture') return state.states.some(containsAverage);
  return 'state' in state && containsAverage(state.state);
}

/** Figures of single entries of a basis, which need no more levels than themselves where entries stand alone. */
function asksForEntries(figure: Figure): boolean {
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

function evaluate(figure: Figure, resolution: Resolution): Truncated {
  const { state } = figure;
  switch (figure.kind) {
    case 'photonProbability': {
      const diagonal = numberDiagonal(state, resolution);
      return probabilityOf(diagonal, figure.n);
    }
    case 'photonVariance':
    case 'mandelQ':
    case 'fanoFactor':
      return spreadOf(figure, numberDiagonal(state, resolution));
    case 'photonDistribution': {
      const diagonal = numberDiagonal(state, resolution);
      const value = Array.from({ length: figure.nmax + 1 }, (_, n) => diagonal.p[n] ?? 0);
      return of(diagonal, value, diagonal.noise + 8 * EPS * sizeOf(value), inside(diagonal));
    }
    case 'countProbability':
      return countsOf(numberDiagonal(state, resolution), figure.m, figure.eta, figure.dark);
    case 'parity': {
      const diagonal = numberDiagonal(state, resolution);
      const value = diagonal.p.reduce((sum, p, n) => sum + (n % 2 === 0 ? p : -p), 0);
      return of(diagonal, value, EPS * 8 + diagonal.noise * diagonal.levels, diagonal.outside);
    }
    case 'atomInversion': {
      const diagonal = numberDiagonal(state, resolution);
      const angle = 2 * figure.coupling * figure.t;
      let value = 0;
      let error = 0;
      diagonal.p.forEach((p, n) => {
        const turn = angle * Math.sqrt(n + 1);
        value += p * Math.cos(turn);
        error += p * EPS * (4 + Math.abs(turn));
      });
      return of(diagonal, value, error + diagonal.noise * diagonal.levels, diagonal.outside);
    }
    case 'quadratureDensity': {
      const scale = quadratureScale(figure.convention);
      const basis = numberState(state, resolution);
      const { value, error, truncation } = densityAt(basis, figure.x / scale, figure.theta);
      return of(basis, value / scale, error / scale, truncation / scale);
    }
    case 'wigner': {
      const scale = quadratureScale(figure.convention);
      const basis = numberState(state, resolution);
      const { value, error, truncation } = wignerAt(basis, figure.x / scale, figure.p / scale);
      return of(basis, value / scale ** 2, error / scale ** 2, truncation / scale ** 2);
    }
    case 'husimi': {
      const basis = numberState(state, resolution);
      const { value, error, truncation } = husimiAt(basis, figure.alpha);
      return of(basis, value, error, truncation);
    }
    case 'characteristic': {
      const basis = numberState(state, resolution);
      const { re, im, error, truncation } = displacementTrace(basis, figure.xi, false);
      const order = Math.exp((figure.s * abs2(figure.xi)) / 2);
      return of(basis, { re: re * order, im: im * order }, error * order, truncation * order);
    }
    case 'pFunction':
      throw new MethodDoesNotApply('the P function is no convergent sum over photon numbers');
    case 'wignerNegativity': {
      if (gaussianOf(state) !== undefined)
        throw new MethodDoesNotApply('a Gaussian Wigner function is left to phase space');
      const plain = withoutGaussianUnitaries(state);
      const basis = simplest(numberState(plain, resolution));
      if (basis.kind !== 'diagonal' && basis.levels > WIDEST_NEGATIVITY && !containsAverage(plain)) {
        throw new MethodDoesNotApply('the Wigner function is left to phase space, to save time');
      }
      const found = negativityOf(plain, (xs, ps) => wignerOnGrid(basis, xs, ps));
      return of(basis, found.value, found.error, 0);
    }
    case 'matrixElement': {
      if (figure.m === figure.n) return probabilityOf(numberDiagonal(state, resolution), figure.n);
      const basis = numberState(state, resolution);
      const value = elementOf(basis, figure.m, figure.n);
      return of(basis, value, elementError(basis, figure.m, figure.n), inside(basis));
    }
    case 'densityMatrix':
      return blockOf(numberState(state, resolution), figure.nmax);
    case 'purity':
      if (state.modes === 2) return jointPurity(state, resolution);
      return purityOf(numberState(state, resolution));
    case 'entropy':
      return entropyOf(numberState(state, resolution));
    case 'fidelity':
      if (state.modes === 2) return jointFidelity(state, figure.other, resolution);
      return fidelityOf(...bothAtOnce(state, figure.other, resolution));
    case 'overlap':
      return overlapOf(state, figure.other, resolution);
    case 'logNegativity':
      return logNegativityOf(state, resolution);
    case 'jointProbability': {
      const pushed = pushedIn(state);
      if (pushed.kind === 'product') {
        const first = probabilityOf(numberDiagonal(pushed.first, resolution), figure.n);
        const second = probabilityOf(numberDiagonal(pushed.second, resolution), figure.m);
        return timesOf(first, second);
      }
      const joint = jointDiagonal(state, resolution);
      const value =
        figure.n < joint.levels && figure.m < joint.levels ? joint.p[figure.n * joint.levels + figure.m]! : 0;
      return {
        value,
        error: EPS * 16 * value + 2 * Math.sqrt(value) * joint.noise + joint.noise ** 2,
        truncation: figure.n + figure.m < joint.levels && joint.outside === 0 ? 0 : joint.outside,
        dimension: joint.levels,
        outsideWeight: joint.outside,
      };
    }
    case 'heraldProbability':
    case 'clickProbability':
      return conditionOf(figure, resolution);
    default:
      if (isMomentFigure(figure)) return momentFigure(figure, resolution);
      throw new MethodDoesNotApply('no sum over photon numbers');
  }
}

/** Two states of one mode in the wider basis of both, so that neither ends where the other still has weight. */
function bothAtOnce(state: State, other: State, resolution: Resolution): readonly [NumberState, NumberState] {
  const left = numberState(state, resolution);
  const right = numberState(other, resolution);
  if (left.levels === right.levels) return [left, right];
  const wide = { ...resolution, least: Math.max(left.levels, right.levels) };
  return left.levels < right.levels ? [numberState(state, wide), right] : [left, numberState(other, wide)];
}

/** Entries inside the basis are exact up to what a lossy or amplified state would still have got from outside. */
const inside = (state: NumberState): number => state.outside;

function probabilityOf(diagonal: NumberDiagonal, n: number): Truncated {
  const value = diagonal.p[n] ?? 0;
  const error = EPS * 16 * value + (diagonal.noise === 0 ? 0 : Math.min(diagonal.noise, noiseOf(diagonal, value)));
  return of(diagonal, value, error, inside(diagonal));
}

/** Noise e of an amplitude is 2|ψ|e + e² of a probability. */
const noiseOf = (diagonal: NumberDiagonal, value: number): number =>
  2 * Math.sqrt(Math.abs(value)) * diagonal.noise + diagonal.noise;

function elementError(state: NumberState, m: number, n: number): number {
  const { re, im } = elementOf(state, m, n);
  const size = Math.hypot(re, im);
  if (state.kind === 'ket') {
    const noise = state.noise + EPS * 4;
    return (
      16 * EPS * size +
      noise * (Math.sqrt(sizeAt(state, m)) + Math.sqrt(sizeAt(state, n))) * (state.noise > 0 ? 1 : EPS)
    );
  }
  return 16 * EPS * size + state.noise;
}

const sizeAt = (state: NumberState, n: number): number => elementOf(state, n, n).re;

function countsOf(diagonal: NumberDiagonal, m: number, eta: number, dark: number): Truncated {
  const seen = loseDiagonal(diagonal, eta);
  if (dark === 0) return probabilityOf(seen, m);
  let value = 0;
  for (let k = 0; k <= Math.min(m, seen.levels - 1); k++) value += seen.p[k]! * poisson(m - k, dark);
  return of(seen, value, 16 * EPS * value + seen.noise, seen.outside);
}

function blockOf(basis: NumberState, nmax: number): Truncated {
  const side = nmax + 1;
  let error = 0;
  // How far the largest imaginary part stands out of its rounding.
  let imaginary = 0;
  const cells: Complex[][] = Array.from({ length: side }, (_, m) =>
    Array.from({ length: side }, (__, n) => {
      const cell = elementOf(basis, m, n);
      const own = elementError(basis, m, n);
      imaginary = Math.max(imaginary, Math.abs(cell.im) - Math.max(own, EPS * 4));
      error = Math.max(error, own);
      return cell;
    }),
  );
  const value = imaginary <= 0 ? cells.map((row) => row.map((cell) => cell.re)) : cells;
  return of(basis, value, error, inside(basis));
}

function timesOf(first: Truncated, second: Truncated): Truncated {
  const a = Number(first.value);
  const b = Number(second.value);
  return {
    value: a * b,
    error: first.error * b + second.error * a + EPS * a * b,
    truncation: first.truncation * b + second.truncation * a,
    dimension: Math.max(first.dimension, second.dimension),
    outsideWeight: first.outsideWeight + second.outsideWeight,
  };
}

type Spread = Extract<Figure, { readonly kind: 'photonVariance' | 'mandelQ' | 'fanoFactor' }>;

/** Var n about the mean, so that a state of one number has none to the last digit; Q and F from it. */
function spreadOf({ kind }: Spread, diagonal: NumberDiagonal): Truncated {
  const { levels, noise, outside } = diagonal;
  const mean = diagonalMoment(diagonal, 1);
  const centre = mean.value.re;
  let variance = 0;
  let noisy = 0;
  for (let n = 0; n < levels; n++) {
    const p = diagonal.p[n]!;
    const square = (n - centre) ** 2;
    variance += p * square;
    if (noise > 0) noisy += noise * (2 * Math.sqrt(Math.abs(p)) + noise) * square;
  }
  const rounding = 16 * EPS * variance + noisy + mean.error ** 2;
  const beyond = 4 * outside * (levels + 10) ** 2;
  if (kind === 'photonVariance') return of(diagonal, variance, rounding, beyond);
  checkMean(kind, centre, mean.error);
  const fano = variance / centre;
  const error = rounding / centre + fano * (mean.error / centre) + 4 * EPS * (1 + fano);
  return of(diagonal, kind === 'fanoFactor' ? fano : fano - 1, error, beyond / centre);
}

type Condition = Extract<Figure, { readonly kind: 'heraldProbability' | 'clickProbability' }>;

function conditionOf(figure: Condition, resolution: Resolution): Truncated {
  const weight = (n: number): number =>
    figure.kind === 'heraldProbability' ? (n === figure.n ? 1 : 0) : clickWeight(n, figure.eta, figure.dark);
  const marginal = numberDiagonal(
    { kind: 'output', modes: 1, pure: false, state: figure.state, mode: figure.mode },
    resolution,
  );
  let value = 0;
  marginal.p.forEach((p, n) => (value += p * weight(n)));
  return of(marginal, value, 16 * EPS * value + marginal.noise * Math.sqrt(value + marginal.noise), marginal.outside);
}

type MomentFigure = Parameters<typeof figureOfMoments>[0];

function momentFigure(figure: MomentFigure, resolution: Resolution): Truncated {
  let truncation = 0;
  let dimension = 0;
  let outsideWeight = 0;
  const note = (levels: number, outside: number, order: number) => {
    dimension = Math.max(dimension, levels);
    outsideWeight = Math.max(outsideWeight, outside);
    // Photon numbers outside are weighted by their powers; the bound falls geometrically beyond the last level.
    truncation = Math.max(truncation, 4 * outside * (levels + 10) ** order);
  };
  const { state } = figure;
  const pushed = pushedIn(state);
  const oneMode = (of: State, p: number, q: number): Moment => {
    if (p + q === 0) return { value: { re: 1, im: 0 }, error: 0 };
    if (p === q) {
      const diagonal = numberDiagonal(of, resolution);
      note(diagonal.levels, diagonal.outside, p);
      return diagonalMoment(diagonal, p);
    }
    const basis = numberState(of, resolution);
    note(basis.levels, basis.outside, Math.ceil((p + q) / 2));
    return oneModeMoment(basis, p, q);
  };
  const moment = (p: number, q: number, r = 0, s = 0): Moment => {
    if (pushed.kind === 'product') {
      const first = oneMode(pushed.first, p, q);
      if (first.value.re === 0 && first.value.im === 0 && first.error === 0) return first;
      const second = oneMode(pushed.second, r, s);
      const value = multiply(first.value, second.value);
      const error = first.error * abs(second.value) + second.error * abs(first.value) + EPS * abs(value);
      return { value, error };
    }
    if (state.modes === 1) return oneMode(state, p, q);
    if (p === q && r === s) {
      const joint = jointDiagonal(state, resolution);
      note(joint.levels, joint.outside, p + r);
      let value = 0;
      for (let n = p; n < joint.levels; n++) {
        for (let m = r; m < joint.levels; m++) {
          value += joint.p[n * joint.levels + m]! * fallingFactorial(n, p) * fallingFactorial(m, r);
        }
      }
      return { value: { re: value, im: 0 }, error: value * EPS * 16 + joint.noise * joint.levels ** (p + r) };
    }
    return jointMoment(state, resolution, p, q, r, s, note);
  };
  const { value, error } = figureOfMoments(figure, moment);
  // Quotients have their truncation in the error of what they divide: it is turned into the value's scale.
  const mean =
    figure.kind === 'g2' || figure.kind === 'gN' || figure.kind === 'mandelQ' || figure.kind === 'fanoFactor';
  const order = figure.kind === 'gN' ? figure.order : 2;
  const scale = mean ? abs(moment(1, 1).value) ** (figure.kind === 'g2' || figure.kind === 'gN' ? order : 1) : 1;
  const joint = figure.kind === 'g2Cross' ? abs(moment(1, 1, 0, 0).value) * abs(moment(0, 0, 1, 1).value) : 1;
  const total = figure.kind === 'visibility' ? abs(moment(1, 1, 0, 0).value) + abs(moment(0, 0, 1, 1).value) : 1;
  return { value, error, truncation: truncation / (scale * joint * total), dimension, outsideWeight };
}

function diagonalMoment(diagonal: NumberDiagonal, order: number): Moment {
  let value = 0;
  for (let n = order; n < diagonal.levels; n++) value += diagonal.p[n]! * fallingFactorial(n, order);
  return { value: { re: value, im: 0 }, error: value * EPS * 16 + noiseMoment(diagonal, order) };
}

/** Noise of amplitudes shows in proportion to them: √(P noise) summed with its weight. */
function noiseMoment(diagonal: NumberDiagonal, order: number): number {
  if (diagonal.noise === 0) return 0;
  let sum = 0;
  for (let n = order; n < diagonal.levels; n++) {
    sum += (2 * Math.sqrt(Math.abs(diagonal.p[n]!)) + diagonal.noise) * fallingFactorial(n, order);
  }
  return diagonal.noise * sum;
}

/** ⟨a†ᵖ a^q⟩ = Σ ρ_{k+q, k+p} √((k+q)!/k!) √((k+p)!/k!). */
function oneModeMoment(basis: NumberState, p: number, q: number): Moment {
  if (basis.kind === 'diagonal') return { value: { re: 0, im: 0 }, error: 0 };
  let re = 0;
  let im = 0;
  let size = 0;
  let weights = 0;
  for (let k = 0; k + Math.max(p, q) < basis.levels; k++) {
    const element = elementOf(basis, k + q, k + p);
    const factor = Math.sqrt(fallingFactorial(k + q, q) * fallingFactorial(k + p, p));
    re += element.re * factor;
    im += element.im * factor;
    size += Math.hypot(element.re, element.im) * factor;
    if (basis.noise > 0) {
      weights +=
        factor * (basis.kind === 'ket' ? Math.sqrt(sizeAt(basis, k + q)) + Math.sqrt(sizeAt(basis, k + p)) : 1);
    }
  }
  return { value: { re, im }, error: size * EPS * 16 + basis.noise * weights };
}

function jointMoment(
  state: State,
  resolution: Resolution,
  p: number,
  q: number,
  r: number,
  s: number,
  note: (levels: number, outside: number, order: number) => void,
): Moment {
  const { kets, levels, noise, outside } = ensembleOf(state, resolution);
  note(levels, outside, Math.ceil((p + q + r + s) / 2));
  let re = 0;
  let im = 0;
  let size = 0;
  for (const ket of kets) {
    // a₁^q a₂ˢ|n, m⟩ must meet a₁ᵖ a₂ʳ|n', m'⟩: n' = n − q + p, m' = m − s + r.
    eachAmplitude(ket, (n, m, a, b) => {
      const low1 = n - q;
      const low2 = m - s;
      if (low1 < 0 || low2 < 0) return;
      const n2 = low1 + p;
      const m2 = low2 + r;
      const block = ket.blocks[n2 + m2];
      if (block === undefined) return;
      const factor = Math.sqrt(
        fallingFactorial(n, q) * fallingFactorial(m, s) * fallingFactorial(n2, p) * fallingFactorial(m2, r),
      );
      const c = block.re[n2]!;
      const d = block.im[n2]!;
      re += factor * (c * a + d * b);
      im += factor * (c * b - d * a);
      size += factor * Math.hypot(a, b) * Math.hypot(c, d);
    });
  }
  const scale = levels ** ((p + q + r + s) / 2);
  return { value: { re, im }, error: size * EPS * 16 + 2 * noise * scale };
}
