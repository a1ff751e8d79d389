import * as z from 'zod';

/** The value of one given in one variant. */
export const givenValue = z.object({
  /** In the given's unit. */
  value: z.number(),
  /** As the statement prints it, without the unit, for example `0.70`; keys use this rounded value. */
  printed: z.string(),
  unit: z.string().optional(),
  /** Of a list of counts its entries; `value` is how many there are, as is printed. */
  counts: z.array(z.number().int()).readonly().optional(),
});
export type GivenValue = z.infer<typeof givenValue>;

/** All givens of a variant, by name. */
export const givenValues = z.record(z.string(), givenValue);
export type GivenValues = z.infer<typeof givenValues>;
