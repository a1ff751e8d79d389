import { MethodDoesNotApply } from '../method-does-not-apply';
import { binomialProbability } from '../special/distributions';
import { logFactorial } from '../special/factorials';
import type { NumberDensity, NumberDiagonal } from './one-mode';

/** Most multiplications of one map: about half a second. */
const MOST_WORK = 3e8;

function checkWork(work: number): void {
  if (work > MOST_WORK) throw new MethodDoesNotApply('the photon-number map would take too long');
}

/** P'(k) = Σ_n C(n, k) ηᵏ (1 − η)ⁿ⁻ᵏ P(n). */
export function loseDiagonal(state: NumberDiagonal, eta: number): NumberDiagonal {
  if (eta === 1) return state;
  const { levels } = state;
  const p = new Float64Array(levels);
  let occupied = 0;
  for (let n = 0; n < levels; n++) if (state.p[n] !== 0) occupied++;
  checkWork(occupied * levels);
  if (eta === 0) {
    p[0] = state.p.reduce((sum, value) => sum + value, 0);
    return { ...state, p };
  }
  const ratio = (1 - eta) / eta;
  for (let n = 0; n < levels; n++) {
    const weight = state.p[n]!;
    if (weight === 0) continue;
    // From the peak outwards, each term from its neighbour: no term is lost to underflow of the first.
    const peak = Math.min(n, Math.floor((n + 1) * eta));
    const top = weight * binomialProbability(n, peak, eta);
    let term = top;
    for (let k = peak; k >= 0; k--) {
      p[k]! += term;
      if (term === 0) break;
      term *= (k / (n - k + 1)) * ratio;
    }
    term = top;
    for (let k = peak + 1; k <= n; k++) {
      term *= (n - k + 1) / k / ratio;
      if (term === 0) break;
      p[k]! += term;
    }
  }
  return { ...state, p };
}

/** P'(k) = Σ_n C(k, n) G^{−n−1} (1 − 1/G)^{k−n} P(n): an amplifier without further noise. */
export function amplifyDiagonal(state: NumberDiagonal, gain: number, levels: number, outside: number): NumberDiagonal {
  const p = new Float64Array(levels);
  const excess = (gain - 1) / gain;
  let occupied = 0;
  for (let n = 0; n < state.levels; n++) if (state.p[n] !== 0) occupied++;
  checkWork(occupied * levels);
  for (let n = 0; n < Math.min(levels, state.levels); n++) {
    const weight = state.p[n]!;
    if (weight === 0) continue;
    // ln of C(k, n) G^{−n−1} (1 − 1/G)^{k−n} at its peak, k ≈ Gn + G − 1, then outwards.
    const peak = Math.min(levels - 1, Math.max(n, Math.floor(n * gain + gain - 1)));
    // C(k, n) G^{−n−1}(1 − 1/G)^{k−n} is a binomial probability of k trials divided by G.
    const top = (weight * binomialProbability(peak, n, 1 / gain)) / gain;
    let term = top;
    for (let k = peak; k >= n; k--) {
      p[k]! += term;
      if (term === 0) break;
      term *= (k - n) / k / excess;
    }
    term = top;
    for (let k = peak + 1; k < levels; k++) {
      term *= (k / (k - n)) * excess;
      if (term === 0) break;
      p[k]! += term;
    }
  }
  return { kind: 'diagonal', levels, p, noise: state.noise, outside };
}

/** ρ'_mn = Σ_k √(C(m+k, k) C(n+k, k)) η^{(m+n)/2} (1 − η)ᵏ ρ_{m+k, n+k}. */
export function loseDensity(state: NumberDensity, eta: number): NumberDensity {
  if (eta === 1) return state;
  const { levels } = state;
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  // Rows of √(C(n, k) ηⁿ⁻ᵏ (1 − η)ᵏ): the amplitude for n to lose k.
  const kraus = lossAmplitudes(levels, eta);
  for (let k = 0; k < levels; k++) {
    const row = kraus[k]!;
    for (let m = 0; m + k < levels; m++) {
      const left = row[m + k]!;
      if (left === 0) continue;
      const from = (m + k) * levels + k;
      const to = m * levels;
      for (let n = 0; n + k < levels; n++) {
        const factor = left * row[n + k]!;
        re[to + n]! += factor * state.re[from + n]!;
        im[to + n]! += factor * state.im[from + n]!;
      }
    }
  }
  return { ...state, re, im };
}

/** √(C(n, k) ηⁿ⁻ᵏ (1 − η)ᵏ) as rows of k: the amplitude for n photons to lose k. */
export function lossAmplitudes(levels: number, eta: number): readonly Float64Array[] {
  if (levels <= FEW_LEVELS) return lossAmplitudesByRatio(levels, eta);
  return Array.from({ length: levels }, (_, k) => {
    const row = new Float64Array(levels);
    for (let n = k; n < levels; n++) row[n] = Math.sqrt(binomialProbability(n, k, 1 - eta));
    return row;
  });
}

/** So few levels that a product along a row keeps its digits. */
const FEW_LEVELS = 80;

/** The same, each entry of a row from the one before it. */
function lossAmplitudesByRatio(levels: number, eta: number): readonly Float64Array[] {
  const lost = Math.sqrt(1 - eta);
  let start = 1;
  return Array.from({ length: levels }, (_, k) => {
    const row = new Float64Array(levels);
    let here = start;
    for (let n = k; n < levels; n++) {
      row[n] = here;
      here *= Math.sqrt((eta * (n + 1)) / (n + 1 - k));
    }
    start *= lost;
    return row;
  });
}

/** √(C(n+k, k) G^{−n−1} (1 − 1/G)ᵏ) as rows of k: the amplitude for n photons to gain k. */
export function gainAmplitudes(from: number, levels: number, gain: number): readonly Float64Array[] {
  return Array.from({ length: levels }, (_, k) => {
    const row = new Float64Array(from);
    for (let n = 0; n < from && n + k < levels; n++) {
      row[n] = Math.sqrt(binomialProbability(n + k, n, 1 / gain) / gain);
    }
    return row;
  });
}

/** ρ'_{m+k, n+k} += √(C(m+k, k) C(n+k, k)) G^{−(m+n)/2−1} (1 − 1/G)ᵏ ρ_mn. */
export function amplifyDensity(state: NumberDensity, gain: number, levels: number, outside: number): NumberDensity {
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  const from = Math.min(state.levels, levels);
  const kraus = gainAmplitudes(from, levels, gain);
  for (let k = 0; k < levels; k++) {
    const row = kraus[k]!;
    for (let m = 0; m < from && m + k < levels; m++) {
      const left = row[m]!;
      if (left === 0) continue;
      const to = (m + k) * levels + k;
      const source = m * state.levels;
      for (let n = 0; n < from && n + k < levels; n++) {
        const factor = left * row[n]!;
        re[to + n]! += factor * state.re[source + n]!;
        im[to + n]! += factor * state.im[source + n]!;
      }
    }
  }
  return { kind: 'density', levels, re, im, noise: state.noise, outside };
}

/** √((n+k)!/n!) and √(n!/(n−k)!) as logarithms, for photons added and taken. */
export const logAdded = (n: number, k: number): number => logFactorial(n + k) - logFactorial(n);
