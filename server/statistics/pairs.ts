import { quantileOfT } from './distributions';
import { defined, demandFinite, undefinedBecause, type Figure, type Interval } from './figure';
import { mean, variance } from './sums';

/** Two marks of the same answer. */
export type Pair = readonly [first: number, second: number];

const noPairs = undefinedBecause('No answer has two marks yet.');
const onePair = undefinedBecause('One pair of marks has no spread; at least two answers must be marked twice.');

/** The fraction of pairs whose marks are equal, in [0, 1]. Undefined without pairs. */
export function exactAgreement(pairs: readonly Pair[]): Figure {
  return agreementWithin(pairs, 0);
}

/**
 * The fraction of pairs whose marks lie at most `tolerance` apart, in [0, 1]: #{|a − b| ≤ tolerance} / n.
 * A billionth of the marks is forgiven, since 0.3 − 0.2 is not 0.1 in binary. Undefined without pairs.
 *
 * @throws RangeError where a mark is not finite, or the tolerance negative
 */
export function agreementWithin(pairs: readonly Pair[], tolerance: number): Figure {
  demandFinite(pairs.flat());
  if (!(tolerance >= 0)) throw new RangeError('A tolerance is not negative.');
  if (pairs.length === 0) return noPairs;
  const within = pairs.filter(([first, second]) => Math.abs(first - second) <= tolerance + roundingOf(first, second));
  return defined(within.length / pairs.length);
}

function roundingOf(first: number, second: number): number {
  return 1e-9 * Math.max(1, Math.abs(first), Math.abs(second));
}

/** The mean of first − second, in marks. Positive: the first marks are the more generous. Undefined without pairs. */
export function signedDifference(pairs: readonly Pair[]): Figure {
  demandFinite(pairs.flat());
  return pairs.length === 0 ? noPairs : defined(mean(differences(pairs)));
}

/** Limits within which 95 % of differences lie, with what they are computed from; in marks. */
export interface LimitsOfAgreement {
  readonly n: number;
  /** The mean of first − second. */
  readonly bias: Figure;
  /** Standard deviation of the differences, with divisor n − 1. */
  readonly spread: Figure;
  readonly limits: Interval;
  /** 95 %, by Student's t with n − 1 degrees of freedom. */
  readonly biasInterval: Interval;
  readonly standardErrorOfBias: Figure;
  /** s·√(3/n), the usual approximation. */
  readonly standardErrorOfLimit: Figure;
}

/**
 * Limits of agreement d̄ ± z·s of the differences first − second.
 * J. M. Bland, D. G. Altman, Lancet i (1986) 307–310. Assumes that differences are nearly normal and do not grow with the
 * mark, which a picture must show.
 *
 * @param z 1.96 as usual; the paper's own example rounds it to 2
 * @throws RangeError where a mark is not finite
 */
export function limitsOfAgreement(pairs: readonly Pair[], z = 1.96): LimitsOfAgreement {
  const n = pairs.length;
  const bias = signedDifference(pairs);
  if (n < 2 || !('value' in bias)) {
    const why = n === 0 ? noPairs : onePair;
    return {
      n,
      bias,
      spread: why,
      limits: why,
      biasInterval: why,
      standardErrorOfBias: why,
      standardErrorOfLimit: why,
    };
  }
  const spread = Math.sqrt(variance(differences(pairs)));
  const error = spread / Math.sqrt(n);
  const around = (half: number): Interval => ({ low: bias.value - half, high: bias.value + half });
  return {
    n,
    bias,
    spread: defined(spread),
    limits: around(z * spread),
    biasInterval: around(quantileOfT(0.975, n - 1) * error),
    standardErrorOfBias: defined(error),
    standardErrorOfLimit: defined(spread * Math.sqrt(3 / n)),
  };
}

function differences(pairs: readonly Pair[]): number[] {
  return pairs.map(([first, second]) => first - second);
}
