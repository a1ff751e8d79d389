import type { KeyPool } from '../keys';
import type { KeyOutcome, KeyRequest } from './key-outcome';

/** What evaluates expressions, in workers of its own. */
export type Keys = Pick<KeyPool, 'evaluateMany'>;

const notInTime: KeyOutcome = {
  fault: { message: 'Not evaluated: all keys together take too long. Look for one that takes long by itself.' },
};

/**
 * Evaluates expressions together, each to its value or to why it has none; an author's mistake never throws.
 *
 * @param deadline the time by `performance.now()` after which no more is waited for; none where it is left out
 * @returns one outcome for each request, in order
 */
export async function evaluateOutcomes(
  keys: Keys,
  requests: readonly KeyRequest[],
  deadline = Infinity,
): Promise<readonly KeyOutcome[]> {
  if (requests.length === 0) return [];
  if (deadline === Infinity) return keys.evaluateMany(requests);
  const late = requests.map(() => notInTime);
  const left = deadline - performance.now();
  if (left <= 0) return late;
  let timer: NodeJS.Timeout | undefined;
  const timeout = new Promise<readonly KeyOutcome[]>((resolve) => {
    timer = setTimeout(() => {
      resolve(late);
    }, left);
  });
  try {
    return await Promise.race([keys.evaluateMany(requests), timeout]);
  } finally {
    clearTimeout(timer);
  }
}
