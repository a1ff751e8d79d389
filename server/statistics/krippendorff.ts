import { defined, demandFinite, undefinedBecause, type Figure, type Interval } from './figure';
import { seededRandom } from './seeded-random';
import { sum } from './sums';

/** How far two marks lie apart: only whether they differ, by their ranks, by their difference, or by their ratio. */
export type Metric = 'nominal' | 'ordinal' | 'interval' | 'ratio';

/** The marks of one answer, one place a marker; null where a marker did not mark it. */
export type Unit = readonly (number | null)[];

/**
 * Krippendorff's α = 1 − D_o/D_e over all pairs of marks within answers; answers with fewer than two marks are left out.
 * With coincidences o_ck (each answer with m marks gives 1/(m − 1) to each ordered pair), their sums n_c and n:
 * α = 1 − (n − 1)·Σ o_ck δ²_ck / Σ n_c n_k δ²_ck.
 * K. Krippendorff, Computing Krippendorff's Alpha-Reliability (2011); Content Analysis (2004), chapter 11.
 *
 * @param units one an answer, in any order
 * @throws RangeError where a mark is not finite, or negative with the metric of ratios
 */
export function krippendorffAlpha(units: readonly Unit[], metric: Metric): Figure {
  const pairable = units.map(given).filter((marks) => marks.length > 1);
  if (metric === 'ratio' && pairable.flat().some((each) => each < 0))
    throw new RangeError('Ratios are compared of numbers that are not negative.');
  if (pairable.length === 0) return undefinedBecause('No answer has two marks yet.');
  const values = [...new Set(pairable.flat())].sort((one, other) => one - other);
  if (values.length < 2) return undefinedBecause('Every mark is the same, so chance cannot be told apart.');
  const places = new Map(values.map((value, index) => [value, index]));
  const totals = values.map(() => 0);
  for (const mark of pairable.flat()) {
    const place = places.get(mark) ?? 0;
    totals[place] = (totals[place] ?? 0) + 1;
  }
  const apart = distances(values, totals, metric);
  const distance = (c: number, k: number) => apart[c]?.[k] ?? 0;
  const observed = sum(
    pairable.map((marks) => {
      const indices = marks.map((mark) => places.get(mark) ?? 0);
      return sum(indices.flatMap((c) => indices.map((k) => distance(c, k)))) / (marks.length - 1);
    }),
  );
  const expected = sum(totals.flatMap((one, c) => totals.map((other, k) => one * other * distance(c, k))));
  return defined(1 - ((sum(totals) - 1) * observed) / expected);
}

/** δ² of each pair of values; ordinal: (Σ_{g=c}^{k} n_g − (n_c + n_k)/2)². */
function distances(values: readonly number[], totals: readonly number[], metric: Metric): number[][] {
  const upTo = totals.map((_, index) => sum(totals.slice(0, index + 1)));
  const middle = totals.map((total, index) => (upTo[index] ?? 0) - total / 2);
  return values.map((one, c) =>
    values.map((other, k) => {
      if (one === other) return 0;
      switch (metric) {
        case 'nominal':
          return 1;
        case 'ordinal':
          return ((middle[c] ?? 0) - (middle[k] ?? 0)) ** 2;
        case 'interval':
          return (one - other) ** 2;
        case 'ratio':
          return ((one - other) / (one + other)) ** 2;
      }
    }),
  );
}

/** How many marks stand in a pair. */
export function pairableMarks(units: readonly Unit[]): number {
  return sum(units.map((unit) => given(unit).length).filter((count) => count > 1));
}

/** α with a 95 % interval. */
export interface AlphaWithInterval {
  readonly alpha: Figure;
  readonly interval: Interval;
  /** Draws in which α was undefined, because every drawn mark was the same; they are left out, and said. */
  readonly undefinedDraws: number;
}

/** Fewest answers with two marks for which an interval is given; common practice, no source. */
const fewest = 5;

/**
 * α with a percentile interval, by drawing whole answers with replacement (B. Efron's bootstrap, 1979): answers, not
 * marks, are the sample. The same seed gives the same interval.
 *
 * @param options.seed a whole number
 * @param options.draws how many, 1000 unless told
 */
export function krippendorffWithInterval(
  units: readonly Unit[],
  metric: Metric,
  options: { readonly seed: number; readonly draws?: number },
): AlphaWithInterval {
  const alpha = krippendorffAlpha(units, metric);
  const pairable = units.filter((unit) => given(unit).length > 1);
  if (!('value' in alpha)) return { alpha, interval: alpha, undefinedDraws: 0 };
  if (pairable.length < fewest) {
    const why = undefinedBecause(`An interval needs at least ${String(fewest)} answers with two marks.`);
    return { alpha, interval: why, undefinedDraws: 0 };
  }
  const random = seededRandom(options.seed);
  const draws = options.draws ?? 1000;
  const drawn = Array.from({ length: draws }, () => {
    const sample = pairable.map(() => pairable[Math.floor(random() * pairable.length)] ?? []);
    return krippendorffAlpha(sample, metric);
  });
  const values = drawn.flatMap((each) => ('value' in each ? [each.value] : [])).sort((one, other) => one - other);
  const undefinedDraws = draws - values.length;
  if (values.length < draws / 2)
    return {
      alpha,
      interval: undefinedBecause('Nearly all marks are the same, so an interval cannot be drawn.'),
      undefinedDraws,
    };
  return { alpha, interval: { low: percentile(values, 0.025), high: percentile(values, 0.975) }, undefinedDraws };
}

/** The p-th fraction of sorted values, linear between neighbours. Domain: not empty. */
function percentile(sorted: readonly number[], p: number): number {
  const at = p * (sorted.length - 1);
  const low = sorted[Math.floor(at)] ?? 0;
  return low + (at - Math.floor(at)) * ((sorted[Math.ceil(at)] ?? low) - low);
}

function given(unit: Unit): number[] {
  const marks = unit.filter((mark) => mark !== null);
  demandFinite(marks);
  return marks;
}
