/** A complex number as a plain object, so that trees of states can be sent between threads. */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

export const ZERO: Complex = { re: 0, im: 0 };
export const ONE: Complex = { re: 1, im: 0 };

/** re + i·im. */
export const complex = (re: number, im = 0): Complex => ({ re, im });

/** a + b. */
export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });

/** a − b. */
export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });

/** a·b. */
export const multiply = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

/** a·x for a real x. */
export const times = (a: Complex, x: number): Complex => ({ re: a.re * x, im: a.im * x });

/** a/b, scaled so that neither overflows nor underflows early. */
export function divide(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re;
    const size = b.re + b.im * ratio;
    return { re: (a.re + a.im * ratio) / size, im: (a.im - a.re * ratio) / size };
  }
  const ratio = b.re / b.im;
  const size = b.re * ratio + b.im;
  return { re: (a.re * ratio + a.im) / size, im: (a.im * ratio - a.re) / size };
}

/** The complex conjugate. */
export const conjugate = (a: Complex): Complex => ({ re: a.re, im: -a.im });

/** |a|². */
export const abs2 = (a: Complex): number => a.re * a.re + a.im * a.im;

/** |a|. */
export const abs = (a: Complex): number => Math.hypot(a.re, a.im);

/** e^a. */
export function exponential(a: Complex): Complex {
  const size = Math.exp(a.re);
  return size === 0 ? ZERO : { re: size * Math.cos(a.im), im: size * Math.sin(a.im) };
}

/** The principal logarithm. */
export const logarithm = (a: Complex): Complex => ({
  re: Math.log(Math.hypot(a.re, a.im)),
  im: Math.atan2(a.im, a.re),
});

/** The principal square root. */
export function squareRoot(a: Complex): Complex {
  if (a.im === 0) return a.re >= 0 ? { re: Math.sqrt(a.re), im: 0 } : { re: 0, im: Math.sqrt(-a.re) };
  const size = Math.hypot(a.re, a.im);
  const re = Math.sqrt((size + Math.abs(a.re)) / 2);
  const im = a.im / (2 * re);
  if (a.re >= 0) return { re, im };
  return { re: Math.abs(im), im: a.im >= 0 ? re : -re };
}

/**
 * e^{iφ}. A φ within rounding of a multiple of π/2 gives exactly 1, i, −1 or −i: `pi/2` typed as a
 * floating-point number means the quarter turn, and squeezing would blow its rounding up.
 */
export function phase(phi: number): Complex {
  const quarters = phi / (Math.PI / 2);
  const nearest = Math.round(quarters);
  if (Math.abs(quarters - nearest) <= 4e-16 * Math.max(1, Math.abs(quarters))) {
    const turn = ((nearest % 4) + 4) % 4;
    return turn === 0 ? ONE : turn === 1 ? { re: 0, im: 1 } : turn === 2 ? { re: -1, im: 0 } : { re: 0, im: -1 };
  }
  return { re: Math.cos(phi), im: Math.sin(phi) };
}
