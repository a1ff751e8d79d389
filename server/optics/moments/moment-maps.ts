import { abs2, add, complex, conjugate, multiply, times, type Complex } from '../complex';
import { binomial, fallingFactorial, logFactorial } from '../special/factorials';
import type { Moment, MomentSource } from './moment-figures';
import { power, Sum, type Raw } from './moment-sums';

/** b₁ = √T a₁ + e^{iφ}√R a₂, b₂ = −e^{−iφ}√R a₁ + √T a₂. */
export function splitMoments(inner: MomentSource, transmittance: number, direction: Complex): Raw {
  const t = Math.sqrt(transmittance);
  const rho = times(direction, Math.sqrt(1 - transmittance));
  const back = times(conjugate(rho), -1);
  const forward = times(rho, -1);
  const conjugateRho = conjugate(rho);
  return (p, q, r, s) => {
    const sum = new Sum();
    for (let i = 0; i <= p; i++) {
      for (let j = 0; j <= q; j++) {
        for (let k = 0; k <= r; k++) {
          for (let l = 0; l <= s; l++) {
            // i of the b₁† and k of the b₂† come from a₁†; j of the b₁ and l of the b₂ from a₁.
            const ways = binomial(p, i) * binomial(q, j) * binomial(r, k) * binomial(s, l);
            const size = ways * t ** (i + j + (r - k) + (s - l));
            const turn = multiply(
              multiply(power(conjugateRho, p - i), power(rho, q - j)),
              multiply(power(forward, k), power(back, l)),
            );
            if (size === 0 || (turn.re === 0 && turn.im === 0)) continue;
            sum.add(times(turn, size), inner(i + k, j + l, p - i + r - k, q - j + s - l));
          }
        }
      }
    }
    return sum.moment;
  };
}

/**
 * a → a cosh r − e^{iφ} a† sinh r, brought back to normal order.
 *
 * Formula: χ'(ξ, η) = exp(−½cs*ξ² − ½cs η² − |s|²ξη) χ(cξ + sη, s*ξ + cη), with c = cosh r, s = e^{iφ} sinh r, and
 * χ(ξ, η) = Σ ⟨a†ᵖa^q⟩ ξᵖ(−η)^q/(p! q!).
 */
export function squeezedMoments(inner: MomentSource, mode: 1 | 2, r: number, direction: Complex): Raw {
  const c = Math.cosh(r);
  const s = times(direction, Math.sinh(r));
  const conjugateS = conjugate(s);
  const gaussian = gaussianSeries(times(conjugateS, -c / 2), times(s, -c / 2), complex(-abs2(s)));
  return (p1, q1, p2, q2) => {
    const [p, q] = mode === 1 ? [p1, q1] : [p2, q2];
    const factor = Math.exp(logFactorial(p) + logFactorial(q)) * (q % 2 === 0 ? 1 : -1);
    const sum = new Sum();
    for (let i = 0; i <= p; i++) {
      for (let j = 0; j <= q; j++) {
        const weight = gaussian(i, j);
        if (weight.re === 0 && weight.im === 0) continue;
        const up = p - i;
        const down = q - j;
        for (let m = 0; m <= up + down; m++) {
          // (cξ + sη)ᵐ (s*ξ + cη)ⁿ: coefficient of ξ^up η^down.
          const n = up + down - m;
          let coefficient = complex(0);
          for (let k = Math.max(0, up - n); k <= Math.min(m, up); k++) {
            const l = up - k;
            const size = binomial(m, k) * binomial(n, l) * c ** (k + n - l);
            coefficient = add(coefficient, times(multiply(power(s, m - k), power(conjugateS, l)), size));
          }
          const scale = (n % 2 === 0 ? 1 : -1) * Math.exp(-logFactorial(m) - logFactorial(n));
          const moment = mode === 1 ? inner(m, n, p2, q2) : inner(p1, q1, m, n);
          sum.add(times(multiply(weight, coefficient), scale * factor), moment);
        }
      }
    }
    return sum.moment;
  };
}

/** Coefficient of ξⁱηʲ in exp(Aξ² + Bη² + Cξη). */
function gaussianSeries(a: Complex, b: Complex, c: Complex): (i: number, j: number) => Complex {
  return (i, j) => {
    let total = complex(0);
    for (let k = i % 2; k <= Math.min(i, j); k += 2) {
      if ((j - k) % 2 !== 0) continue;
      const u = (i - k) / 2;
      const v = (j - k) / 2;
      const scale = Math.exp(-logFactorial(k) - logFactorial(u) - logFactorial(v));
      total = add(total, times(multiply(power(c, k), multiply(power(a, u), power(b, v))), scale));
    }
    return total;
  };
}

/** ⟨aᵏ a†ᵖ a^q a†ᵏ⟩ in normal order. */
export function addedMoments(inner: MomentSource, k: number): (p: number, q: number) => Moment {
  return (p, q) => {
    const sum = new Sum();
    for (let i = 0; i <= Math.min(k, p); i++) {
      for (let j = 0; j <= Math.min(k, q); j++) {
        for (let l = 0; l <= Math.min(k - i, k - j); l++) {
          const ways =
            binomial(k, i) *
            fallingFactorial(p, i) *
            binomial(k, j) *
            fallingFactorial(q, j) *
            binomial(k - i, l) *
            fallingFactorial(k - j, l);
          sum.add(complex(ways), inner(p - i + k - j - l, q - j + k - i - l));
        }
      }
    }
    return sum.moment;
  };
}
