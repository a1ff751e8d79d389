import type { Tolerance } from '@shared/answer-forms';
import { modulus, subtract, type Complex } from '@shared/reading/complex';

/** Half a unit of the s-th significant figure of k; 0 for k = 0, which has no figures. */
export function halfUnit(k: number, significantFigures: number): number {
  if (k === 0) return 0;
  const exponent = Number(k.toExponential().split('e')[1]);
  return 0.5 * 10 ** (exponent - significantFigures + 1);
}

/** How far from a key of size k an answer may lie: the widest of the tolerances given. */
export function allowance(k: number, tolerance: Tolerance): number {
  return Math.max(
    tolerance.absolute ?? 0,
    (tolerance.relative ?? 0) * Math.abs(k),
    tolerance.significantFigures === undefined ? 0 : halfUnit(k, tolerance.significantFigures),
  );
}

/** Rounding of the arithmetic of both sides, so that 0.4 lies within 0.1 of 0.3. */
const rounding = (a: number, b: number): number => 8 * Number.EPSILON * Math.max(a, b);

/** Whether x lies within the tolerance of k. */
export function within(x: Complex, k: Complex, tolerance: Tolerance): boolean {
  const size = modulus(k);
  return modulus(subtract(x, k)) <= allowance(size, tolerance) + rounding(modulus(x), size);
}
