import { abs, abs2, type Complex } from '../complex';
import { quadratureScale } from '../convention';
import type { Figure, FigureKind, FigureValue } from '../figures';
import { OpticsError } from '../optics-error';
import { phase } from '../complex';

/** A normally ordered moment and an estimate of its absolute error. */
export interface Moment {
  readonly value: Complex;
  readonly error: number;
}

/** ⟨a₁†ᵖ a₁^q a₂†ʳ a₂ˢ⟩ of a state, however it was found. */
export type MomentSource = (p: number, q: number, r?: number, s?: number) => Moment;

/** A figure's value with an estimate of its absolute error. */
export interface FigureEstimate {
  readonly value: FigureValue;
  readonly error: number;
}

const EPS = 2 ** -52;

const MOMENT_FIGURES = [
  'meanPhotons',
  'photonVariance',
  'mandelQ',
  'fanoFactor',
  'g2',
  'gN',
  'amplitude',
  'quadratureMean',
  'quadratureVariance',
  'covariance',
  'coincidence',
  'g2Cross',
  'visibility',
  'fieldCorrelation',
] as const satisfies readonly FigureKind[];

type MomentFigure = Extract<Figure, { readonly kind: (typeof MOMENT_FIGURES)[number] }>;

/** Whether a figure is a function of moments of a and a†. */
export function isMomentFigure(figure: Figure): figure is MomentFigure {
  return (MOMENT_FIGURES as readonly FigureKind[]).includes(figure.kind);
}

/**
 * Figures that are polynomials in a and a†, or quotients of them, from normally ordered moments.
 *
 * @param figure the figure, with its convention
 * @param moment where moments come from
 * @returns the value with an estimate of its error
 * @throws OpticsError for quotients by a mean photon number of 0
 */
export function figureOfMoments(figure: MomentFigure, moment: MomentSource): FigureEstimate {
  switch (figure.kind) {
    case 'meanPhotons':
      return real(moment(1, 1));
    case 'photonVariance':
      return varianceOf(moment);
    case 'mandelQ':
    case 'fanoFactor':
      return spreadOf(figure.kind, moment);
    case 'g2':
      return correlation('g2', moment, 2);
    case 'gN':
      return correlation('gN', moment, figure.order);
    case 'amplitude': {
      const { value, error } = moment(0, 1);
      return { value, error };
    }
    case 'quadratureMean': {
      const scale = quadratureScale(figure.convention);
      const { value, error } = meanQuadrature(moment(0, 1), phase(figure.theta));
      return { value: value * scale, error: error * scale };
    }
    case 'quadratureVariance': {
      const scale = 2 * figure.convention.vacuumVariance;
      const { value, error } = quadratureVariance(moment, phase(figure.theta));
      return { value: value * scale, error: error * scale };
    }
    case 'covariance':
      return covarianceOf(moment, figure.state.modes, 2 * figure.convention.vacuumVariance);
    case 'coincidence':
      return real(moment(1, 1, 1, 1));
    case 'g2Cross':
      return crossCorrelation(moment);
    case 'visibility':
      return visibilityOf(moment);
    case 'fieldCorrelation': {
      const { value, error } = moment(1, 0, 0, 1);
      return { value, error };
    }
  }
}

const real = ({ value, error }: Moment) => ({ value: value.re, error });

/** Refuses to divide by a mean photon number that vanishes. @throws OpticsError */
export function checkMean(name: string, mean: number, error: number, what = 'the mean photon number'): void {
  if (mean > 16 * error && mean > 0) return;
  throw new OpticsError(`is not defined where ${what} vanishes`, {
    functionName: name,
    allowed: 'a state with photons',
  });
}

function varianceOf(moment: MomentSource) {
  const mean = real(moment(1, 1));
  const second = real(moment(2, 2));
  const value = second.value + mean.value - mean.value * mean.value;
  const rounding = EPS * (Math.abs(second.value) + mean.value * mean.value);
  return { value, error: second.error + mean.error * (1 + 2 * mean.value) + rounding };
}

function spreadOf(kind: 'mandelQ' | 'fanoFactor', moment: MomentSource) {
  const mean = real(moment(1, 1));
  checkMean(kind, mean.value, mean.error);
  const second = real(moment(2, 2));
  const ratio = second.value / mean.value;
  const value = kind === 'mandelQ' ? ratio - mean.value : ratio - mean.value + 1;
  const error =
    second.error / mean.value + mean.error * (1 + Math.abs(ratio) / mean.value) + EPS * (Math.abs(ratio) + mean.value);
  return { value, error };
}

function correlation(name: string, moment: MomentSource, order: number) {
  const mean = real(moment(1, 1));
  checkMean(name, mean.value, mean.error);
  const high = real(moment(order, order));
  const power = mean.value ** order;
  const value = high.value / power;
  if (!(power > 0)) throw new OpticsError('the mean photon number is too small for this order', { functionName: name });
  return { value, error: high.error / power + Math.abs(value) * (order * (mean.error / mean.value) + 4 * EPS) };
}

function crossCorrelation(moment: MomentSource) {
  const first = real(moment(1, 1, 0, 0));
  const second = real(moment(0, 0, 1, 1));
  checkMean('g2Cross', first.value, first.error, 'the mean photon number of mode 1');
  checkMean('g2Cross', second.value, second.error, 'the mean photon number of mode 2');
  const both = real(moment(1, 1, 1, 1));
  const product = first.value * second.value;
  const value = both.value / product;
  const relative = first.error / first.value + second.error / second.value + 4 * EPS;
  return { value, error: both.error / product + Math.abs(value) * relative };
}

function visibilityOf(moment: MomentSource) {
  const first = real(moment(1, 1, 0, 0));
  const second = real(moment(0, 0, 1, 1));
  const total = { value: first.value + second.value, error: first.error + second.error };
  checkMean('visibility', total.value, total.error, 'the mean photon number of both modes');
  const field = moment(1, 0, 0, 1);
  const value = (2 * abs(field.value)) / total.value;
  return { value, error: (2 * field.error + value * total.error) / total.value + 4 * EPS * value };
}

/** ⟨x_θ⟩ = √2 Re(⟨a⟩ e^{−iθ}). */
function meanQuadrature(amplitude: Moment, direction: Complex) {
  const value = Math.SQRT2 * (amplitude.value.re * direction.re + amplitude.value.im * direction.im);
  return { value, error: Math.SQRT2 * amplitude.error + 2 * EPS * abs(amplitude.value) };
}

/** Var x_θ = ½ + ⟨a†a⟩ − |⟨a⟩|² + Re[(⟨a²⟩ − ⟨a⟩²) e^{−2iθ}]. */
function quadratureVariance(moment: MomentSource, direction: Complex) {
  const mean = moment(0, 1);
  const number = real(moment(1, 1));
  const square = moment(0, 2);
  const { re, im } = mean.value;
  const spreadRe = square.value.re - (re * re - im * im);
  const spreadIm = square.value.im - 2 * re * im;
  const cos = direction.re * direction.re - direction.im * direction.im;
  const sin = 2 * direction.re * direction.im;
  const value = 0.5 + (number.value - abs2(mean.value)) + spreadRe * cos + spreadIm * sin;
  const rounding = 4 * EPS * (0.5 + number.value + abs(square.value) + 2 * abs2(mean.value));
  return { value, error: number.error + square.error + 4 * abs(mean.value) * mean.error + rounding };
}

/** Entry of the normally ordered covariances that a pair of quadratures needs. */
function covarianceOf(moment: MomentSource, modes: 1 | 2, scale: number): FigureEstimate {
  const side = 2 * modes;
  const rows: number[][] = Array.from({ length: side }, () => new Array<number>(side).fill(0));
  let worst = 0;
  const single = (mode: number, p: number, q: number) => (mode === 0 ? moment(p, q, 0, 0) : moment(0, 0, p, q));
  const pair = (p: number, q: number, r: number, s: number) => moment(p, q, r, s);
  const means = Array.from({ length: modes }, (_, mode) => single(mode, 0, 1));
  for (let j = 0; j < modes; j++) {
    for (let k = j; k < modes; k++) {
      const lowered = j === k ? single(j, 0, 2) : pair(0, 1, 0, 1);
      const mixed = j === k ? single(j, 1, 1) : pair(1, 0, 0, 1);
      const a = means[j]!;
      const b = means[k]!;
      // M = ⟨a_j a_k⟩ − ⟨a_j⟩⟨a_k⟩ and N = ⟨a_j† a_k⟩ − ⟨a_j⟩*⟨a_k⟩.
      const m = {
        re: lowered.value.re - (a.value.re * b.value.re - a.value.im * b.value.im),
        im: lowered.value.im - (a.value.re * b.value.im + a.value.im * b.value.re),
      };
      const n = {
        re: mixed.value.re - (a.value.re * b.value.re + a.value.im * b.value.im),
        im: mixed.value.im - (a.value.re * b.value.im - a.value.im * b.value.re),
      };
      const vacuum = j === k ? 0.5 : 0;
      const xx = vacuum + n.re + m.re;
      const pp = vacuum + n.re - m.re;
      const xp = m.im + n.im;
      const px = m.im - n.im;
      rows[2 * j]![2 * k] = rows[2 * k]![2 * j] = xx * scale;
      rows[2 * j + 1]![2 * k + 1] = rows[2 * k + 1]![2 * j + 1] = pp * scale;
      rows[2 * j]![2 * k + 1] = rows[2 * k + 1]![2 * j] = xp * scale;
      rows[2 * j + 1]![2 * k] = rows[2 * k]![2 * j + 1] = px * scale;
      const size = abs(lowered.value) + abs(mixed.value) + 2 * abs(a.value) * abs(b.value);
      const error = lowered.error + mixed.error + 2 * (abs(a.value) * b.error + abs(b.value) * a.error);
      worst = Math.max(worst, (error + 4 * EPS * size) * scale);
    }
  }
  return { value: rows, error: worst };
}
