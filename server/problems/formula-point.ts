import { printComplex, printNumber } from '@shared/reading/print';

/**
 * A formula's value at the first point where it is defined, in words: `0.3679 at κ = 0.83, t = 1.2`.
 *
 * @returns undefined where it is defined nowhere
 */
export function printFormulaPoint(
  points: readonly Readonly<Record<string, number>>[],
  values: readonly ({ readonly re: number; readonly im: number } | null)[],
): string | undefined {
  const index = values.findIndex((value) => value !== null);
  const [value, point] = [values[index], points[index]];
  if (!value || !point) return undefined;
  const at = Object.entries(point).map(([name, number]) => `${name} = ${printNumber(number, 4)}`);
  const printed = printComplex(value, 4);
  return at.length === 0 ? printed : `${printed} at ${at.join(', ')}`;
}
