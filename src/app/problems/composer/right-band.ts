import type { DraftAnswer } from '@shared/problem-draft';
import { readTypedNumber } from '@shared/typed-number';

/** What counts as right around a key. */
export interface RightBand {
  readonly low: number;
  readonly high: number;
}

/**
 * The band that counts as right: |x − k| ≤ the widest of the absolute tolerance, the relative one times |k|, and half
 * a unit of the given significant figure of k. Null where no tolerance is typed yet.
 */
export function rightBand(key: number, tolerance: DraftAnswer['tolerance']): RightBand | null {
  const relative = readTypedNumber(tolerance.relative);
  const absolute = readTypedNumber(tolerance.absolute);
  const figures = readTypedNumber(tolerance.significantFigures);
  const widths = [
    ...(relative === undefined ? [] : [relative * Math.abs(key)]),
    ...(absolute === undefined ? [] : [absolute]),
    ...(figures === undefined || key === 0 ? [] : [0.5 * 10 ** (Math.floor(Math.log10(Math.abs(key))) - figures + 1)]),
  ];
  if (widths.length === 0) return null;
  const width = Math.max(...widths);
  return { low: key - width, high: key + width };
}

/** A slip's value in one variant. */
export interface SlipValue {
  readonly name: string;
  /** Null where it has none. */
  readonly value: unknown;
  /** Whether it would pass as right, where the server has said so. */
  readonly passes?: boolean | undefined;
}

/** How the slips of one variant stand to its key and to each other. */
export interface SlipStanding {
  /** In words, for example `both well apart`. */
  readonly words: string;
  readonly needsLook: boolean;
}

/**
 * Says whether a slip would pass as right, or two slips cannot be told apart.
 *
 * @param passes whether a value would be right where the key is another
 */
export function slipStanding(
  key: unknown,
  slips: readonly SlipValue[],
  passes: (key: unknown, value: unknown) => boolean,
): SlipStanding | null {
  if (slips.length === 0) return null;
  const inBand = slips.find((slip) => slip.value !== null && (slip.passes ?? passes(key, slip.value)));
  if (inBand) return { words: `“${inBand.name}” passes as right`, needsLook: true };
  for (const [index, one] of slips.entries()) {
    if (one.value === null) continue;
    const twin = slips.slice(index + 1).find(({ value }) => value !== null && passes(one.value, value));
    if (twin) return { words: `“${one.name}” equals “${twin.name}”`, needsLook: true };
  }
  if (slips.some(({ value }) => value === null)) return { words: 'a slip has no value', needsLook: true };
  const all = slips.length === 1 ? 'well apart' : slips.length === 2 ? 'both well apart' : 'all well apart';
  return { words: all, needsLook: false };
}
