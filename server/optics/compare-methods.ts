import type { Complex } from './complex';
import type { FigureValue } from './figures';
import { isValue, type ComparedValue, type MethodOutcome, type MethodRefusal, type MethodValue } from './methods';
import { OpticsError } from './optics-error';

/** Two methods must agree to this, relatively … */
const RELATIVE_AGREEMENT = 1e-9;
/** … or to this, absolutely. */
const ABSOLUTE_AGREEMENT = 1e-12;

/** All numbers of a value in order, real and imaginary parts one after the other. */
function entriesOf(value: FigureValue): readonly Complex[] {
  if (typeof value === 'number') return [{ re: value, im: 0 }];
  if ('re' in value) return [value];
  return value.flatMap((entry) => {
    if (typeof entry === 'number') return [{ re: entry, im: 0 }];
    return entry.map((cell) => (typeof cell === 'number' ? { re: cell, im: 0 } : cell));
  });
}

const largest = (value: FigureValue): number =>
  entriesOf(value).reduce((most, entry) => Math.max(most, Math.abs(entry.re), Math.abs(entry.im)), 0);

const isFiniteValue = (value: FigureValue): boolean =>
  entriesOf(value).every((entry) => Number.isFinite(entry.re) && Number.isFinite(entry.im));

/**
 * How well two values agree.
 *
 * Lists and matrices are compared entry by entry; the worst entry counts.
 * @returns digits of agreement from 0 to 16, and whether they agree to 1e-9 relative or 1e-12 absolute.
 */
export function agreement(
  first: FigureValue,
  second: FigureValue,
): { readonly digits: number; readonly agree: boolean } {
  const left = entriesOf(first);
  const right = entriesOf(second);
  if (left.length !== right.length) return { digits: 0, agree: false };
  let digits = 16;
  let agree = true;
  left.forEach((a, index) => {
    const b = right[index] ?? { re: NaN, im: NaN };
    const difference = Math.hypot(a.re - b.re, a.im - b.im);
    if (difference === 0) return;
    const size = Math.max(Math.hypot(a.re, a.im), Math.hypot(b.re, b.im));
    if (!(difference <= Math.max(RELATIVE_AGREEMENT * size, ABSOLUTE_AGREEMENT))) agree = false;
    // Below the absolute bound rounding noise around 0 says nothing about digits of the value.
    const relative = difference / (difference <= ABSOLUTE_AGREEMENT ? Math.max(size, 1) : size);
    digits = Math.min(digits, Math.max(0, Math.floor(-Math.log10(relative))));
  });
  return { digits, agree };
}

/** A method's relative error, where the value is not 0; otherwise its absolute one. */
const errorRank = (outcome: MethodValue): number => outcome.error / Math.max(largest(outcome.value), 1e-300);

/** A method that is four times surer goes first; otherwise the order of the methods decides. */
const BETTER = 4;
/** Below this estimate a method's rounding does not matter. */
const GOOD_ENOUGH = 1e-14;

/**
 * Chooses the surest of the methods that found a value and holds it against the next.
 *
 * @param functionName the figure's name, for errors
 * @throws OpticsError where no method applies, and where two disagree beyond 1e-9 relative and 1e-12 absolute
 */
export function compareMethods(functionName: string, outcomes: readonly MethodOutcome[]): ComparedValue {
  const refusals: MethodRefusal[] = [];
  const values: MethodValue[] = [];
  for (const outcome of outcomes) {
    if (!isValue(outcome)) refusals.push(outcome);
    else if (isFiniteValue(outcome.value)) values.push(outcome);
    else refusals.push({ method: outcome.method, notApplicable: 'the value is beyond the range of numbers' });
  }
  const [head, ...others] = values;
  if (head === undefined) {
    const reasons = refusals.map((refusal) => `${refusal.method}: ${refusal.notApplicable}`).join('; ');
    throw new OpticsError(`cannot be computed here to ten digits (${reasons})`, { functionName });
  }
  const rank = (outcome: MethodValue) => Math.max(errorRank(outcome), GOOD_ENOUGH);
  const best = others.reduce((chosen, other) => (rank(other) * BETTER < rank(chosen) ? other : chosen), head);
  const rest = values.filter((outcome) => outcome !== best).sort((a, b) => rank(a) - rank(b));
  const second = rest[0];
  const shown: ComparedValue = {
    value: best.value,
    method: best.method,
    error: best.error,
    ...(best.dimension === undefined ? {} : { dimension: best.dimension }),
    ...(best.outsideWeight === undefined ? {} : { outsideWeight: best.outsideWeight }),
    refusals,
  };
  if (second === undefined) return shown;
  for (const other of rest) {
    const { agree } = agreement(best.value, other.value);
    if (agree) continue;
    throw new OpticsError(
      `${best.method} and ${other.method} disagree: ${JSON.stringify(best.value)} and ${JSON.stringify(other.value)}`,
      { functionName },
    );
  }
  return {
    ...shown,
    second: {
      method: second.method,
      value: second.value,
      ...(second.dimension === undefined ? {} : { dimension: second.dimension }),
      ...(second.outsideWeight === undefined ? {} : { outsideWeight: second.outsideWeight }),
    },
    agreesTo: agreement(best.value, second.value).digits,
  };
}
