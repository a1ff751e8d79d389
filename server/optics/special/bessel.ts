import { OpticsError } from '../optics-error';

/** Rescaling step of downward recurrences. */
const BIG = 1e250;
/** Longest downward recurrence: arguments beyond it would take too long. */
const LONGEST = 4_000_000;

function checkArgument(functionName: string, x: number): void {
  if (Math.abs(x) <= LONGEST / 4) return;
  throw new OpticsError(`argument must lie between -${LONGEST / 4} and ${LONGEST / 4}, got ${x}`, {
    functionName,
    argument: 'argument',
    argumentIndex: 1,
    given: x,
  });
}

/** (x/2)ⁿ/n! Σ (±x²/4)ᵏ/(k! (n+1)…(n+k)), for x² ≪ 4(n + 1). */
function series(n: number, x: number, sign: 1 | -1): number {
  let lead = 1;
  for (let j = 1; j <= n; j++) lead *= x / 2 / j;
  if (lead === 0) return 0;
  let term = 1;
  let sum = 1;
  for (let k = 1; k < 500; k++) {
    term *= (sign * x * x) / 4 / (k * (n + k));
    sum += term;
    if (Math.abs(term) < 1e-17 * Math.abs(sum)) break;
  }
  return lead * sum;
}

/** Where a downward recurrence (Miller) must start so that nothing of the false solution is left at n. */
const startOf = (n: number, x: number): number => {
  const top = Math.max(n, Math.ceil(x));
  return top + 30 + Math.ceil(12 * Math.cbrt(top) + Math.sqrt(40 * top));
};

/**
 * Bessel function J_n(x) of integer order.
 *
 * Formula: J_{k−1} = (2k/x) J_k − J_{k+1} downwards from far above max(n, x), normalised by J_0 + 2 Σ J_{2k} = 1;
 * the power series where x² < n + 1.
 * @param n order, whole number; J_{−n} = (−1)ⁿ J_n
 * @param x argument, real, |x| ≤ 1e6
 * @returns J_n(x); absolute error about 1e-15, relative error 1e-13 away from the zeros
 * @throws OpticsError for arguments beyond 1e6
 * @example besselJ(0, 0) = 1
 * Source: DLMF 10.6.1, 10.12.4; Miller's algorithm, DLMF 3.6(iii).
 */
export function besselJ(n: number, x: number): number {
  checkArgument('besselJ', x);
  const order = Math.abs(n);
  const odd = order % 2 === 1;
  const sign = (n < 0 && odd ? -1 : 1) * (x < 0 && odd ? -1 : 1);
  const size = Math.abs(x);
  if (size === 0) return order === 0 ? 1 : 0;
  if (size * size < order + 1) return sign * series(order, size, -1);
  let above = 0;
  let here = 1e-250;
  let wanted = 0;
  let norm = 0;
  let start = startOf(order, size);
  start += start % 2;
  for (let k = start; k >= 1; k--) {
    const below = (2 * k * here) / size - above;
    above = here;
    here = below;
    if (Math.abs(here) > BIG) {
      here /= BIG;
      above /= BIG;
      wanted /= BIG;
      norm /= BIG;
    }
    if (k - 1 === order) wanted = here;
    if ((k - 1) % 2 === 0) norm += k - 1 === 0 ? here : 2 * here;
  }
  return (sign * wanted) / norm;
}

/**
 * Modified Bessel function I_n(x) of integer order.
 *
 * Formula: I_{k−1} = (2k/x) I_k + I_{k+1} downwards, normalised by I_0 + 2 Σ I_k = eˣ; the power series
 * where x² < n + 1.
 * @param n order, whole number; I_{−n} = I_n
 * @param x argument, real
 * @returns I_n(x); relative error about 1e-14
 * @throws OpticsError where the value overflows
 * @example besselI(0, 0) = 1
 * Source: DLMF 10.29.1, 10.35.5; Miller's algorithm, DLMF 3.6(iii).
 */
export function besselI(n: number, x: number): number {
  checkArgument('besselI', x);
  const order = Math.abs(n);
  const sign = x < 0 && order % 2 === 1 ? -1 : 1;
  const size = Math.abs(x);
  if (size === 0) return order === 0 ? 1 : 0;
  if (size * size < order + 1) return sign * series(order, size, 1);
  let above = 0;
  let here = 1e-250;
  let wanted = 0;
  let norm = 0;
  for (let k = startOf(order, size); k >= 1; k--) {
    const below = (2 * k * here) / size + above;
    above = here;
    here = below;
    if (here > BIG) {
      here /= BIG;
      above /= BIG;
      wanted /= BIG;
      norm /= BIG;
    }
    if (k - 1 === order) wanted = here;
    norm += k - 1 === 0 ? here : 2 * here;
  }
  const value = Math.exp(size + Math.log(wanted / norm));
  if (Number.isFinite(value)) return sign * (size < 700 ? (wanted / norm) * Math.exp(size) : value);
  throw new OpticsError('the value is larger than a number can hold (about 1.8e308)', { functionName: 'besselI' });
}
