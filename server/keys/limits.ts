/** Longest time for one evaluation, in milliseconds. */
export const longestEvaluation = 2_000;

/** What a key that ran away came to. */
export const tooLong = {
  fault: { message: 'This key takes longer than two seconds; simplify it, or use smaller numbers.' },
} as const;
