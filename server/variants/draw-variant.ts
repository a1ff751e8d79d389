import type { ProblemContent } from '@shared/problems';
import type { GivenValues } from '@shared/variants';
import { drawPlainGivens } from './draw-givens';
import { deriveGivens } from './derive-givens';
import type { Keys } from './evaluate-outcomes';

/** A given that cannot be derived in some variant. A problem that is ready was tried, so this is rare. */
export class VariantError extends Error {}

/**
 * Draws one variant for each seed, derived givens included. The same seed always gives the same values.
 *
 * @param seeds any texts, for example of the set, its problem and a student's membership
 * @throws VariantError where a derived given has no value
 */
export async function drawVariants(
  keys: Keys,
  content: Pick<ProblemContent, 'givens' | 'convention'>,
  seeds: readonly string[],
): Promise<readonly GivenValues[]> {
  const derived = await deriveGivens(
    keys,
    content,
    seeds.map((seed) => drawPlainGivens(content, seed)),
    Infinity,
    seeds,
  );
  return derived.map(({ givens, faults: [fault] }) => {
    if (fault) throw new VariantError(fault.message);
    return givens;
  });
}

/** Draws the variant of one seed. @throws VariantError where a derived given has no value */
export async function drawVariant(
  keys: Keys,
  content: Pick<ProblemContent, 'givens' | 'convention'>,
  seed: string,
): Promise<GivenValues> {
  const [givens] = await drawVariants(keys, content, [seed]);
  return givens ?? {};
}
