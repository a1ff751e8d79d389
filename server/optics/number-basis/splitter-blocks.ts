/**
 * A beam splitter on the states of N photons, real part: entry [k, n] = ⟨k, N−k| U |n, N−n⟩ for
 * a₁† → √T b₁† − √R b₂†, a₂† → √R b₁† + √T b₂†.
 *
 * Formula: D^N from D^{N−1} by
 * N D[k, n] = √(kn) √T D[k−1, n−1] + √(k(N−n)) √R D[k−1, n] − √((N−k)n) √R D[k, n−1] + √((N−k)(N−n)) √T D[k, n].
 * The average over both ways of taking a photon away keeps the recursion stable to any N.
 * Source: T. Risbo 1996, recursion for Wigner's d functions.
 */
export class SplitterBlocks {
  private readonly t: number;
  private readonly r: number;
  private block = Float64Array.of(1);
  private n = 0;

  constructor(transmittance: number) {
    this.t = Math.sqrt(transmittance);
    this.r = Math.sqrt(1 - transmittance);
  }

  /** The block of N photons, row by row, N + 1 to a side; N must not decrease from call to call. */
  of(total: number): Float64Array {
    while (this.n < total) this.advance();
    return this.block;
  }

  private advance(): void {
    const total = this.n + 1;
    const side = total + 1;
    const old = this.block;
    const next = new Float64Array(side * side);
    const { t, r } = this;
    const roots = new Float64Array(side);
    for (let k = 0; k < side; k++) roots[k] = Math.sqrt(k);
    for (let k = 0; k < total; k++) {
      const up = roots[k + 1]!;
      const down = roots[total - k]!;
      for (let n = 0; n < total; n++) {
        const value = old[k * total + n]! / total;
        if (value === 0) continue;
        const right = roots[n + 1]!;
        const left = roots[total - n]!;
        next[(k + 1) * side + n + 1]! += up * right * t * value;
        next[(k + 1) * side + n]! += up * left * r * value;
        next[k * side + n + 1]! -= down * right * r * value;
        next[k * side + n]! += down * left * t * value;
      }
    }
    this.block = next;
    this.n = total;
  }
}
