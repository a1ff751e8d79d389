import { quantileOfF } from './distributions';
import { defined, demandFinite, undefinedBecause, type Figure, type Interval } from './figure';
import { areEqual, mean, sum } from './sums';

/** A coefficient of one marker's mark, of the mean of all, and the interval of the first. */
export interface Intraclass {
  readonly single: Figure;
  readonly average: Figure;
  /** 95 %. */
  readonly interval: Interval;
}

/** Mean squares of a crossed table. */
export interface MeanSquares {
  readonly answers: number;
  readonly markers: number;
  /** Between answers, MSR. */
  readonly rows: number;
  /** Between markers, MSC. */
  readonly columns: number;
  /** What is left, MSE. */
  readonly residual: number;
  /** Within answers, MSW. */
  readonly within: number;
}

const noTable = undefinedBecause('At least two answers must be marked by the same two or more markers.');
const noSpread = undefinedBecause('Every mark is the same, so answers cannot be told apart.');
const noFraction = undefinedBecause('The marks leave nothing to divide by.');
const noResidual = undefinedBecause(
  'The markers differ by a constant or not at all, so there is no residual to go by.',
);

const tooContrary = undefinedBecause(
  'The markers are too contrary, or their answers too few, for an interval to mean anything.',
);

type Crossed = readonly (readonly number[])[];

/** The mean squares of marks that each marker gave to each answer. @throws RangeError where a row has another length */
export function meanSquares(marks: Crossed): MeanSquares {
  const answers = marks.length;
  const markers = marks[0]?.length ?? 0;
  demandFinite(marks.flat());
  if (marks.some((row) => row.length !== markers)) throw new RangeError('Each marker marks each answer.');
  if (answers < 2 || markers < 2) throw new RangeError('Mean squares need two answers and two markers.');
  const middle = mean(marks.flat());
  const rowMeans = marks.map(mean);
  const columnMeans = (marks[0] ?? []).map((_, column) => mean(marks.map((row) => row[column] ?? 0)));
  const square = (value: number) => value ** 2;
  const ofRows = markers * sum(rowMeans.map((each) => square(each - middle)));
  const ofColumns = answers * sum(columnMeans.map((each) => square(each - middle)));
  const within = sum(marks.flatMap((row, i) => row.map((each) => square(each - (rowMeans[i] ?? 0)))));
  const residual = sum(
    marks.flatMap((row, i) => row.map((each, j) => square(each - (rowMeans[i] ?? 0) - (columnMeans[j] ?? 0) + middle))),
  );
  return {
    answers,
    markers,
    rows: ofRows / (answers - 1),
    columns: ofColumns / (markers - 1),
    residual: residual / ((answers - 1) * (markers - 1)),
    within: within / (answers * (markers - 1)),
  };
}

/**
 * ICC(2,1): markers are a sample of those who might mark; a severe marker counts as disagreement (absolute agreement).
 * (MSR − MSE) / (MSR + (k − 1)·MSE + k·(MSC − MSE)/n). P. E. Shrout, J. L. Fleiss, Psychol. Bull. 86 (1979) 420–428; the
 * interval by Satterthwaite's degrees of freedom as there; with less than one degree, which negative coefficients of few
 * answers can lead to, it would not even hold the coefficient, and is undefined.
 *
 * @param marks a row an answer, a column a marker; every marker marked every answer
 */
export function intraclassAbsolute(marks: Crossed): Intraclass {
  const why = whyUndefined(marks);
  if (why) return { single: why, average: why, interval: why };
  const { answers: n, markers: k, rows, columns, residual } = meanSquares(marks);
  const single = quotient(rows - residual, rows + (k - 1) * residual + (k * (columns - residual)) / n);
  const average = quotient(rows - residual, rows + (columns - residual) / n);
  if (!('value' in single) || hasNoResidual(residual, rows + columns)) return { single, average, interval: noResidual };
  const r = single.value;
  const f = columns / residual;
  const a = n * (1 + (k - 1) * r) - k * r;
  const degrees = ((k - 1) * (n - 1) * (k * r * f + a) ** 2) / ((n - 1) * k ** 2 * r ** 2 * f ** 2 + a ** 2);
  if (!(degrees >= 1)) return { single, average, interval: tooContrary };
  const low = quantileOfF(0.975, n - 1, degrees);
  const high = quantileOfF(0.975, degrees, n - 1);
  const rest = k * columns + (k * n - k - n) * residual;
  return {
    single,
    average,
    interval: {
      low: (n * (rows - low * residual)) / (low * rest + n * rows),
      high: (n * (high * rows - residual)) / (rest + n * high * rows),
    },
  };
}

/**
 * ICC(3,1): these markers only; a constant difference between them does not count (consistency).
 * (MSR − MSE) / (MSR + (k − 1)·MSE). Shrout & Fleiss 1979, as above.
 */
export function intraclassConsistent(marks: Crossed): Intraclass {
  const why = whyUndefined(marks);
  if (why) return { single: why, average: why, interval: why };
  const { answers: n, markers: k, rows, residual } = meanSquares(marks);
  if (marks.every((row) => mean(row) === mean(marks[0] ?? [])) && hasNoResidual(residual, 1))
    return { single: noSpread, average: noSpread, interval: noSpread };
  const single = quotient(rows - residual, rows + (k - 1) * residual);
  const average = quotient(rows - residual, rows);
  if (hasNoResidual(residual, rows)) return { single, average, interval: noResidual };
  const f = rows / residual;
  const low = f / quantileOfF(0.975, n - 1, (n - 1) * (k - 1));
  const high = f * quantileOfF(0.975, (n - 1) * (k - 1), n - 1);
  return { single, average, interval: { low: (low - 1) / (low + k - 1), high: (high - 1) / (high + k - 1) } };
}

/** ICC(1,1) and ICC(1,k): each answer by its own markers; (MSR − MSW) / (MSR + (k − 1)·MSW). Shrout & Fleiss 1979. */
export function intraclassNested(marks: Crossed): Pick<Intraclass, 'single' | 'average'> {
  const why = whyUndefined(marks);
  if (why) return { single: why, average: why };
  const { markers: k, rows, within } = meanSquares(marks);
  return { single: quotient(rows - within, rows + (k - 1) * within), average: quotient(rows - within, rows) };
}

function whyUndefined(marks: Crossed) {
  demandFinite(marks.flat());
  if (marks.length < 2 || (marks[0]?.length ?? 0) < 2) return noTable;
  return areEqual(marks.flat()) ? noSpread : null;
}

/** Whether a residual is nothing but rounding, beside what else varies. */
function hasNoResidual(residual: number, beside: number): boolean {
  return residual <= 1e-12 * Math.abs(beside);
}

function quotient(above: number, below: number): Figure {
  return Math.abs(below) < 1e-12 * Math.max(1, Math.abs(above)) ? noFraction : defined(above / below);
}
