import type * as z from 'zod';
import type { keyPictureRoute } from '@shared/key-picture';
import { evaluateOutcomes, type Keys } from '../variants/evaluate-outcomes';
import { scopeOf } from '../variants/key-outcome';

/** How long an author waits for a picture at most, in milliseconds. */
const longest = 4000;

/** Draws the state that an expression is about, in a worker of the pool. */
export async function drawKey(
  keys: Keys,
  { expression, givens, earlier, convention, mode }: z.output<(typeof keyPictureRoute)['body']>,
): Promise<z.input<(typeof keyPictureRoute)['response']>> {
  const [outcome] = await evaluateOutcomes(
    keys,
    [
      {
        expression,
        givens: { ...scopeOf(givens), ...earlier },
        convention,
        wanted: { kind: 'picture', mode, convention },
      },
    ],
    performance.now() + longest,
  );
  if (outcome?.key && 'picture' in outcome.key && outcome.key.picture)
    return { picture: { ...outcome.key.picture }, why: '' };
  return { picture: null, why: outcome?.fault?.message ?? 'There is nothing to draw.' };
}
