import { quantileOfT } from './distributions';
import { defined, demandFinite, undefinedBecause, type Figure, type Interval } from './figure';
import { sum } from './sums';

/** An answer that two markers marked without seeing each other's mark. */
export interface DoublyMarked {
  readonly marks: readonly [MarkBy, MarkBy];
  /** How likely the answer was to be drawn for a second mark, in (0, 1]. */
  readonly probability: number;
}

/** A mark and who gave it. */
export interface MarkBy {
  readonly marker: string;
  readonly mark: number;
}

/** How one marker's marks differ from colleagues' of the same answers, in marks. */
export interface Severity {
  readonly marker: string;
  /** Answers that this marker and a colleague marked. */
  readonly answers: number;
  /** Own − colleague's mark. Negative: the severer of the two. */
  readonly difference: Figure;
  readonly standardError: Figure;
  /** 95 %, by Student's t. */
  readonly interval: Interval;
}

const oneAnswer = undefinedBecause('One doubly marked answer says nothing of its spread; at least two are needed.');

/**
 * Each marker's mean difference from colleagues on the same answers, each answer weighted by 1/π, the inverse of its
 * probability of being drawn: borderline answers that are always marked twice must not count for more than they are of
 * the pile. d̄ = Σ d/π ÷ Σ 1/π (Hájek's estimator), standard error √(n/(n − 1)·Σ ((d − d̄)/π)²) ÷ Σ 1/π, by linearisation
 * as if drawn with replacement (C.-E. Särndal, B. Swensson, J. Wretman, Model Assisted Survey Sampling, 1992, ch. 5; from
 * memory). Differences are against those who happened to mark the same answers, not against a true mark.
 *
 * @returns one row a marker who occurs, by name
 * @throws RangeError where a mark is not finite, a probability not in (0, 1], or both marks are by the same marker
 */
export function severities(answers: readonly DoublyMarked[]): Severity[] {
  for (const { marks, probability } of answers) {
    demandFinite(marks.map(({ mark }) => mark));
    if (!(probability > 0 && probability <= 1)) throw new RangeError('A probability of being drawn lies in (0, 1].');
    if (marks[0].marker === marks[1].marker) throw new RangeError('The two marks are by different markers.');
  }
  const markers = [...new Set(answers.flatMap(({ marks }) => marks.map(({ marker }) => marker)))].sort();
  return markers.map((marker) => {
    const own = answers.flatMap(({ marks: [first, second], probability }) => {
      if (first.marker === marker) return [{ difference: first.mark - second.mark, weight: 1 / probability }];
      if (second.marker === marker) return [{ difference: second.mark - first.mark, weight: 1 / probability }];
      return [];
    });
    const weight = sum(own.map((each) => each.weight));
    const middle = sum(own.map((each) => each.weight * each.difference)) / weight;
    const n = own.length;
    const answersAndDifference = { marker, answers: n, difference: defined(middle) };
    if (n < 2) return { ...answersAndDifference, standardError: oneAnswer, interval: oneAnswer };
    const spread = sum(own.map((each) => (each.weight * (each.difference - middle)) ** 2));
    const error = Math.sqrt((n / (n - 1)) * spread) / weight;
    const half = quantileOfT(0.975, n - 1) * error;
    return {
      ...answersAndDifference,
      standardError: defined(error),
      interval: { low: middle - half, high: middle + half },
    };
  });
}
