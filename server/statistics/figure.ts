/** A figure of statistics: its value, or the reason why it has none. An undefined figure is never 0, 1 or NaN. */
export type Figure = { readonly value: number } | { readonly undefinedBecause: string };

/** A figure with an interval of confidence. */
export type Interval = { readonly low: number; readonly high: number } | { readonly undefinedBecause: string };

/** A figure that has a value. @throws RangeError where the value is not finite: that is a fault of the caller */
export function defined(value: number): Figure {
  if (!Number.isFinite(value)) throw new RangeError('A figure that is defined has a finite value.');
  return { value };
}

/** A figure without a value. `reason`: a sentence that a person understands. */
export function undefinedBecause(reason: string): { readonly undefinedBecause: string } {
  return { undefinedBecause: reason };
}

/** @throws RangeError where a number is not finite */
export function demandFinite(numbers: readonly number[]): void {
  if (!numbers.every(Number.isFinite)) throw new RangeError('Marks are finite numbers.');
}
