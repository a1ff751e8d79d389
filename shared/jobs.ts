import * as z from 'zod';
import { identifier, instant } from './primitives';
import { defineRoute } from './route';

/** Where work that takes long stands. */
export const jobStates = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;
export const jobState = z.enum(jobStates);
export type JobState = z.infer<typeof jobState>;

/** Work that takes long, as those see it who wait for it. */
export const job = z.object({
  id: identifier,
  kind: z.string(),
  state: jobState,
  done: z.number().int(),
  /** 0 while it is not known yet. */
  total: z.number().int(),
  /** Why it failed, in a sentence. */
  problem: z.string().nullable(),
  createdAt: instant,
  finishedAt: instant.nullable(),
});
export type Job = z.infer<typeof job>;

/** Whether nothing more will come of a job. */
export function hasEnded(aJob: Pick<Job, 'state'>): boolean {
  return aJob.state !== 'queued' && aJob.state !== 'running';
}

const params = z.object({ jobId: identifier });

export const jobRoutes = {
  job: defineRoute({
    method: 'GET',
    path: '/jobs/:jobId',
    summary: 'How far a job is',
    params,
    response: job,
  }),
  cancelJob: defineRoute({
    method: 'POST',
    path: '/jobs/:jobId/cancellation',
    summary: 'Cancel a job; what it did so far is kept or undone whole, never half',
    params,
    response: job,
    status: 200,
  }),
};
