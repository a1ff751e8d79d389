import type { KeyPool } from '../keys';
import type { KeyOutcome, KeyRequest } from './key-outcome';

/** What evaluates expressions, in workers of its own. */
export type Keys = KeyPool;

/**
 * Evaluates expressions together, each to its value or to why it has none; an author's mistake never throws.
 *
 * @returns one outcome for each request, in order
 */
export async function evaluateOutcomes(keys: Keys, requests: readonly KeyRequest[]): Promise<readonly KeyOutcome[]> {
  return keys.evaluateMany(requests);
}
