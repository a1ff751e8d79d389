import type { courses } from '@drizzle/schema';
import type { Convention } from '@shared/primitives';

/** The convention of a course, from its row. */
export function conventionOf(
  row: Pick<typeof courses.$inferSelect, 'vacuumVariance' | 'squeezingSign' | 'splitterPhase'>,
): Convention {
  return {
    vacuumVariance: row.vacuumVariance as Convention['vacuumVariance'],
    squeezingSign: row.squeezingSign as Convention['squeezingSign'],
    splitterPhase: row.splitterPhase,
  };
}
