/** What courses choose differently; every figure depends on it. */
export interface Convention {
  /** Variance of a quadrature in the vacuum: 1/2 here; 1/4 and 1 are the others in use. */
  readonly vacuumVariance: number;
  /** +1: S(ζ) with φ = 0 squeezes x; −1 exchanges S(ζ) for S(−ζ). */
  readonly squeezingSign: 1 | -1;
  /** Reflection phase of a beam splitter whose phase is not given. */
  readonly splitterPhase: number;
}

export const defaultConvention: Convention = { vacuumVariance: 0.5, squeezingSign: 1, splitterPhase: Math.PI / 2 };

/** The factor √(2v) by which a quadrature of vacuum variance v is larger than the internal one of variance 1/2. */
export const quadratureScale = (convention: Convention): number =>
  convention.vacuumVariance === 0.5 ? 1 : Math.sqrt(2 * convention.vacuumVariance);
