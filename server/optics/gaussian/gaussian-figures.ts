import type { GaussianState } from './gaussian-state';

/** A value and an estimate of its absolute rounding error. */
export interface Estimate {
  readonly value: number;
  readonly error: number;
}

const EPS = 2 ** -52;

/** Largest entry of a covariance matrix, the scale of its rounding. */
const scaleOf = (state: GaussianState): number => state.covariance.reduce((most, v) => Math.max(most, Math.abs(v)), 0);

/**
 * Mean and variance of x_θ = x cos θ + p sin θ (mode 1).
 *
 * @param direction e^{iθ}
 */
export function quadratureOf(
  state: GaussianState,
  direction: { readonly re: number; readonly im: number },
): { readonly mean: Estimate; readonly variance: Estimate } {
  const { re: c, im: s } = direction;
  const [xx, xp, , pp] = [state.covariance[0]!, state.covariance[1]!, 0, state.covariance[2 * state.modes + 1]!];
  const mx = c * state.mean[0]!;
  const mp = s * state.mean[1]!;
  const parts = [c * c * xx, 2 * c * s * xp, s * s * pp];
  return {
    mean: { value: mx + mp, error: EPS * (Math.abs(mx) + Math.abs(mp)) * 2 },
    variance: {
      value: parts[0]! + parts[1]! + parts[2]!,
      error: EPS * parts.reduce((sum, part) => sum + Math.abs(part), 0) * 2,
    },
  };
}

/** Density of a normal distribution. */
export function normalDensity(x: number, mean: Estimate, variance: Estimate): Estimate {
  const deviation = x - mean.value;
  const exponent = (deviation * deviation) / (2 * variance.value);
  const value = Math.exp(-exponent) / Math.sqrt(2 * Math.PI * variance.value);
  const shift = (Math.abs(deviation) * (mean.error + EPS * Math.abs(x))) / variance.value;
  return {
    value,
    error: value * (EPS * (2 + exponent) + shift + ((0.5 + exponent) * variance.error) / variance.value),
  };
}

/**
 * Wigner function of one mode.
 *
 * Formula: exp[−½ δᵀV⁻¹δ]/(2π√det V).
 */
export function gaussianWigner(state: GaussianState, x: number, p: number): Estimate {
  const [a, b, , d] = [state.covariance[0]!, state.covariance[1]!, 0, state.covariance[3]!];
  const det = a * d - b * b;
  const detError = EPS * 3 * (Math.abs(a * d) + b * b);
  const dx = x - state.mean[0]!;
  const dp = p - state.mean[1]!;
  const terms = [d * dx * dx, -2 * b * dx * dp, a * dp * dp];
  const form = (terms[0]! + terms[1]! + terms[2]!) / (2 * det);
  const spread = terms.reduce((sum, term) => sum + Math.abs(term), 0) / (2 * det);
  const value = Math.exp(-form) / (2 * Math.PI * Math.sqrt(det));
  const shift =
    (EPS *
      (Math.abs(d * dx) * (Math.abs(x) + Math.abs(state.mean[0]!)) +
        Math.abs(b * dx) * (Math.abs(p) + Math.abs(state.mean[1]!)) +
        Math.abs(b * dp) * (Math.abs(x) + Math.abs(state.mean[0]!)) +
        Math.abs(a * dp) * (Math.abs(p) + Math.abs(state.mean[1]!)))) /
    det;
  return { value, error: value * (4 * EPS * (1 + spread) + shift + ((0.5 + Math.abs(form)) * detError) / det) };
}

/** Determinant by elimination with the error that its rounding may have. */
export function determinant(matrix: Float64Array, side: number): Estimate {
  const m = matrix.slice();
  const scale = matrix.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
  let det = 1;
  let inverseScale = 0;
  for (let k = 0; k < side; k++) {
    let pivotRow = k;
    for (let i = k + 1; i < side; i++) {
      if (Math.abs(m[i * side + k]!) > Math.abs(m[pivotRow * side + k]!)) pivotRow = i;
    }
    const pivot = m[pivotRow * side + k]!;
    if (pivot === 0) return { value: 0, error: EPS * scale ** side };
    if (pivotRow !== k) {
      det = -det;
      for (let j = 0; j < side; j++) {
        const swap = m[k * side + j]!;
        m[k * side + j] = m[pivotRow * side + j]!;
        m[pivotRow * side + j] = swap;
      }
    }
    det *= pivot;
    inverseScale = Math.max(inverseScale, 1 / Math.abs(pivot));
    for (let i = k + 1; i < side; i++) {
      const factor = m[i * side + k]! / pivot;
      for (let j = k; j < side; j++) m[i * side + j]! -= factor * m[k * side + j]!;
    }
  }
  return { value: det, error: Math.abs(det) * EPS * 4 * scale * inverseScale };
}

/**
 * Purity of a Gaussian state.
 *
 * Formula: 1/(2ᴹ √det V).
 */
export function gaussianPurity(state: GaussianState): Estimate {
  const det = determinant(state.covariance, 2 * state.modes);
  const value = 1 / (2 ** state.modes * Math.sqrt(det.value));
  return { value, error: (value * det.error) / (2 * det.value) };
}

/**
 * Von Neumann entropy of one mode, in nats.
 *
 * Formula: (N + 1) ln(N + 1) − N ln N with N = √det V − ½.
 */
export function gaussianEntropy(state: GaussianState): Estimate {
  const det = determinant(state.covariance, 2);
  const root = Math.sqrt(det.value);
  const rootError = det.error / (2 * root);
  const excess = Math.max(0, root - 0.5);
  if (excess <= rootError) return { value: 0, error: 40 * (rootError + EPS) };
  const value = Math.log1p(excess) + excess * Math.log1p(1 / excess);
  return { value, error: rootError * Math.log1p(1 / excess) + EPS * value * 2 };
}

/** Solves V y = δ for a small positive definite V and returns δᵀV⁻¹δ and det V. */
function quadraticForm(
  matrix: Float64Array,
  side: number,
  delta: readonly number[],
): { readonly form: number; readonly det: number; readonly condition: number } {
  const l = new Float64Array(side * side);
  const y = new Float64Array(side);
  let det = 1;
  let form = 0;
  let smallest = Infinity;
  let scale = 0;
  for (let i = 0; i < side; i++) {
    scale = Math.max(scale, matrix[i * side + i]!);
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * side + j]!;
      for (let k = 0; k < j; k++) sum -= l[i * side + k]! * l[j * side + k]!;
      l[i * side + j] = i === j ? Math.sqrt(sum) : sum / l[j * side + j]!;
    }
    const pivot = l[i * side + i]!;
    smallest = Math.min(smallest, pivot * pivot);
    det *= pivot * pivot;
    let rest = delta[i]!;
    for (let k = 0; k < i; k++) rest -= l[i * side + k]! * y[k]!;
    y[i] = rest / pivot;
    form += y[i]! * y[i]!;
  }
  return { form, det, condition: scale / smallest };
}

/**
 * Overlap Tr ρσ of two Gaussian states.
 *
 * Formula: exp[−½ δᵀ(V₁ + V₂)⁻¹δ]/√det(V₁ + V₂).
 */
export function gaussianOverlap(left: GaussianState, right: GaussianState): Estimate {
  const sum = left.covariance.map((value, index) => value + right.covariance[index]!);
  const delta = [...left.mean].map((value, index) => value - right.mean[index]!);
  const { form, det, condition } = quadraticForm(sum, 2 * left.modes, delta);
  const value = Math.exp(-form / 2) / Math.sqrt(det);
  return { value, error: value * EPS * (4 * condition + 2 * form * (1 + condition)) };
}

/**
 * Fidelity (Tr √(√ρ σ √ρ))² of two Gaussian states of one mode.
 *
 * Formula: exp[−½ δᵀ(V₁ + V₂)⁻¹δ]/(√(Δ + Λ) − √Λ), Δ = det(V₁ + V₂), Λ = 4(det V₁ − ¼)(det V₂ − ¼).
 * Source: H. Scutaru 1998, in units of vacuum variance 1/2.
 */
export function gaussianFidelity(left: GaussianState, right: GaussianState): Estimate | undefined {
  if (left.modes !== 1) return undefined;
  const sum = left.covariance.map((value, index) => value + right.covariance[index]!);
  const delta = [...left.mean].map((value, index) => value - right.mean[index]!);
  const { form, det, condition } = quadraticForm(sum, 2, delta);
  const first = determinant(left.covariance, 2);
  const second = determinant(right.covariance, 2);
  const one = Math.max(0, first.value - 0.25);
  const two = Math.max(0, second.value - 0.25);
  const lambda = 4 * one * two;
  const lambdaError = 4 * (one * second.error + two * first.error + first.error * second.error);
  // (√(Δ + Λ) + √Λ)/Δ is 1/(√(Δ + Λ) − √Λ) without cancellation.
  const value = (Math.exp(-form / 2) * (Math.sqrt(det + lambda) + Math.sqrt(lambda))) / det;
  const rootError = Math.min(Math.sqrt(lambdaError), lambdaError / (2 * Math.sqrt(Math.max(lambda, 1e-300))));
  return {
    value: Math.min(value, 1),
    error: value * EPS * (4 * condition + 2 * form * (1 + condition)) + (Math.exp(-form / 2) * 2 * rootError) / det,
  };
}

/**
 * Logarithmic negativity of a Gaussian state of two modes, in base 2.
 *
 * Formula: max(0, −log₂ 2ν), ν the smaller symplectic eigenvalue of the partially transposed covariance matrix V';
 * with V' = LLᵀ the matrix K = LᵀΩL is antisymmetric and 2ν = ||e₊| − |e₋||, e_± = its self-dual parts. For pure
 * states asinh(2√−det C)/ln 2, C the block of correlations.
 */
export function gaussianLogNegativity(state: GaussianState, pure: boolean): Estimate {
  const v = state.covariance;
  if (pure) {
    const c = v[2]! * v[7]! - v[3]! * v[6]!;
    const size = Math.abs(v[2]! * v[7]!) + Math.abs(v[3]! * v[6]!);
    // Entries that rounding left of a block that is 0.
    const noise = 4 * EPS * scaleOf(state);
    const root = Math.sqrt(Math.max(0, -c));
    const value = Math.asinh(2 * root) / Math.LN2;
    const error =
      (2 * Math.min(noise + (EPS * size) / Math.max(root, 1e-300), noise + Math.sqrt(EPS * size))) / Math.LN2;
    return { value, error: error / Math.sqrt(1 + 4 * root * root) + EPS * value };
  }
  const flipped = v.map((value, index) => {
    const i = index >> 2;
    const j = index & 3;
    return (i === 3) === (j === 3) ? value : -value;
  });
  const l = new Float64Array(16);
  for (let i = 0; i < 4; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = flipped[i * 4 + j]!;
      for (let k = 0; k < j; k++) sum -= l[i * 4 + k]! * l[j * 4 + k]!;
      l[i * 4 + j] = i === j ? Math.sqrt(sum) : sum / l[j * 4 + j]!;
    }
  }
  const entry = (a: number, b: number) => {
    let sum = 0;
    for (let m = 0; m < 2; m++) {
      sum += l[2 * m * 4 + a]! * l[(2 * m + 1) * 4 + b]! - l[(2 * m + 1) * 4 + a]! * l[2 * m * 4 + b]!;
    }
    return sum;
  };
  const plus = Math.hypot(entry(0, 1) + entry(2, 3), entry(0, 2) - entry(1, 3), entry(0, 3) + entry(1, 2));
  const minus = Math.hypot(entry(0, 1) - entry(2, 3), entry(0, 2) + entry(1, 3), entry(0, 3) - entry(1, 2));
  const twice = Math.abs(plus - minus);
  const error = 8 * EPS * (plus + minus + scaleOf(state));
  const value = Math.max(0, -Math.log2(twice));
  return { value: value <= error ? 0 : value, error: error / Math.max(twice, error) / Math.LN2 };
}
