/** The 97.5 % point of the standard normal distribution. From memory, checked against `quantileOfT` at 1e12 degrees. */
export const normal975 = 1.959963984540054;

/** Lanczos' coefficients for g = 7, n = 9; from memory, checked by Γ(n) = (n − 1)! and Γ(½) = √π in the spec. */
const lanczos = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;

/** ln Γ(x) for x > 0, by Lanczos' approximation. */
export function logGamma(x: number): number {
  if (!(x > 0)) throw new RangeError('The logarithm of Γ is computed for positive numbers.');
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x);
  const z = x - 1;
  const series = lanczos.reduce((total, each, index) => (index === 0 ? each : total + each / (z + index)), 0);
  const t = z + 7.5;
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(series);
}

/**
 * The regularised incomplete beta function I_x(a, b), by its continued fraction (Abramowitz & Stegun 26.5.8, from memory)
 * with the symmetry I_x(a, b) = 1 − I_{1−x}(b, a).
 *
 * @param x in [0, 1]; a, b positive
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (!(x >= 0 && x <= 1 && a > 0 && b > 0)) throw new RangeError('I_x(a, b) needs 0 ≤ x ≤ 1 and positive a, b.');
  if (x === 0 || x === 1) return x;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x)) / a;
  return front * betaFraction(x, a, b);
}

/** The continued fraction of the incomplete beta function, evaluated from the front (Lentz). */
function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  const away = (value: number) => (Math.abs(value) < tiny ? tiny : value);
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let result = d;
  for (let m = 1; m <= 10_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    result *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    result *= d * c;
    if (Math.abs(d * c - 1) < 1e-15) break;
  }
  return result;
}

/** x with I_x(a, b) = p, by halving; p in (0, 1). */
function betaQuantile(p: number, a: number, b: number): number {
  let [low, high] = [0, 1];
  for (let step = 0; step < 200 && low < high; step++) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (incompleteBeta(middle, a, b) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** The p-quantile of Fisher's F with d1 and d2 degrees of freedom (they need not be whole). Domain: 0 < p < 1, d1, d2 > 0. */
export function quantileOfF(p: number, d1: number, d2: number): number {
  // Solved for the smaller of x and 1 − x, so that neither loses its digits next to 1.
  const x = betaQuantile(p, d1 / 2, d2 / 2);
  if (x < 0.5) return (d2 * x) / (d1 * (1 - x));
  const y = betaQuantile(1 - p, d2 / 2, d1 / 2);
  return (d2 * (1 - y)) / (d1 * y);
}

/** The p-quantile of Student's t, by t² = F(1, d). Domain: ½ < p < 1, degrees > 0. */
export function quantileOfT(p: number, degrees: number): number {
  return Math.sqrt(quantileOfF(2 * p - 1, 1, degrees));
}
