import { OpticsError } from '../optics-error';

function finite(functionName: string, value: number): number {
  if (Number.isFinite(value)) return value;
  throw new OpticsError('the value is larger than a number can hold (about 1.8e308)', { functionName });
}

/**
 * Generalised Laguerre polynomial L_n^(a)(x).
 *
 * Formula: (k + 1) L_{k+1} = (2k + 1 + a − x) L_k − (k + a) L_{k−1}, L_0 = 1, L_1 = 1 + a − x.
 * @param n degree, whole number from 0 to 16,383
 * @param a upper index, real
 * @param x argument, real
 * @returns L_n^(a)(x); the recurrence is stable for x ≥ 0, a > −1
 * @throws OpticsError where the value overflows
 * @example laguerre(2, 0, 3) = −1/2
 * Source: DLMF 18.9.1 with table 18.9.1; Abramowitz and Stegun 22.7.12.
 */
export function laguerre(n: number, a: number, x: number): number {
  let previous = 1;
  if (n === 0) return 1;
  let value = 1 + a - x;
  for (let k = 1; k < n; k++) {
    const next = ((2 * k + 1 + a - x) * value - (k + a) * previous) / (k + 1);
    previous = value;
    value = next;
  }
  return finite('laguerre', value);
}

/**
 * Hermite polynomial H_n(x) of the physicists.
 *
 * Formula: H_{k+1} = 2x H_k − 2k H_{k−1}, H_0 = 1, H_1 = 2x; weight e^{−x²}.
 * @param n degree, whole number from 0 to 16,383
 * @param x argument, real
 * @returns H_n(x)
 * @throws OpticsError where the value overflows
 * @example hermite(3, 1) = −4
 * Source: DLMF 18.9.13; Abramowitz and Stegun 22.7.13.
 */
export function hermite(n: number, x: number): number {
  let previous = 1;
  if (n === 0) return 1;
  let value = 2 * x;
  for (let k = 1; k < n; k++) {
    const next = 2 * x * value - 2 * k * previous;
    previous = value;
    value = next;
  }
  return finite('hermite', value);
}
