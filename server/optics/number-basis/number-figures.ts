import { abs2 } from '../complex';
import { quadratureScale } from '../convention';
import type { Figure } from '../figures';
import { gaussianOf } from '../gaussian/gaussian-state';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { isMomentFigure } from '../moments/moment-figures';
import { type State } from '../state';
import { negativityOf, withoutGaussianUnitaries } from '../wigner-negativity';
import { jointDiagonal } from './joint-diagonal';
import { clickWeight } from './detection';
import { asksForEntries, entryAlone } from './entries-alone';
import { blockOf, countsOf, elementError, inside, probabilityOf, timesOf } from './number-entries';
import { momentFigure, spreadOf } from './number-moments';
import { figureOf, sizeOf, type NumberFigure, type Truncated } from './truncated-figure';
import { entropyOf, fidelityOf, jointFidelity, jointPurity, logNegativityOf, overlapOf, purityOf } from './comparisons';
import { numberDiagonal, numberState } from './number-states';
import { elementOf, simplest, type NumberState } from './one-mode';
import { pushedIn } from './operations-on-factors';
import { defaultResolution, type Resolution } from './resolution';
import { wignerOnGrid } from './wigner-grid';
import { densityAt, displacementTrace, husimiAt, wignerAt } from './wave-functions';

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

/** Whether phases are averaged somewhere in a state of one mode, so that it is no finite sum of Gaussians. */
function containsAverage(state: State): boolean {
  if (state.kind === 'phaseAveraged' || state.kind === 'dephased') return true;
  if (state.kind === 'mixture') return state.states.some(containsAverage);
  return 'state' in state && containsAverage(state.state);
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
      return figureOf(diagonal, value, diagonal.noise + 8 * EPS * sizeOf(value), inside(diagonal));
    }
    case 'countProbability':
      return countsOf(numberDiagonal(state, resolution), figure.m, figure.eta, figure.dark);
    case 'parity': {
      const diagonal = numberDiagonal(state, resolution);
      const value = diagonal.p.reduce((sum, p, n) => sum + (n % 2 === 0 ? p : -p), 0);
      return figureOf(diagonal, value, EPS * 8 + diagonal.noise * diagonal.levels, diagonal.outside);
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
      return figureOf(diagonal, value, error + diagonal.noise * diagonal.levels, diagonal.outside);
    }
    case 'quadratureDensity': {
      const scale = quadratureScale(figure.convention);
      const basis = numberState(state, resolution);
      const { value, error, truncation } = densityAt(basis, figure.x / scale, figure.theta);
      return figureOf(basis, value / scale, error / scale, truncation / scale);
    }
    case 'wigner': {
      const scale = quadratureScale(figure.convention);
      const basis = numberState(state, resolution);
      const { value, error, truncation } = wignerAt(basis, figure.x / scale, figure.p / scale);
      return figureOf(basis, value / scale ** 2, error / scale ** 2, truncation / scale ** 2);
    }
    case 'husimi': {
      const basis = numberState(state, resolution);
      const { value, error, truncation } = husimiAt(basis, figure.alpha);
      return figureOf(basis, value, error, truncation);
    }
    case 'characteristic': {
      const basis = numberState(state, resolution);
      const { re, im, error, truncation } = displacementTrace(basis, figure.xi, false);
      const order = Math.exp((figure.s * abs2(figure.xi)) / 2);
      return figureOf(basis, { re: re * order, im: im * order }, error * order, truncation * order);
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
      return figureOf(basis, found.value, found.error, 0);
    }
    case 'matrixElement': {
      if (figure.m === figure.n) return probabilityOf(numberDiagonal(state, resolution), figure.n);
      const basis = numberState(state, resolution);
      const value = elementOf(basis, figure.m, figure.n);
      return figureOf(basis, value, elementError(basis, figure.m, figure.n), inside(basis));
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
  return figureOf(
    marginal,
    value,
    16 * EPS * value + marginal.noise * Math.sqrt(value + marginal.noise),
    marginal.outside,
  );
}
