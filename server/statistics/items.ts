import { defined, demandFinite, undefinedBecause, type Figure } from './figure';
import { areEqual, deviationProducts, mean, sum, variance } from './sums';

/** What a script's marks say of one part. */
export interface ItemFigures {
  /** Mean mark ÷ full marks, in [0, 1]: how easy the part was. */
  readonly facility: Figure;
  /** Correlation with the total, the part itself included. */
  readonly withTotal: Figure;
  /** Correlation with the total of the other parts: its discrimination. */
  readonly withRest: Figure;
  /** α of the other parts alone. */
  readonly alphaWithout: Figure;
}

const tooFew = undefinedBecause('At least two scripts are needed.');
const noSpread = undefinedBecause('Every script has the same marks here, so nothing can be compared.');
const onePart = undefinedBecause('At least two parts are needed.');

type Marks = readonly (readonly number[])[];

/**
 * Facility, discrimination and α without the part, for each part. Correlations are Pearson's.
 *
 * @param marks a row a script, a column a part, no gaps
 * @param fullMarks of each part; 0: its facility is undefined
 */
export function itemFigures(marks: Marks, fullMarks: readonly number[]): ItemFigures[] {
  demandFinite(marks.flat());
  if (marks.some((row) => row.length !== fullMarks.length))
    throw new RangeError('Each script has a mark for each part.');
  const totals = marks.map(sum);
  return fullMarks.map((full, part) => {
    const own = marks.map((row) => row[part] ?? 0);
    const rest = totals.map((total, script) => total - (own[script] ?? 0));
    const others = marks.map((row) => row.filter((_, index) => index !== part));
    return {
      facility:
        marks.length === 0
          ? undefinedBecause('No script is marked yet.')
          : full === 0
            ? undefinedBecause('The part has no marks.')
            : defined(mean(own) / full),
      withTotal: correlation(own, totals),
      withRest: fullMarks.length < 2 ? onePart : correlation(own, rest),
      alphaWithout: cronbachAlpha(others),
    };
  });
}

/** Pearson's correlation; undefined where one side does not vary. */
export function correlation(one: readonly number[], other: readonly number[]): Figure {
  if (one.length !== other.length) throw new RangeError('Both sides have the same length.');
  if (one.length < 2) return tooFew;
  if (areEqual(one) || areEqual(other)) return noSpread;
  return defined(
    deviationProducts(one, other) / Math.sqrt(deviationProducts(one, one) * deviationProducts(other, other)),
  );
}

/**
 * Cronbach's α = k/(k − 1)·(1 − Σ s²_i / s²_total), the reliability of a total of k parts. L. J. Cronbach,
 * Psychometrika 16 (1951) 297–334; for marks of 0 and 1 it is KR-20.
 *
 * @param marks a row a script, a column a part, no gaps
 */
export function cronbachAlpha(marks: Marks): Figure {
  demandFinite(marks.flat());
  const parts = marks[0]?.length ?? 0;
  if (marks.length < 2) return tooFew;
  const totals = marks.map(sum);
  if (areEqual(totals)) return noSpread;
  const columns = (marks[0] ?? []).map((_, part) => marks.map((row) => row[part] ?? 0));
  return alphaOfVariances(parts, sum(columns.map(variance)), variance(totals));
}

/** α from the number of parts, the sum of their variances and the variance of the total. */
export function alphaOfVariances(parts: number, ofParts: number, ofTotal: number): Figure {
  if (parts < 2) return onePart;
  if (!(ofTotal > 0)) return noSpread;
  return defined((parts / (parts - 1)) * (1 - ofParts / ofTotal));
}

/**
 * The standard error of measurement s·√(1 − r), in marks. F. M. Lord, M. R. Novick, Statistical Theories of Mental Test
 * Scores (1968). Undefined for a reliability outside of [0, 1], where it means nothing.
 */
export function errorOfMeasurement(spread: number, reliability: Figure): Figure {
  if (!('value' in reliability)) return reliability;
  if (reliability.value < 0 || reliability.value > 1)
    return undefinedBecause('The reliability is negative, so an error of measurement means nothing.');
  return defined(spread * Math.sqrt(1 - reliability.value));
}
