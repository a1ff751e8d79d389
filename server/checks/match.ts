import type { Complex } from '@shared/reading/complex';

/** Where a formula and its key differ. */
export interface DifferingPoint {
  readonly at: Readonly<Record<string, number>>;
  readonly answer: Complex | null;
  readonly key: Complex | null;
}

/** How an answer compares with one value. */
export interface Match {
  readonly same: boolean;
  /** The answer has no unit and was taken in the part's. */
  readonly missingUnit: boolean;
  /** Why they differ, where it is more than a value: for the marker and the feedback. */
  readonly reason?: string;
  readonly point?: DifferingPoint;
  /** The answer as compared: in the part's unit. */
  readonly answer?: Complex | readonly Complex[];
  readonly key?: Complex | readonly Complex[];
}

/** A match without more to say. */
export const matched = (same: boolean, more: Omit<Match, 'same' | 'missingUnit'> = {}): Match => ({
  same,
  missingUnit: false,
  ...more,
});
