import { abs2, phase, type Complex } from '../complex';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import type { Conditioned } from './conditions';
import { applyUnitary, type NumberUnitary } from './displaced-numbers';
import { logAdded } from './number-maps';
import { checkDensityLevels, densityOf, type NumberKet, type NumberState } from './one-mode';
import { mixedIn } from './resolution';

const EPS = 2 ** -52;

/** Refuses a displacement or squeezer that would take too long. */
export function checkUnitaryWork(inner: NumberState, levels: number): void {
  let columns = 0;
  for (let n = 0; n < inner.levels; n++) {
    const filled =
      inner.kind === 'ket'
        ? inner.re[n] !== 0 || inner.im[n] !== 0
        : inner.kind === 'diagonal'
          ? inner.p[n] !== 0
          : true;
    if (filled) columns++;
  }
  if (inner.levels * levels > 4e6 || columns * levels > 4e6) {
    throw new MethodDoesNotApply('the displaced or squeezed number states would take too long');
  }
}

/** U ρ U†. */
export function transform(inner: NumberState, unitary: NumberUnitary, outside: number): NumberState {
  const { levels } = unitary;
  if (inner.kind === 'ket') {
    const { re, im } = applyUnitary(unitary, inner.re, inner.im);
    let terms = 0;
    for (let n = 0; n < inner.levels; n++) if (inner.re[n] !== 0 || inner.im[n] !== 0) terms++;
    // One column keeps its own digits; a sum of several has noise of the size of its terms.
    const noise = terms > 1 ? 4 * EPS + inner.noise : inner.noise;
    return { kind: 'ket', levels, re, im, noise, outside: outside + mixedIn(inner.outside) };
  }
  checkDensityLevels(levels);
  // U ρ U†: columns of ρ first, then rows by the conjugate.
  const source = densityOf(inner);
  const from = source.levels;
  const halfRe = new Float64Array(levels * from);
  const halfIm = new Float64Array(levels * from);
  for (let n = 0; n < from; n++) {
    const re = Float64Array.from({ length: from }, (_, m) => source.re[m * from + n]!);
    const im = Float64Array.from({ length: from }, (_, m) => source.im[m * from + n]!);
    const moved = applyUnitary(unitary, re, im);
    for (let m = 0; m < levels; m++) {
      halfRe[m * from + n] = moved.re[m]!;
      halfIm[m * from + n] = moved.im[m]!;
    }
  }
  const outRe = new Float64Array(levels * levels);
  const outIm = new Float64Array(levels * levels);
  for (let m = 0; m < levels; m++) {
    const re = halfRe.subarray(m * from, (m + 1) * from);
    const im = halfIm.subarray(m * from, (m + 1) * from).map((x) => -x);
    const moved = applyUnitary(unitary, re, im);
    for (let n = 0; n < levels; n++) {
      outRe[m * levels + n] = moved.re[n]!;
      outIm[m * levels + n] = -moved.im[n]!;
    }
  }
  const noise = 4 * EPS + inner.noise;
  return { kind: 'density', levels, re: outRe, im: outIm, noise, outside: outside + mixedIn(inner.outside) };
}

/** Σ p_k ρ_k; the probabilities are above 0. */
export function mix(built: readonly { readonly state: NumberState; readonly probability: number }[]): NumberState {
  const only = built[0];
  if (built.length === 1 && only !== undefined) return only.state;
  const levels = Math.max(...built.map(({ state }) => state.levels));
  const outside = built.reduce((sum, { state, probability }) => sum + probability * state.outside, 0);
  const noise = built.reduce((sum, { state, probability }) => sum + probability * state.noise, 0);
  if (built.every(({ state }) => state.kind === 'diagonal')) {
    const p = new Float64Array(levels);
    for (const { state, probability } of built) {
      if (state.kind === 'diagonal') for (let n = 0; n < state.levels; n++) p[n]! += probability * state.p[n]!;
    }
    return { kind: 'diagonal', levels, p, noise, outside };
  }
  checkDensityLevels(levels);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  for (const { state, probability } of built) {
    const density = densityOf(state);
    for (let m = 0; m < density.levels; m++) {
      for (let n = 0; n < density.levels; n++) {
        re[m * levels + n]! += probability * density.re[m * density.levels + n]!;
        im[m * levels + n]! += probability * density.im[m * density.levels + n]!;
      }
    }
  }
  return { kind: 'density', levels, re, im, noise: noise + EPS, outside };
}

/** ρ_mn → ρ_mn e^{−σ²(m−n)²/2}. */
export function dephase(inner: NumberState, sigma: number): NumberState {
  if (inner.kind === 'diagonal' || sigma === 0) return inner;
  const density = densityOf(inner);
  const { levels } = density;
  const factors = Float64Array.from({ length: levels }, (_, d) => Math.exp((-sigma * sigma * d * d) / 2));
  const re = density.re.map((x, at) => x * factors[Math.abs(Math.floor(at / levels) - (at % levels))]!);
  const im = density.im.map((x, at) => x * factors[Math.abs(Math.floor(at / levels) - (at % levels))]!);
  return { ...density, re, im };
}

/** ρ_mn → ρ_mn e^{iφ(m−n)}. */
export function shift(inner: NumberState, direction: Complex): NumberState {
  if (inner.kind === 'diagonal') return inner;
  const angle = Math.atan2(direction.im, direction.re);
  const { levels } = inner;
  const turns = Array.from({ length: levels }, (_, n) => phase(angle * n));
  const re = new Float64Array(inner.re.length);
  const im = new Float64Array(inner.im.length);
  for (let at = 0; at < re.length; at++) {
    let turn = turns[inner.kind === 'ket' ? at : Math.floor(at / levels)]!;
    if (inner.kind === 'density') {
      const back = turns[at % levels]!;
      turn = { re: turn.re * back.re + turn.im * back.im, im: turn.im * back.re - turn.re * back.im };
    }
    re[at] = inner.re[at]! * turn.re - inner.im[at]! * turn.im;
    im[at] = inner.re[at]! * turn.im + inner.im[at]! * turn.re;
  }
  return { ...inner, re, im };
}

/** The same for a state of numbers; `probability` is that of the move divided by k!. */
export function moveNumbers(inner: NumberState, k: number, added: boolean, outside: number): Conditioned {
  const levels = Math.max(1, added ? inner.levels + k : inner.levels - k);
  const reference = logAdded(0, k);
  // Factor for the target number m: from m − k up, or from m + k down.
  const factor = Float64Array.from({ length: levels }, (_, m) => {
    const low = added ? m - k : m;
    return low < 0 ? 0 : Math.exp((logAdded(low, k) - reference) / 2);
  });
  const from = (m: number) => (added ? m - k : m + k);
  if (inner.kind === 'ket') {
    const re = new Float64Array(levels);
    const im = new Float64Array(levels);
    let probability = 0;
    for (let m = 0; m < levels; m++) {
      re[m] = factor[m]! * (inner.re[from(m)] ?? 0);
      im[m] = factor[m]! * (inner.im[from(m)] ?? 0);
      probability += re[m]! ** 2 + im[m]! ** 2;
    }
    const noise = inner.noise * Math.max(...factor);
    return { state: { kind: 'ket', levels, re, im, noise, outside }, probability, reference: 1 };
  }
  if (inner.kind === 'diagonal') {
    const p = Float64Array.from({ length: levels }, (_, m) => factor[m]! ** 2 * (inner.p[from(m)] ?? 0));
    const probability = p.reduce((sum, value) => sum + value, 0);
    const noise = inner.noise * Math.max(...factor) ** 2;
    return { state: { kind: 'diagonal', levels, p, noise, outside }, probability, reference: 1 };
  }
  checkDensityLevels(levels);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  let probability = 0;
  for (let m = 0; m < levels; m++) {
    if (from(m) < 0 || from(m) >= inner.levels) continue;
    for (let n = 0; n < levels; n++) {
      if (from(n) < 0 || from(n) >= inner.levels) continue;
      const both = factor[m]! * factor[n]!;
      re[m * levels + n] = both * inner.re[from(m) * inner.levels + from(n)]!;
      im[m * levels + n] = both * inner.im[from(m) * inner.levels + from(n)]!;
    }
    probability += re[m * levels + m]!;
  }
  const noise = inner.noise * Math.max(...factor) ** 2;
  return { state: { kind: 'density', levels, re, im, noise, outside }, probability, reference: 1 };
}

/** The amplitudes of a state that is pure. */
export function asKet(state: NumberState): NumberKet {
  if (state.kind === 'ket') return state;
  if (state.kind === 'diagonal') {
    let at = -1;
    for (let n = 0; n < state.levels; n++) {
      if (state.p[n] === 0) continue;
      if (at >= 0) throw new MethodDoesNotApply('not a ket in the number basis');
      at = n;
    }
    const re = new Float64Array(state.levels);
    if (at >= 0) re[at] = 1;
    return {
      kind: 'ket',
      levels: state.levels,
      re,
      im: new Float64Array(state.levels),
      noise: state.noise,
      outside: state.outside,
    };
  }
  throw new MethodDoesNotApply('not a ket in the number basis');
}

/** Σ c_k|ψ_k⟩, not normalised. */
export function superpose(parts: readonly { readonly amplitude: Complex; readonly ket: NumberKet }[]): Conditioned {
  const levels = Math.max(1, ...parts.map(({ ket }) => ket.levels));
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let reference = 0;
  let spread = 0;
  let noise = 0;
  const several = new Uint8Array(levels);
  for (const { amplitude, ket } of parts) {
    const size = Math.sqrt(abs2(amplitude));
    reference += size * size;
    spread += size * Math.sqrt(ket.outside);
    noise += size * ket.noise;
    for (let n = 0; n < ket.levels; n++) {
      const a = ket.re[n]!;
      const b = ket.im[n]!;
      if (a === 0 && b === 0) continue;
      several[n]!++;
      re[n]! += amplitude.re * a - amplitude.im * b;
      im[n]! += amplitude.re * b + amplitude.im * a;
    }
  }
  let probability = 0;
  for (let n = 0; n < levels; n++) probability += re[n]! ** 2 + im[n]! ** 2;
  // Where several terms meet, what cancels leaves noise of their size.
  if (several.some((count) => count > 1)) noise += EPS * Math.sqrt(reference);
  if (!(probability > 1e3 * (noise * noise + EPS * EPS * reference))) {
    throw new StateVanishes('the norm vanishes to rounding');
  }
  return { state: { kind: 'ket', levels, re, im, noise, outside: spread * spread }, probability, reference: 1 };
}
