import type { Figure, FigureValue } from './figures';

/** The independent ways to a figure. */
export const methodNames = ['phase space', 'number basis', 'moments'] as const;
export type MethodName = (typeof methodNames)[number];

/** A value that one method found. */
export interface MethodValue {
  readonly method: MethodName;
  readonly value: FigureValue;
  /** Estimate of the absolute rounding and truncation error of the value (of its largest entry, for lists). */
  readonly error: number;
  /** Levels of the number basis, where one was used. */
  readonly dimension?: number;
  /** Bound on the weight outside of that basis. */
  readonly outsideWeight?: number;
}

/** Why one method does not apply, or could not keep its digits. */
export interface MethodRefusal {
  readonly method: MethodName;
  readonly notApplicable: string;
}

export type MethodOutcome = MethodValue | MethodRefusal;

/** The value of a figure by the best method, and how well a second one agrees. */
export interface ComparedValue {
  readonly value: FigureValue;
  readonly method: MethodName;
  readonly dimension?: number;
  readonly outsideWeight?: number;
  readonly error: number;
  /** The second method and its value, where two apply. */
  readonly second?: {
    readonly method: MethodName;
    readonly value: FigureValue;
    /** Levels of its number basis and the weight outside, where it took one. */
    readonly dimension?: number;
    readonly outsideWeight?: number;
  };
  /** Digits to which the two agree (0 … 16), where two apply. */
  readonly agreesTo?: number;
  /** Methods that were not used, and why. */
  readonly refusals: readonly MethodRefusal[];
}

/** Whether a method found a value. */
export const isValue = (outcome: MethodOutcome): outcome is MethodValue => 'value' in outcome;

/** Computes a figure by each method that applies. */
export type FigureByMethods = (figure: Figure) => readonly MethodOutcome[];
