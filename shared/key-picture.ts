import * as z from 'zod';
import { plainValue } from './checks';
import { longestExpression } from './answer-forms';
import { convention } from './primitives';
import { defineRoute } from './route';
import { givenValues } from './variants';

const pair = z.tuple([z.number(), z.number()]);

/** What the state in a key looks like in one variant; a part that cannot be drawn is null. */
const statePicture = z.object({
  /** Modes of the state; of two, `mode` is shown. */
  modes: z.union([z.literal(1), z.literal(2)]),
  mode: z.union([z.literal(1), z.literal(2)]),
  /** ⟨n⟩. */
  mean: z.number(),
  /** P(n) for n = first, first + step …; where next to nothing is likely is left out. */
  bars: z
    .object({ first: z.number().int(), step: z.number().int(), probabilities: z.array(z.number()).readonly() })
    .nullable(),
  /** The Wigner function on a square grid, in the quadratures of the convention. */
  wigner: z
    .object({
      /** Points along each axis. */
      points: z.number().int(),
      /** Where the outermost points lie. */
      x: pair.readonly(),
      p: pair.readonly(),
      /** The largest magnitude. */
      scale: z.number(),
      /** Row by row from the lowest p, in thousandths of `scale`. */
      values: z.array(z.number().int()).readonly(),
      least: z.number(),
      most: z.number(),
    })
    .nullable(),
  /** The way of the amplitude through damping, gain and loss, with the radius of the spread around it. */
  path: z
    .object({
      passages: z.array(z.string()).readonly(),
      points: z.array(z.object({ x: z.number(), p: z.number(), spread: z.number() })).readonly(),
    })
    .nullable(),
  /** The photon number whose probability the key is. */
  asked: z.number().int().nullable(),
});
export type StatePicture = z.infer<typeof statePicture>;

/** A picture of the state that a key expression is about, for those who write keys. */
export const keyPictureRoute = defineRoute({
  method: 'POST',
  path: '/key-picture',
  summary: 'Draw the state that a key expression is about, in one variant',
  body: z.object({
    expression: z.string().min(1).max(longestExpression),
    givens: givenValues,
    /** Values of earlier parts, by name (`part_a`); those with a unit as text. */
    earlier: z.record(z.string(), plainValue).default({}),
    convention,
    /** The mode that is shown of a joint state. */
    mode: z.union([z.literal(1), z.literal(2)]).default(1),
  }),
  response: z.object({
    picture: statePicture.nullable(),
    /** Why there is none; empty where there is one. */
    why: z.string(),
  }),
  status: 200,
});
