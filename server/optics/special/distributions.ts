import { logFactorial } from './factorials';

/** ln n! − [½ ln(2πn) + n ln n − n]: what Stirling's formula leaves. */
function stirlingRest(n: number): number {
  if (n <= 15) return logFactorial(n) - (n === 0 ? 0 : 0.5 * Math.log(2 * Math.PI * n) + n * Math.log(n) - n);
  const square = n * n;
  return (1 / 12 - (1 / 360 - (1 / 1260 - (1 / 1680 - 1 / 1188 / square) / square) / square) / square) / n;
}

/** x ln(x/m) + m − x without the cancellation at x ≈ m. */
function deviance(x: number, m: number): number {
  const ratio = (x - m) / (x + m);
  if (Math.abs(ratio) < 0.1) {
    let sum = (x - m) * ratio;
    let term = 2 * x * ratio;
    const square = ratio * ratio;
    for (let j = 1; j < 1000; j++) {
      term *= square;
      const next = sum + term / (2 * j + 1);
      if (next === sum) return next;
      sum = next;
    }
  }
  return x * Math.log(x / m) + m - x;
}

/**
 * Poisson probability.
 *
 * Formula: e^{−λ} λⁿ/n!.
 * @param n whole number ≥ 0
 * @param mean λ ≥ 0
 * @returns the probability; relative error about 1e-15 also far from the mean, until it underflows
 * @example poisson(0, 2) = e^{−2}
 * Source: saddle-point form, C. Loader, "Fast and accurate computation of binomial probabilities" (2000).
 */
export function poisson(n: number, mean: number): number {
  if (mean === 0) return n === 0 ? 1 : 0;
  if (n === 0) return Math.exp(-mean);
  if (n <= 15 && mean < 50) {
    let value = Math.exp(-mean);
    for (let j = 1; j <= n; j++) value *= mean / j;
    return value;
  }
  return Math.exp(-stirlingRest(n) - deviance(n, mean)) / Math.sqrt(2 * Math.PI * n);
}

/**
 * Binomial probability of k successes in n trials.
 *
 * Formula: C(n, k) pᵏ (1 − p)ⁿ⁻ᵏ.
 * @param n whole number ≥ 0
 * @param k whole number, 0 … n
 * @param p probability in [0, 1]
 * @returns the probability; relative error about 1e-15
 * @example binomialProbability(5, 3, 0.6) = 0.3456
 * Source: C. Loader (2000), as above.
 */
export function binomialProbability(n: number, k: number, p: number): number {
  if (k < 0 || k > n) return 0;
  if (p === 0) return k === 0 ? 1 : 0;
  if (p === 1) return k === n ? 1 : 0;
  if (k === 0) return Math.exp(n * Math.log1p(-p));
  if (k === n) return Math.exp(n * Math.log(p));
  if (n <= 30) {
    let value = 1;
    for (let j = 1; j <= k; j++) value = ((value * (n - k + j)) / j) * p;
    return value * (1 - p) ** (n - k);
  }
  const logValue =
    stirlingRest(n) - stirlingRest(k) - stirlingRest(n - k) - deviance(k, n * p) - deviance(n - k, n * (1 - p));
  return Math.exp(logValue) * Math.sqrt(n / (2 * Math.PI * k * (n - k)));
}

/**
 * Thermal (geometric) probability.
 *
 * Formula: n̄ⁿ/(1 + n̄)ⁿ⁺¹.
 * @param n whole number ≥ 0
 * @param nbar mean ≥ 0
 * @example geometric(0, 1) = 1/2
 */
export function geometric(n: number, nbar: number): number {
  if (nbar === 0) return n === 0 ? 1 : 0;
  return Math.exp(n * logThermalRatio(nbar) - Math.log1p(nbar));
}

/** ln[n̄/(1 + n̄)], without cancellation for large n̄. */
export const logThermalRatio = (nbar: number): number =>
  nbar > 1 ? -Math.log1p(1 / nbar) : Math.log(nbar) - Math.log1p(nbar);
