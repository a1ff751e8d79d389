import { abs, abs2, multiply, phase, type Complex } from '../complex';
import { quadratureScale } from '../convention';
import type { Figure } from '../figures';
import {
  gaussianEntropy,
  gaussianFidelity,
  gaussianLogNegativity,
  gaussianOverlap,
  gaussianPurity,
  gaussianWigner,
  normalDensity,
  quadratureOf,
} from '../gaussian/gaussian-figures';
import { gaussianOf, type GaussianState } from '../gaussian/gaussian-state';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { figureOfMoments, isMomentFigure, type FigureEstimate, type MomentSource } from '../moments/moment-figures';
import { levelsFor } from '../photon-bounds';
import { poisson } from '../special/distributions';
import { logFactorial } from '../special/factorials';
import { geometric } from '../special/distributions';
import { channelChain, isChannel, type State } from '../state';
import { withoutPhases } from '../without-phases';
import { gaussianNegativity, negativityOf, withoutGaussianUnitaries } from '../wigner-negativity';
import { outerToSources } from './form';
import { allAtZero, innerProduct, sumOfForms } from './form-products';
import { averagedOverPhase } from './averages-over-phase';
import { ketForms } from './ket-forms';
import { noCounts, operatorForms, project, traceOut } from './operator-forms';
import {
  densityBlock,
  expectation,
  jointProbability,
  ketNorm,
  matrixElement,
  operatorNorm,
  photonDistribution,
} from './photon-numbers';
import { characteristic, husimi, pFunction, quadratureDensity, traceOfProduct, wigner } from './quasi-distributions';
import { isQuickAtPoints, wignerOnPoints } from './wigner-pictures';

/** A figure's estimate, and what was cut off where a sum over photon numbers was. */
export interface PhaseSpaceEstimate extends FigureEstimate {
  readonly dimension?: number;
  readonly outsideWeight?: number;
}

/**
 * A figure from Gaussians in phase space, nothing truncated.
 *
 * @throws MethodDoesNotApply where the state or the figure has no such form
 * @throws OpticsError where the figure is not defined
 */
export function phaseSpaceFigure(figure: Figure): PhaseSpaceEstimate {
  const { state } = figure;
  switch (figure.kind) {
    case 'photonProbability':
      return probability(withoutPhases(state), figure.n);
    case 'photonDistribution': {
      const plain = withoutPhases(state);
      const nbar = thermalMean(plain);
      if (nbar !== undefined) {
        const value = Array.from({ length: figure.nmax + 1 }, (_, n) => geometric(n, nbar));
        return { value, error: 2 ** -50 * (1 + figure.nmax / (1 + nbar)) * Math.max(...value) };
      }
      const { p, error } = photonDistribution(plain, figure.nmax);
      return { value: Array.from(p), error: Math.max(...error) };
    }
    case 'countProbability':
      return counts(withoutPhases(state), figure.m, figure.eta, figure.dark);
    case 'parity': {
      const { value, error } = wignerEstimate(withoutPhases(state), 0, 0);
      return { value: value * Math.PI, error: error * Math.PI };
    }
    case 'quadratureDensity': {
      const scale = quadratureScale(figure.convention);
      return realOf(
        averagedOverPhase(state, (inner, angle) => complexOf(density(inner, figure.x, figure.theta - angle, scale))),
      );
    }
    case 'wigner': {
      const scale = quadratureScale(figure.convention);
      const { re: w, error } = averagedOverPhase(state, (inner, angle) => {
        const turned = multiply({ re: figure.x / scale, im: figure.p / scale }, phase(-angle));
        return complexOf(wignerEstimate(inner, turned.re, turned.im));
      });
      return { value: w / scale ** 2, error: error / scale ** 2 };
    }
    case 'husimi':
      return realOf(
        averagedOverPhase(state, (inner, angle) => complexOf(husimi(inner, multiply(figure.alpha, phase(-angle))))),
      );
    case 'pFunction':
      return realOf(
        averagedOverPhase(state, (inner, angle) => complexOf(pFunction(inner, multiply(figure.alpha, phase(-angle))))),
      );
    case 'characteristic': {
      const { re, im, error } = averagedOverPhase(state, (inner, angle) => {
        const found = characteristic(inner, multiply(figure.xi, phase(-angle)), figure.s);
        return { ...found.value, error: found.error };
      });
      return { value: { re, im }, error };
    }
    case 'wignerNegativity':
      if (gaussianOf(state) !== undefined) return gaussianNegativity;
      {
        const plain = withoutGaussianUnitaries(state);
        return negativityOf(plain, (xs, ps) => wignerOnPoints(plain, xs, ps), isQuickAtPoints(plain));
      }
    case 'purity':
      return purity(state);
    case 'entropy': {
      if (state.pure) return { value: 0, error: 0 };
      return gaussianEntropy(gaussian(state));
    }
    case 'fidelity':
      return fidelity(state, figure.other);
    case 'overlap':
      return overlap(state, figure.other);
    case 'matrixElement':
      return figure.m === figure.n
        ? probability(withoutPhases(state), figure.n)
        : matrixElement(state, figure.m, figure.n);
    case 'densityMatrix':
      return block(state, figure.nmax);
    case 'atomInversion':
      return inversion(withoutPhases(state), figure.coupling * figure.t);
    case 'jointProbability':
      return jointProbability(state, figure.n, figure.m);
    case 'logNegativity':
      return gaussianLogNegativity(gaussian(state), state.pure);
    case 'heraldProbability': {
      // After one mode was projected on, only the other's variables are left: they are put to 0.
      const { value, error } = expectation(state, (form) => allAtZero(project(form, figure.mode, figure.n)));
      return { value: value.re, error };
    }
    case 'clickProbability': {
      const other = figure.mode === 1 ? 2 : 1;
      const silent = expectation(state, (form) => noCounts(traceOut(form, other), 1, figure.eta));
      const quiet = Math.exp(-figure.dark);
      return { value: 1 - quiet * silent.value.re, error: quiet * silent.error + 2 ** -53 };
    }
    default:
      if (isMomentFigure(figure)) return momentFigure(figure);
      throw new MethodDoesNotApply('no closed form');
  }
}

const complexOf = ({ value, error }: { value: number; error: number }) => ({ re: value, im: 0, error });
const realOf = ({ re, error }: { re: number; error: number }) => ({ value: re, error });

function gaussian(state: State): GaussianState {
  const found = gaussianOf(state);
  if (found === undefined) throw new MethodDoesNotApply('the state is not Gaussian');
  return found;
}

function probability(state: State, n: number): FigureEstimate {
  if (state.pure) {
    const { p, error } = photonDistribution(state, n);
    return { value: p[n]!, error: error[n]! };
  }
  const nbar = thermalMean(state);
  if (nbar !== undefined) {
    const value = geometric(n, nbar);
    return { value, error: value * 2 ** -52 * (8 + n / (1 + nbar)) };
  }
  const { value, error } = expectation(state, (form) => project(form, 1, n));
  return { value: value.re, error };
}

/** n̄ of thermal light behind losses and amplifiers, which is thermal light again. */
function thermalMean(state: State): number | undefined {
  if (state.kind === 'thermal') return state.nbar;
  if (state.kind === 'fock') return state.n === 0 ? 0 : undefined;
  if (!isChannel(state) || state.modes === 2) return undefined;
  const { channel, inner } = channelChain(state);
  const before = thermalMean(inner);
  return before === undefined ? undefined : channel.gain * before + channel.noise;
}

/** Losses thin the light, dark counts join it. */
function counts(state: State, m: number, eta: number, dark: number): FigureEstimate {
  const seen: State = eta === 1 ? state : { kind: 'lose', modes: 1, pure: false, state, mode: 1, eta };
  if (dark === 0) return probability(seen, m);
  const { p, error } = photonDistribution(seen, m);
  let value = 0;
  let worst = 0;
  for (let k = 0; k <= m; k++) {
    const weight = poisson(m - k, dark);
    value += p[k]! * weight;
    worst += error[k]! * weight + 2 ** -51 * Math.abs(p[k]!) * weight;
  }
  return { value, error: worst };
}

function wignerEstimate(state: State, x: number, p: number): { readonly value: number; readonly error: number } {
  const found = gaussianOf(state);
  return found === undefined ? wigner(state, x, p) : gaussianWigner(found, x, p);
}

function density(
  state: State,
  x: number,
  theta: number,
  scale: number,
): { readonly value: number; readonly error: number } {
  const found = gaussianOf(state);
  if (found !== undefined) {
    const { mean, variance } = quadratureOf(found, phase(theta));
    const { value, error } = normalDensity(x / scale, mean, variance);
    return { value: value / scale, error: error / scale };
  }
  const { value, error } = quadratureDensity(state, x / scale, theta);
  return { value: value / scale, error: error / scale };
}

function purity(state: State): FigureEstimate {
  if (state.pure) {
    ketNorm(state);
    return { value: 1, error: 0 };
  }
  const found = gaussianOf(state);
  return found === undefined ? traceOfProduct(state, state) : gaussianPurity(found);
}

function overlap(left: State, right: State): FigureEstimate & { readonly value: Complex } {
  const one = ketNorm(left);
  const two = ketNorm(right);
  const scale = 1 / Math.sqrt(one.norm * two.norm);
  const sum = innerProduct(ketForms(left).forms, ketForms(right).forms);
  const value = { re: sum.value.re * scale, im: sum.value.im * scale };
  return { value, error: sum.error * scale + abs(value) * (one.relative + two.relative + 2 ** -51) };
}

function fidelity(left: State, right: State): FigureEstimate {
  if (left.pure && right.pure) {
    const { value, error } = overlap(left, right);
    return { value: abs2(value), error: 2 * abs(value) * error + error * error };
  }
  const one = gaussianOf(left);
  const two = gaussianOf(right);
  if (left.pure || right.pure) {
    return one !== undefined && two !== undefined ? gaussianOverlap(one, two) : traceOfProduct(left, right);
  }
  const closed = gaussianFidelity(gaussian(left), gaussian(right));
  if (closed === undefined) throw new MethodDoesNotApply('no closed form for two mixed states of two modes');
  return closed;
}

function block(state: State, nmax: number): FigureEstimate {
  const { re, im, error } = densityBlock(state, nmax);
  const side = nmax + 1;
  const isReal = im.every((value, at) => Math.abs(value) <= error[at]!);
  const value = Array.from({ length: side }, (_, m) =>
    Array.from({ length: side }, (__, n) =>
      isReal ? re[m * side + n]! : { re: re[m * side + n]!, im: im[m * side + n]! },
    ),
  );
  return { value, error: Math.max(...error) };
}

function inversion(state: State, angle: number): PhaseSpaceEstimate {
  const { levels, outsideWeight } = levelsFor(state);
  const { p, error } = photonDistribution(state, levels - 1);
  let value = 0;
  let worst = outsideWeight;
  for (let n = 0; n < levels; n++) {
    const turn = 2 * angle * Math.sqrt(n + 1);
    value += p[n]! * Math.cos(turn);
    worst += error[n]! + p[n]! * 2 ** -52 * (1 + Math.abs(turn));
  }
  return { value, error: worst, dimension: levels, outsideWeight };
}

function momentFigure(figure: Extract<Figure, Parameters<typeof figureOfMoments>[0]>): FigureEstimate {
  const found = gaussianOf(figure.state);
  if (found !== undefined) {
    if (figure.kind === 'quadratureMean' || figure.kind === 'quadratureVariance') {
      const { mean, variance } = quadratureOf(found, phase(figure.theta));
      const scale = quadratureScale(figure.convention);
      return figure.kind === 'quadratureMean'
        ? { value: mean.value * scale, error: mean.error * scale }
        : { value: variance.value * scale ** 2, error: variance.error * scale ** 2 };
    }
    if (figure.kind === 'covariance') {
      const side = 2 * found.modes;
      const scale = 2 * figure.convention.vacuumVariance;
      const value = Array.from({ length: side }, (_, i) =>
        Array.from({ length: side }, (__, j) => found.covariance[i * side + j]! * scale),
      );
      return { value, error: found.covariance.reduce((most, v) => Math.max(most, Math.abs(v)), 0) * 2 ** -50 * scale };
    }
  }
  return figureOfMoments(figure, formMoments(figure.state));
}

/** Normally ordered moments as derivatives of the characteristic function at 0. */
function formMoments(state: State): MomentSource {
  return (p, q, r = 0, s = 0) => {
    const numbers = p === q && r === s && state.modes === 1;
    const from = numbers ? withoutPhases(state) : state;
    operatorNorm(from);
    const targets = from.modes === 1 ? [p, q] : [p, q, r, s];
    const { value, error } = expectation(from, (form) => outerToSources(form, targets));
    const size = Math.exp(targets.reduce((sum, target) => sum + logFactorial(target), 0) / 2);
    const scale = (q + s) % 2 === 0 ? size : -size;
    return { value: { re: value.re * scale, im: value.im * scale }, error: error * size };
  };
}

/** The trace of a state's Gaussians, for tests of conditioned states. */
export const traceOfForms = (state: State): number => sumOfForms(operatorForms(state).forms.map(allAtZero)).value.re;
