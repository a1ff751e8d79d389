import * as z from 'zod';
import { identifier, instant } from './primitives';
import { defineRoute } from './route';

/** One fact of the record. */
export const recordEntry = z.object({
  id: identifier,
  at: instant,
  /** The name of who did it; null for the server itself. */
  actor: z.string().nullable(),
  action: z.string(),
  thing: z.string(),
  sentence: z.string(),
  reason: z.string().nullable(),
});
export type RecordEntry = z.infer<typeof recordEntry>;

export const recordRoutes = {
  record: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/record',
    summary: 'Who did what in a course, newest first',
    params: z.object({ courseId: identifier }),
    query: z.object({
      search: z.string().trim().max(100).default(''),
      thing: z.string().max(40).default(''),
      page: z.coerce.number().int().min(1).default(1),
    }),
    response: z.object({ items: z.array(recordEntry), total: z.number().int(), things: z.array(z.string()) }),
  }),
};
