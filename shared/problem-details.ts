import * as z from 'zod';

/** The stable types of error, each with its HTTP status. */
export const errorTypes = {
  '/errors/invalid-input': 400,
  '/errors/not-signed-in': 401,
  '/errors/not-allowed': 403,
  '/errors/not-found': 404,
  '/errors/conflict': 409,
  '/errors/gone': 410,
  '/errors/stale': 412,
  '/errors/too-large': 413,
  '/errors/wrong-media-type': 415,
  '/errors/version-missing': 428,
  '/errors/too-many-guesses': 429,
  '/errors/unexpected': 500,
  '/errors/storage-full': 507,
} as const;
export type ErrorType = keyof typeof errorTypes;

/** One thing that is wrong with one field. */
export const fieldProblem = z.object({
  /** Where: property names and indices, for example `['parts', 0, 'key']`. */
  path: z.array(z.union([z.string(), z.number()])),
  message: z.string(),
  /** For an expression: the character at which it goes wrong, from 0, and how many characters. */
  position: z.number().int().optional(),
  length: z.number().int().optional(),
});
export type FieldProblem = z.infer<typeof fieldProblem>;

/** An error as it travels: problem details of RFC 9457. */
export const problemDetails = z.object({
  type: z.enum(Object.keys(errorTypes) as [ErrorType, ...ErrorType[]]),
  title: z.string(),
  status: z.number().int(),
  /** A sentence that a person can act on. */
  detail: z.string(),
  requestId: z.string().optional(),
  fields: z.array(fieldProblem).optional(),
  /** With a stale write: the current state of the thing. */
  current: z.unknown().optional(),
  /** With too many guesses: seconds to wait. */
  retryAfter: z.number().optional(),
});
export type ProblemDetails = z.infer<typeof problemDetails>;
