import * as z from 'zod';

/** A random identifier (UUIDv4): it tells neither time nor order. */
export const identifier = z.uuid();

/** UTC milliseconds. */
export const instant = z
  .number()
  .int()
  .min(0, 'Give a time after 1970.')
  .max(7_258_118_400_000, 'Give a time before 2200.');

/** The version of an editable thing, counted from 1; it travels as `ETag` and `If-Match` too. */
export const versionNumber = z.number().int().min(1);

/** A list with the number of all that there are. */
export function listOf<Item extends z.ZodType>(item: Item) {
  return z.object({ items: z.array(item), total: z.number().int() });
}

/** The roles that a person can have in a course. */
export const roles = ['lead', 'marker', 'student'] as const;
export const role = z.enum(roles);
export type Role = z.infer<typeof role>;

/** The stages of a set, in their order. */
export const setStageNames = [
  'draft',
  'review',
  'ready',
  'open',
  'closed',
  'marking',
  'moderation',
  'released',
  'archived',
] as const;
export const setStage = z.enum(setStageNames);
export type SetStage = z.infer<typeof setStage>;

/** A course's choice of vacuum variance, sign of squeezing and splitter phase. */
export const convention = z.object({
  vacuumVariance: z.union([z.literal(0.25), z.literal(0.5), z.literal(1)]),
  squeezingSign: z.union([z.literal(1), z.literal(-1)]),
  /** Radians: π/2 or 0. */
  splitterPhase: z.union([z.literal(0), z.literal(Math.PI / 2)]),
});
export type Convention = z.infer<typeof convention>;

/** What holds where a course says nothing else. */
export const defaultConvention: Convention = { vacuumVariance: 0.5, squeezingSign: 1, splitterPhase: Math.PI / 2 };
