/** A complex number. Real arithmetic stays exact: an imaginary part of 0 takes the real functions of the platform. */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

/** A real number as a complex one. */
export const real = (re: number): Complex => ({ re, im: 0 });

export const zero = real(0);
export const one = real(1);
export const imaginaryUnit: Complex = { re: 0, im: 1 };

/** a + b. */
export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });

/** a − b. */
export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });

/** −a. */
export const negate = (a: Complex): Complex => ({ re: -a.re, im: a.im === 0 ? 0 : -a.im });

/** a*. */
export const conjugate = (a: Complex): Complex => ({ re: a.re, im: a.im === 0 ? 0 : -a.im });

/** |a|. */
export const modulus = (a: Complex): number => (a.im === 0 ? Math.abs(a.re) : Math.hypot(a.re, a.im));

/** arg a in (−π, π]. */
export const argument = (a: Complex): number => Math.atan2(a.im, a.re);

/** Whether both parts are finite numbers. */
export const isFiniteComplex = (a: Complex): boolean => Number.isFinite(a.re) && Number.isFinite(a.im);

/** a·b. */
export function multiply(a: Complex, b: Complex): Complex {
  if (a.im === 0) return { re: a.re * b.re, im: b.im === 0 ? 0 : a.re * b.im };
  if (b.im === 0) return { re: a.re * b.re, im: a.im * b.re };
  return { re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re };
}

/** a/b by Smith's method, which does not overflow where the quotient does not. */
export function divide(a: Complex, b: Complex): Complex {
  if (b.im === 0) return { re: a.re / b.re, im: a.im === 0 ? 0 : a.im / b.re };
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re;
    const scale = b.re + b.im * ratio;
    return { re: (a.re + a.im * ratio) / scale, im: (a.im - a.re * ratio) / scale };
  }
  const ratio = b.re / b.im;
  const scale = b.re * ratio + b.im;
  return { re: (a.re * ratio + a.im) / scale, im: (a.im * ratio - a.re) / scale };
}

/** e^a. */
export function exp(a: Complex): Complex {
  if (a.im === 0) return real(Math.exp(a.re));
  const size = Math.exp(a.re);
  if (size === 0) return zero;
  return { re: size * Math.cos(a.im), im: size * Math.sin(a.im) };
}

/** Principal natural logarithm. */
export function ln(a: Complex): Complex {
  if (a.im === 0 && a.re >= 0) return real(Math.log(a.re));
  return { re: Math.log(modulus(a)), im: argument(a) };
}

/** Principal square root. */
export function sqrt(a: Complex): Complex {
  if (a.im === 0) return a.re >= 0 ? real(Math.sqrt(a.re)) : { re: 0, im: Math.sqrt(-a.re) };
  const size = modulus(a);
  const re = Math.sqrt((size + Math.abs(a.re)) / 2);
  const im = Math.abs(a.im) / (2 * re);
  const sign = a.im < 0 ? -1 : 1;
  return a.re >= 0 ? { re, im: sign * im } : { re: im, im: sign * re };
}

/** a^n for a whole n, by repeated squaring: exact where real powers would leave a stray imaginary part. */
function wholePower(a: Complex, n: number): Complex {
  let result = one;
  let base = a;
  for (let rest = Math.abs(n); rest > 0; rest = Math.floor(rest / 2)) {
    if (rest % 2 === 1) result = multiply(result, base);
    base = multiply(base, base);
  }
  return n < 0 ? divide(one, result) : result;
}

/** Principal a^b; 0^0 = 1. */
export function power(a: Complex, b: Complex): Complex {
  if (b.im === 0) {
    if (a.im === 0 && (a.re >= 0 || Number.isInteger(b.re))) return real(Math.pow(a.re, b.re));
    if (Number.isInteger(b.re) && Math.abs(b.re) <= 1024) return wholePower(a, b.re);
    if (b.re === 0.5) return sqrt(a);
  }
  if (a.re === 0 && a.im === 0) return b.re > 0 ? zero : real(NaN);
  return exp(multiply(b, ln(a)));
}
