/** Lanczos-free ln n!: exact sums with compensation up to the table's end, Stirling's series beyond it. */
const TABLE_SIZE = 20_000;
const logFactorials = buildTable();

function buildTable(): Float64Array {
  const table = new Float64Array(TABLE_SIZE);
  let sum = 0;
  let lost = 0;
  for (let n = 2; n < TABLE_SIZE; n++) {
    const term = Math.log(n) - lost;
    const next = sum + term;
    lost = next - sum - term;
    sum = next;
    table[n] = sum;
  }
  return table;
}

/**
 * Natural logarithm of a factorial.
 *
 * Formula: ln n! = Σ ln k, summed with compensation; Stirling's series above 19,999.
 * @param n whole number ≥ 0
 * @returns ln n!, to the last digit of the result
 * @example logFactorial(0) = 0
 * Source: DLMF 5.11.1 for the series.
 */
export function logFactorial(n: number): number {
  if (n < TABLE_SIZE) return logFactorials[n] ?? 0;
  return (n + 0.5) * Math.log(n) - n + 0.9189385332046727 + 1 / (12 * n) - 1 / (360 * n ** 3);
}

/** ln of the binomial coefficient C(n, k), 0 ≤ k ≤ n. */
export const logBinomial = (n: number, k: number): number => logFactorial(n) - logFactorial(k) - logFactorial(n - k);

/** The binomial coefficient C(n, k) as a product, exact while it is below 2⁵³. */
export function binomial(n: number, k: number): number {
  if (k < 0 || k > n) return 0;
  let value = 1;
  const short = Math.min(k, n - k);
  for (let j = 1; j <= short; j++) value = (value * (n - short + j)) / j;
  return value;
}

/** n!/(n − k)!, the falling factorial; 0 where k > n. */
export function fallingFactorial(n: number, k: number): number {
  if (k > n) return 0;
  let value = 1;
  for (let j = 0; j < k; j++) value *= n - j;
  return value;
}
