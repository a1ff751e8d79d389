import * as z from 'zod';
import { identifier, instant, setStage } from './primitives';
import { defineRoute } from './route';

/** Pages that an entry of the desk can lead to. */
export const deskPages = [
  'sets',
  'set',
  'new set',
  'problems',
  'problem',
  'people',
  'marking',
  'bench',
  'release',
  'sheet',
  'receipt',
  'feedback',
  'queries',
] as const;

/** One thing that needs this person now. */
export const need = z.object({
  id: z.string(),
  /** When it is due; null for now. */
  due: instant.nullable(),
  title: z.string(),
  detail: z.string(),
  act: z.object({ label: z.string(), page: z.enum(deskPages), id: identifier.nullable() }),
});
export type Need = z.infer<typeof need>;

/** A set with its life so far. */
export const deskSet = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  /** When each stage that was reached began, first time of each. */
  reached: z.array(z.object({ stage: setStage, at: instant })),
  opensAt: instant.nullable(),
  closesAt: instant.nullable(),
  act: z.object({ label: z.string(), page: z.enum(deskPages), id: identifier.nullable() }),
});
export type DeskSet = z.infer<typeof deskSet>;

/** What needs somebody now, in order of urgency, and the sets that run. */
export const desk = z.object({ now: instant, needs: z.array(need), sets: z.array(deskSet) });
export type Desk = z.infer<typeof desk>;

export const deskRoutes = {
  desk: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/desk',
    summary: 'What needs this person now, and the sets that run',
    params: z.object({ courseId: identifier }),
    response: desk,
  }),
};
