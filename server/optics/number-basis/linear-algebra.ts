/** A complex matrix, row by row. */
export interface ComplexMatrix {
  readonly rows: number;
  readonly columns: number;
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/**
 * A factor L of a positive semidefinite matrix ρ = L L†, as columns, by Cholesky's method with pivots.
 *
 * @param tolerance trace that may be left over
 * @returns the columns of L and the trace that is left
 */
export function factorOf(
  size: number,
  re: Float64Array,
  im: Float64Array,
  tolerance: number,
): { readonly columns: readonly { readonly re: Float64Array; readonly im: Float64Array }[]; readonly rest: number } {
  const restRe = re.slice();
  const restIm = im.slice();
  const columns: { re: Float64Array; im: Float64Array }[] = [];
  const used = new Uint8Array(size);
  for (;;) {
    let pivot = -1;
    let most = 0;
    let trace = 0;
    for (let k = 0; k < size; k++) {
      if (used[k]) continue;
      const value = Math.max(0, restRe[k * size + k]!);
      trace += value;
      if (value > most) {
        most = value;
        pivot = k;
      }
    }
    if (pivot < 0 || trace <= tolerance) return { columns, rest: trace };
    used[pivot] = 1;
    const root = Math.sqrt(most);
    const colRe = new Float64Array(size);
    const colIm = new Float64Array(size);
    for (let k = 0; k < size; k++) {
      if (used[k] && k !== pivot) continue;
      colRe[k] = k === pivot ? root : restRe[k * size + pivot]! / root;
      colIm[k] = k === pivot ? 0 : restIm[k * size + pivot]! / root;
    }
    for (let m = 0; m < size; m++) {
      const a = colRe[m]!;
      const b = colIm[m]!;
      if (a === 0 && b === 0) continue;
      for (let n = 0; n < size; n++) {
        restRe[m * size + n]! -= a * colRe[n]! + b * colIm[n]!;
        restIm[m * size + n]! -= b * colRe[n]! - a * colIm[n]!;
      }
    }
    columns.push({ re: colRe, im: colIm });
  }
}

/**
 * Singular values by one-sided Jacobi rotations: each to a relative accuracy of its own, also the small ones.
 *
 * @param columns the columns of the matrix; changed in place
 */
export function singularValues(columns: readonly { readonly re: Float64Array; readonly im: Float64Array }[]): number[] {
  const count = columns.length;
  const length = columns[0]?.re.length ?? 0;
  for (let sweep = 0; sweep < 60; sweep++) {
    let turned = false;
    for (let p = 0; p < count - 1; p++) {
      const a = columns[p]!;
      for (let q = p + 1; q < count; q++) {
        const b = columns[q]!;
        let alpha = 0;
        let beta = 0;
        let gRe = 0;
        let gIm = 0;
        for (let k = 0; k < length; k++) {
          const ar = a.re[k]!;
          const ai = a.im[k]!;
          const br = b.re[k]!;
          const bi = b.im[k]!;
          alpha += ar * ar + ai * ai;
          beta += br * br + bi * bi;
          gRe += ar * br + ai * bi;
          gIm += ar * bi - ai * br;
        }
        const size = Math.hypot(gRe, gIm);
        if (size === 0 || size <= 1e-16 * Math.sqrt(alpha * beta)) continue;
        turned = true;
        const zeta = (beta - alpha) / (2 * size);
        const t = Math.sign(zeta || 1) / (Math.abs(zeta) + Math.hypot(1, zeta));
        const c = 1 / Math.hypot(1, t);
        const s = c * t;
        // Turn b's phase so that the product is real, then rotate.
        const fRe = gRe / size;
        const fIm = gIm / size;
        for (let k = 0; k < length; k++) {
          const ar = a.re[k]!;
          const ai = a.im[k]!;
          const br = b.re[k]! * fRe + b.im[k]! * fIm;
          const bi = b.im[k]! * fRe - b.re[k]! * fIm;
          a.re[k] = c * ar - s * br;
          a.im[k] = c * ai - s * bi;
          b.re[k] = s * ar + c * br;
          b.im[k] = s * ai + c * bi;
        }
      }
    }
    if (!turned) break;
  }
  return columns.map(({ re, im }) => {
    let sum = 0;
    for (let k = 0; k < length; k++) sum += re[k]! * re[k]! + im[k]! * im[k]!;
    return Math.sqrt(sum);
  });
}

/**
 * Eigenvalues of a Hermitian matrix by Jacobi rotations.
 *
 * @param re real part, row by row; changed in place
 * @param im imaginary part; changed in place
 */
export function hermitianEigenvalues(size: number, re: Float64Array, im: Float64Array): Float64Array {
  let total = 0;
  for (let k = 0; k < re.length; k++) total += re[k]! * re[k]! + im[k]! * im[k]!;
  const small = 1e-34 * total;
  for (let sweep = 0; sweep < 60; sweep++) {
    let off = 0;
    for (let p = 0; p < size - 1; p++) {
      for (let q = p + 1; q < size; q++) {
        const hRe = re[p * size + q]!;
        const hIm = im[p * size + q]!;
        const weight = hRe * hRe + hIm * hIm;
        if (weight <= small / (size * size)) continue;
        off += weight;
        rotate(size, re, im, p, q, hRe, hIm);
      }
    }
    if (off <= small) break;
  }
  return Float64Array.from({ length: size }, (_, k) => re[k * size + k]!);
}

function rotate(
  size: number,
  re: Float64Array,
  im: Float64Array,
  p: number,
  q: number,
  hRe: number,
  hIm: number,
): void {
  const h = Math.hypot(hRe, hIm);
  const fRe = hRe / h;
  const fIm = hIm / h;
  const zeta = (re[q * size + q]! - re[p * size + p]!) / (2 * h);
  const t = Math.sign(zeta || 1) / (Math.abs(zeta) + Math.hypot(1, zeta));
  const c = 1 / Math.hypot(1, t);
  const s = c * t;
  // Columns: p' = c p − s f* q, q' = s f p + c q, with f = h_pq/|h_pq|.
  for (let k = 0; k < size; k++) {
    const pr = re[k * size + p]!;
    const pi = im[k * size + p]!;
    const qr = re[k * size + q]!;
    const qi = im[k * size + q]!;
    re[k * size + p] = c * pr - s * (fRe * qr + fIm * qi);
    im[k * size + p] = c * pi - s * (fRe * qi - fIm * qr);
    re[k * size + q] = s * (fRe * pr - fIm * pi) + c * qr;
    im[k * size + q] = s * (fRe * pi + fIm * pr) + c * qi;
  }
  for (let k = 0; k < size; k++) {
    const pr = re[p * size + k]!;
    const pi = im[p * size + k]!;
    const qr = re[q * size + k]!;
    const qi = im[q * size + k]!;
    re[p * size + k] = c * pr - s * (fRe * qr - fIm * qi);
    im[p * size + k] = c * pi - s * (fRe * qi + fIm * qr);
    re[q * size + k] = s * (fRe * pr + fIm * pi) + c * qr;
    im[q * size + k] = s * (fRe * pi - fIm * pr) + c * qi;
  }
  re[p * size + q] = 0;
  im[p * size + q] = 0;
  re[q * size + p] = 0;
  im[q * size + p] = 0;
}
