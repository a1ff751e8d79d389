import { abs, multiply } from '../complex';
import type { Figure } from '../figures';
import { checkMean, figureOfMoments, type Moment } from '../moments/moment-figures';
import { fallingFactorial } from '../special/factorials';
import type { State } from '../state';
import { jointDiagonal } from './joint-diagonal';
import { eachAmplitude } from './joint-ket';
import { ensembleOf, numberDiagonal, numberState } from './number-states';
import { elementOf, type NumberDiagonal, type NumberState } from './one-mode';
import { pushedIn } from './operations-on-factors';
import type { Resolution } from './resolution';
import { figureOf, type Truncated } from './truncated-figure';

const EPS = 2 ** -52;

type Spread = Extract<Figure, { readonly kind: 'photonVariance' | 'mandelQ' | 'fanoFactor' }>;

/** Var n about the mean, so that a state of one number has none to the last digit; Q and F from it. */
export function spreadOf({ kind }: Spread, diagonal: NumberDiagonal): Truncated {
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
  if (kind === 'photonVariance') return figureOf(diagonal, variance, rounding, beyond);
  checkMean(kind, centre, mean.error);
  const fano = variance / centre;
  const error = rounding / centre + fano * (mean.error / centre) + 4 * EPS * (1 + fano);
  return figureOf(diagonal, kind === 'fanoFactor' ? fano : fano - 1, error, beyond / centre);
}

type MomentFigure = Parameters<typeof figureOfMoments>[0];

/** A figure that is made of moments, each from sums over photon numbers. */
export function momentFigure(figure: MomentFigure, resolution: Resolution): Truncated {
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

const sizeAt = (state: NumberState, n: number): number => elementOf(state, n, n).re;
