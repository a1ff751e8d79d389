import { solveBothWays } from './displaced-numbers';

/**
 * What a beam splitter makes of |n, N−n⟩, real part: entry k is ⟨k, N−k| U |n, N−n⟩ for
 * a₁† → √T b₁† − √R b₂†, a₂† → √R b₁† + √T b₂†.
 *
 * Formula: the column is the eigenvector of T b₁†b₁ + R b₂†b₂ − √(TR)(b₁†b₂ + b₂†b₁) with eigenvalue n, found from both
 * ends of its three-term recurrence in k; its first entry has the sign (−1)ⁿ.
 * @param total N
 * @param n 0 … N
 * @param transmittance T in [0, 1]
 * @returns N + 1 entries, absolute error about 1e-15, also in the tails relative to themselves
 * @example splitterColumn(2, 1, 0.5) = [−1, 0, 1]/√2: two photons leave together
 */
export function splitterColumn(total: number, n: number, transmittance: number): Float64Array {
  const sign = n % 2 === 0 ? 1 : -1;
  if (transmittance === 1 || transmittance === 0 || total === 0) {
    const column = new Float64Array(total + 1);
    if (transmittance === 1 || total === 0) column[n] = 1;
    else column[total - n] = sign;
    return column;
  }
  const reflectance = 1 - transmittance;
  const both = Math.sqrt(transmittance * reflectance);
  const beside = new Float64Array(total + 1);
  for (let k = 0; k < total; k++) beside[k] = both * Math.sqrt((k + 1) * (total - k));
  // Where the column falls for good: its mean and the reach of its oscillations.
  const mean = transmittance * n + reflectance * (total - n);
  const turn = Math.round(mean + 2 * both * Math.sqrt(n * (total - n)));
  const own = (k: number): number => transmittance * k + reflectance * (total - k) - n;
  const column = solveBothWays(
    total + 1,
    turn,
    (k, here, before) => (own(k) * here - (k === 0 ? 0 : beside[k - 1]!) * before) / beside[k]!,
    (k, here, after) => (own(k) * here - beside[k]! * after) / beside[k - 1]!,
  );
  if (sign < 0) for (let k = 0; k <= total; k++) column[k] = -column[k]!;
  return column;
}
