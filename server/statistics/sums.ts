/** The sum of some numbers; 0 of none. */
export function sum(numbers: readonly number[]): number {
  return numbers.reduce((total, each) => total + each, 0);
}

/** The arithmetic mean. Domain: at least one number. */
export function mean(numbers: readonly number[]): number {
  return sum(numbers) / numbers.length;
}

/** The sum of products of deviations from the means. Domain: lists of the same length, not empty. */
export function deviationProducts(one: readonly number[], other: readonly number[]): number {
  const [middle, otherMiddle] = [mean(one), mean(other)];
  return sum(one.map((each, index) => (each - middle) * ((other[index] ?? otherMiddle) - otherMiddle)));
}

/** The variance with divisor n − 1. Domain: at least two numbers. */
export function variance(numbers: readonly number[]): number {
  return deviationProducts(numbers, numbers) / (numbers.length - 1);
}

/** Whether all numbers are the same: asked of the numbers, since a variance of equal decimals may come out as 1e-33. */
export function areEqual(numbers: readonly number[]): boolean {
  return numbers.every((each) => each === numbers[0]);
}
