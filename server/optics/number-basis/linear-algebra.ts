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
 * Eigenvalues of a Hermitian matrix: Householder's reflections to three diagonals, then QL steps with shifts.
 *
 * Source: Golub and Van Loan, Matrix Computations, sections 8.3.1 and 8.3.3, in words of our own.
 * @param re real part, row by row; used up
 * @param im imaginary part; used up
 * @returns the eigenvalues, each to about 1e-16 of the largest
 */
export function hermitianEigenvalues(size: number, re: Float64Array, im: Float64Array): Float64Array {
  const off = im.every((value) => value === 0) ? reflectReal(size, re) : reflectComplex(size, re, im);
  const diagonal = Float64Array.from({ length: size }, (_, k) => re[k * size + k]!);
  return tridiagonalEigenvalues(diagonal, off);
}

/** Brings a real symmetric matrix to three diagonals; the main one stays in place, the one beside it is returned. */
function reflectReal(size: number, a: Float64Array): Float64Array {
  const off = new Float64Array(size + 1);
  const v = new Float64Array(size);
  const w = new Float64Array(size);
  for (let k = 0; k < size - 2; k++) {
    // Reflect row k right of the diagonal onto its first entry.
    let norm = 0;
    for (let i = k + 1; i < size; i++) norm += a[k * size + i]! ** 2;
    const first = a[k * size + k + 1]!;
    off[k] = first;
    if (norm - first * first <= 1e-300) continue;
    const alpha = first > 0 ? -Math.sqrt(norm) : Math.sqrt(norm);
    const scale = 1 / (norm - first * alpha);
    for (let i = k + 1; i < size; i++) v[i] = a[k * size + i]!;
    v[k + 1]! -= alpha;
    let inner = 0;
    for (let i = k + 1; i < size; i++) {
      let sum = 0;
      for (let j = k + 1; j < size; j++) sum += a[i * size + j]! * v[j]!;
      w[i] = sum * scale;
      inner += w[i]! * v[i]!;
    }
    const half = (inner * scale) / 2;
    for (let i = k + 1; i < size; i++) w[i]! -= half * v[i]!;
    for (let i = k + 1; i < size; i++) {
      const [vi, wi] = [v[i]!, w[i]!];
      for (let j = k + 1; j < size; j++) a[i * size + j]! -= vi * w[j]! + wi * v[j]!;
    }
    off[k] = alpha;
  }
  if (size > 1) off[size - 2] = a[(size - 2) * size + size - 1]!;
  return off;
}

/** The same for a complex Hermitian matrix; phases beside the main diagonal do not change eigenvalues and are dropped. */
function reflectComplex(size: number, re: Float64Array, im: Float64Array): Float64Array {
  const off = new Float64Array(size + 1);
  const vr = new Float64Array(size);
  const vi = new Float64Array(size);
  const wr = new Float64Array(size);
  const wi = new Float64Array(size);
  for (let k = 0; k < size - 2; k++) {
    // Column k below the diagonal is the conjugate of row k.
    let norm = 0;
    for (let i = k + 1; i < size; i++) norm += re[k * size + i]! ** 2 + im[k * size + i]! ** 2;
    const firstRe = re[k * size + k + 1]!;
    const firstIm = -im[k * size + k + 1]!;
    const first = Math.hypot(firstRe, firstIm);
    off[k] = first;
    if (norm - first * first <= 1e-300) continue;
    const root = Math.sqrt(norm);
    const [phaseRe, phaseIm] = first === 0 ? [1, 0] : [firstRe / first, firstIm / first];
    const scale = 1 / (norm + first * root);
    for (let i = k + 1; i < size; i++) {
      vr[i] = re[k * size + i]!;
      vi[i] = -im[k * size + i]!;
    }
    vr[k + 1]! += phaseRe * root;
    vi[k + 1]! += phaseIm * root;
    let inner = 0;
    for (let i = k + 1; i < size; i++) {
      let a = 0;
      let b = 0;
      for (let j = k + 1, at = i * size + k + 1; j < size; j++, at++) {
        a += re[at]! * vr[j]! - im[at]! * vi[j]!;
        b += re[at]! * vi[j]! + im[at]! * vr[j]!;
      }
      wr[i] = a * scale;
      wi[i] = b * scale;
      inner += wr[i]! * vr[i]! + wi[i]! * vi[i]!;
    }
    const half = (inner * scale) / 2;
    for (let i = k + 1; i < size; i++) {
      wr[i]! -= half * vr[i]!;
      wi[i]! -= half * vi[i]!;
    }
    for (let i = k + 1; i < size; i++) {
      const [a, b, c, d] = [vr[i]!, vi[i]!, wr[i]!, wi[i]!];
      for (let j = k + 1, at = i * size + k + 1; j < size; j++, at++) {
        // A − v w† − w v†.
        re[at]! -= a * wr[j]! + b * wi[j]! + c * vr[j]! + d * vi[j]!;
        im[at]! -= b * wr[j]! - a * wi[j]! + d * vr[j]! - c * vi[j]!;
      }
    }
    off[k] = root;
  }
  if (size > 1) {
    const at = (size - 2) * size + size - 1;
    off[size - 2] = Math.hypot(re[at]!, im[at]!);
  }
  return off;
}

/** Eigenvalues of a real symmetric matrix of three diagonals; `off` holds one entry more than it uses. */
function tridiagonalEigenvalues(diagonal: Float64Array, off: Float64Array): Float64Array {
  const size = diagonal.length;
  for (let low = 0; low < size; low++) {
    for (let round = 0; round < 200; round++) {
      let m = low;
      for (; m < size - 1; m++) {
        const scale = Math.abs(diagonal[m]!) + Math.abs(diagonal[m + 1]!);
        if (Math.abs(off[m]!) <= 2 ** -53 * scale || Math.abs(off[m]!) < 1e-300) break;
      }
      if (m === low) break;
      let g = (diagonal[low + 1]! - diagonal[low]!) / (2 * off[low]!);
      const r0 = Math.hypot(g, 1);
      g = diagonal[m]! - diagonal[low]! + off[low]! / (g + (g >= 0 ? r0 : -r0));
      let s = 1;
      let c = 1;
      let p = 0;
      let early = false;
      for (let i = m - 1; i >= low; i--) {
        const f = s * off[i]!;
        const b = c * off[i]!;
        const r = Math.hypot(f, g);
        off[i + 1] = r;
        if (r === 0) {
          diagonal[i + 1]! -= p;
          off[m] = 0;
          early = true;
          break;
        }
        s = f / r;
        c = g / r;
        g = diagonal[i + 1]! - p;
        const t = (diagonal[i]! - g) * s + 2 * c * b;
        p = s * t;
        diagonal[i + 1] = g + p;
        g = c * t - b;
      }
      if (early) continue;
      diagonal[low]! -= p;
      off[low] = g;
      off[m] = 0;
    }
  }
  return diagonal;
}
