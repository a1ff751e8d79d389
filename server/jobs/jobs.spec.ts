import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import * as z from 'zod';
import { jobs } from '@drizzle/schema';
import type { Emitted } from '../live/live';
import { personRoom } from '../live/rooms';
import { createHarness, type Harness } from '../testing/harness';
import { defineJob, JobFailure } from './job-kinds';
import { claimJob, endJob, enqueueJob, findJob, mostAttempts, noteProgress, silence } from './job-queue';
import { workJobs } from './work-jobs';

let harness: Harness;
let courseId: string;
let lead: ReturnType<Harness['makeMember']>;

/** What the steps of the test's work do, by their number. */
let atStep: (step: number) => void = () => undefined;

const counting = defineJob({
  kind: 'counting, in a test',
  input: z.object({ steps: z.number().int() }),
  async run(_context, work) {
    for (let step = 1; step <= work.input.steps; step += 1) {
      await Promise.resolve();
      atStep(step);
      work.progress(step, work.input.steps);
    }
  },
});

beforeEach(() => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  lead = harness.makeMember(courseId, 'lead');
  atStep = () => undefined;
});
afterEach(() => harness.close());

const begin = (steps = 3, more: { courseId?: string } = {}) =>
  enqueueJob(harness.db, counting, { steps }, { startedById: lead.id, now: harness.clock.now(), ...more });
const rowOf = (id: string) => findJob(harness.db, id);

describe('a job', () => {
  it('is worked on to its end, and tells who started it, and nobody else, how far it is', async () => {
    const told: Emitted[] = [];
    harness.context.live.observe((emitted) => told.push(emitted));
    const { id } = begin();
    await workJobs(harness.context);
    expect(rowOf(id)).toMatchObject({ state: 'done', done: 3, total: 3, problem: null, attempts: 1 });
    expect(told.every(({ event }) => event === 'jobMoved')).toBe(true);
    expect(new Set(told.flatMap(({ rooms }) => rooms))).toEqual(new Set([personRoom(lead.id)]));
    expect(told.at(-1)?.body).toEqual({ jobId: id, state: 'done', done: 3, total: 3 });
  });

  it('fails with its own sentence, or with one that says nothing of the server’s inside', async () => {
    const { id } = begin();
    atStep = () => {
      throw new JobFailure('The set is gone.');
    };
    await workJobs(harness.context);
    expect(rowOf(id)).toMatchObject({ state: 'failed', problem: 'The set is gone.' });
    const other = begin();
    atStep = () => {
      throw new TypeError('x of undefined');
    };
    await workJobs(harness.context);
    expect(rowOf(other.id)?.problem).toContain('Something in the server failed');
  });

  it('is cancelled while it waits and while it runs', async () => {
    const client = await harness.agent(lead);
    const waiting = begin(3, { courseId });
    await client.post(`/api/jobs/${waiting.id}/cancellation`).send({}).expect(200);
    expect(rowOf(waiting.id)?.state).toBe('cancelled');

    const running = begin(100_000, { courseId });
    atStep = (step) => {
      if (step === 1) harness.db.update(jobs).set({ cancelAsked: true }).where(eq(jobs.id, running.id)).run();
    };
    await workJobs(harness.context);
    expect(rowOf(running.id)).toMatchObject({ state: 'cancelled' });
    expect(rowOf(running.id)?.done).toBeLessThan(100_000);
    // What has ended is not cancelled again.
    const { body } = await client.post(`/api/jobs/${running.id}/cancellation`).send({}).expect(200);
    expect(body).toMatchObject({ state: 'cancelled' });
  });

  it('belongs to one process, and is taken up by another after a silence', () => {
    const { id } = begin();
    const now = harness.clock.now();
    expect(claimJob(harness.db, 'one', now)?.id).toBe(id);
    expect(claimJob(harness.db, 'other', now + silence)).toBeUndefined();
    expect(claimJob(harness.db, 'other', now + silence + 1)?.id).toBe(id);
    // The first is told to stop, and its end counts for nothing.
    expect(noteProgress(harness.db, id, 'one', { done: 1, total: 3, now })).toBe(false);
    endJob(harness.db, id, 'failed', now, 'late', 'one');
    expect(rowOf(id)?.state).toBe('running');
    expect(noteProgress(harness.db, id, 'other', { done: 1, total: 3, now })).toBe(true);
  });

  it('is given up after three processes went down with it', () => {
    const { id } = begin();
    let now = harness.clock.now();
    for (let attempt = 0; attempt < mostAttempts; attempt += 1) {
      expect(claimJob(harness.db, `process ${String(attempt)}`, now)?.id).toBe(id);
      now += silence + 1;
    }
    expect(claimJob(harness.db, 'last', now)).toBeUndefined();
    expect(rowOf(id)).toMatchObject({ state: 'failed' });
  });

  it('is done after a restart', async () => {
    const { id } = begin();
    claimJob(harness.db, 'a process that was killed', harness.clock.now());
    harness.clock.advance(silence + 1);
    await workJobs(harness.context);
    expect(rowOf(id)).toMatchObject({ state: 'done', attempts: 2 });
  });
});

describe('the routes of jobs', () => {
  it('answer leads alone', async () => {
    const ofCourse = begin(1, { courseId });
    const ofBank = begin(1);
    const stranger = harness.makeMember(harness.makeCourse().id, 'lead');
    for (const [person, inCourse, inBank] of [
      [lead, 200, 200],
      [stranger, 404, 200],
      [harness.makeMember(courseId, 'marker'), 404, 404],
      [harness.makeMember(courseId, 'student'), 404, 404],
      [null, 401, 401],
    ] as const) {
      const client = await harness.agent(person);
      await client.get(`/api/jobs/${ofCourse.id}`).expect(inCourse);
      await client.get(`/api/jobs/${ofBank.id}`).expect(inBank);
      if (inCourse !== 200) await client.post(`/api/jobs/${ofCourse.id}/cancellation`).send({}).expect(inCourse);
    }
    expect(rowOf(ofCourse.id)?.state).toBe('queued');
  });
});
