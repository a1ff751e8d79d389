import { z } from 'zod';
import { identifier } from './primitives';

/** One criterion as a mark settles it. */
export const markedCriterion = z.object({
  criterionId: identifier,
  awarded: z.boolean(),
});
export type MarkedCriterion = z.infer<typeof markedCriterion>;
