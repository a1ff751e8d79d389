import { defined, demandFinite, undefinedBecause, type Figure } from './figure';
import type { Pair } from './pairs';
import { sum } from './sums';

/** How much a disagreement counts: all the same, by its size, or by the square of its size. */
export type KappaWeights = 'plain' | 'linear' | 'quadratic';

/** κ with its asymptotic standard error. */
export interface Kappa {
  readonly kappa: Figure;
  readonly standardError: Figure;
}

type Table = readonly (readonly number[])[];

/**
 * Every mark that can be given, in order. Weighted κ needs the whole scale: a mark that nobody gave still lies between
 * those that were given.
 *
 * @param highest full marks, at least 0
 * @param step the smallest difference between marks, positive
 */
export function markScale(highest: number, step = 1): number[] {
  if (!(highest >= 0 && step > 0)) throw new RangeError('A scale has full marks of at least 0 and a positive step.');
  const steps = Math.round(highest / step);
  if (Math.abs(steps * step - highest) > 1e-9) throw new RangeError('Full marks must be a whole number of steps.');
  return Array.from({ length: steps + 1 }, (_, index) => (index * highest) / Math.max(1, steps));
}

/** How often each pair of marks of a scale was given. @throws RangeError where a mark is not on the scale */
export function crossTable(pairs: readonly Pair[], scale: readonly number[]): number[][] {
  demandFinite(pairs.flat());
  const table = scale.map(() => scale.map(() => 0));
  const place = (mark: number) => {
    const index = scale.findIndex((each) => Math.abs(each - mark) < 1e-9);
    if (index < 0) throw new RangeError(`The mark ${String(mark)} is not on the scale.`);
    return index;
  };
  for (const [first, second] of pairs) {
    const row = table[place(first)];
    const column = place(second);
    if (row) row[column] = (row[column] ?? 0) + 1;
  }
  return table;
}

/** The disagreement of each pair of marks: 0 or 1, |a − b|, or (a − b)². */
export function disagreementWeights(scale: readonly number[], weights: KappaWeights): number[][] {
  const weigh: Readonly<Record<KappaWeights, (distance: number) => number>> = {
    plain: (distance) => (distance === 0 ? 0 : 1),
    linear: Math.abs,
    quadratic: (distance) => distance ** 2,
  };
  return scale.map((one) => scale.map((other) => weigh[weights](one - other)));
}

/**
 * Cohen's κ of two markers on the whole mark scale. Plain: J. Cohen, Educ. Psychol. Meas. 20 (1960) 37–46; weighted:
 * J. Cohen, Psychol. Bull. 70 (1968) 213–220.
 *
 * @throws RangeError where a mark is not on the scale
 */
export function cohenKappa(pairs: readonly Pair[], scale: readonly number[], weights: KappaWeights = 'plain'): Kappa {
  return kappaOfTable(crossTable(pairs, scale), disagreementWeights(scale, weights));
}

/**
 * κ = 1 − N·Σ v_ij n_ij / Σ v_ij n_i· n_·j for counts n and disagreement weights v. Undefined where chance alone could not
 * disagree: both gave one and the same mark throughout. The standard error is that of J. L. Fleiss, J. Cohen,
 * B. S. Everitt, Psychol. Bull. 72 (1969) 323–327 (from memory; checked by published values).
 *
 * @param table counts, a row a mark of the first marker, a column a mark of the second; square
 * @param disagreement weights of the same shape, 0 on the diagonal
 */
export function kappaOfTable(table: Table, disagreement: Table): Kappa {
  const size = table.length;
  if (![table, disagreement].every((each) => each.length === size && each.every((row) => row.length === size)))
    throw new RangeError('Counts and weights are square tables of the same size.');
  const rows = table.map(sum);
  const columns = rows.map((_, column) => sum(table.map((row) => row[column] ?? 0)));
  const n = sum(rows);
  if (n === 0) return both(undefinedBecause('No answer has two marks yet.'));
  const observed = sum(disagreement.flatMap((row, i) => row.map((v, j) => v * (table[i]?.[j] ?? 0))));
  const expected = sum(disagreement.flatMap((row, i) => row.map((v, j) => v * (rows[i] ?? 0) * (columns[j] ?? 0))));
  if (expected === 0)
    return both(
      undefinedBecause('Both markers gave one and the same mark throughout, so chance cannot be told apart.'),
    );
  return {
    kappa: defined(1 - (n * observed) / expected),
    standardError: defined(standardErrorOf(table, disagreement, { rows, columns, n })),
  };
}

function both(figure: Figure): Kappa {
  return { kappa: figure, standardError: figure };
}

function standardErrorOf(
  table: Table,
  disagreement: Table,
  { rows, columns, n }: { readonly rows: number[]; readonly columns: number[]; readonly n: number },
): number {
  const most = Math.max(...disagreement.flat());
  const agreement = disagreement.map((row) => row.map((v) => 1 - v / most));
  const p = (i: number, j: number) => (table[i]?.[j] ?? 0) / n;
  const w = (i: number, j: number) => agreement[i]?.[j] ?? 0;
  const indices = rows.map((_, index) => index);
  const row = indices.map((i) => sum(indices.map((j) => (w(i, j) * (columns[j] ?? 0)) / n)));
  const column = indices.map((j) => sum(indices.map((i) => (w(i, j) * (rows[i] ?? 0)) / n)));
  const observed = sum(indices.flatMap((i) => indices.map((j) => w(i, j) * p(i, j))));
  const expected = sum(indices.map((i) => ((rows[i] ?? 0) / n) * (row[i] ?? 0)));
  const spread = sum(
    indices.flatMap((i) =>
      indices.map(
        (j) => p(i, j) * (w(i, j) * (1 - expected) - ((row[i] ?? 0) + (column[j] ?? 0)) * (1 - observed)) ** 2,
      ),
    ),
  );
  const offset = (observed * expected - 2 * expected + observed) ** 2;
  // A difference of equal numbers may come out below zero by rounding.
  return Math.sqrt(Math.max(0, spread - offset) / n) / (1 - expected) ** 2;
}

/**
 * Fleiss' κ for a fixed number of markers an answer, who need not be the same for each.
 * J. L. Fleiss, Psychol. Bull. 76 (1971) 378–382.
 *
 * @param counts a row an answer, a column a category: how many markers chose it; the same sum ≥ 2 in each row
 */
export function fleissKappa(counts: Table): Figure {
  const markers = sum(counts[0] ?? []);
  if (counts.length === 0) return undefinedBecause('No answer has two marks yet.');
  if (markers < 2 || counts.some((row) => sum(row) !== markers))
    throw new RangeError('Each answer has the same number of marks, at least two.');
  const answers = counts.length;
  const observed =
    sum(counts.map((row) => (sum(row.map((each) => each ** 2)) - markers) / (markers * (markers - 1)))) / answers;
  const totals = (counts[0] ?? []).map((_, column) => sum(counts.map((row) => row[column] ?? 0)));
  if (totals.filter((each) => each > 0).length < 2)
    return undefinedBecause('Every mark is the same, so chance cannot be told apart.');
  const expected = sum(totals.map((each) => (each / (answers * markers)) ** 2));
  return defined((observed - expected) / (1 - expected));
}
