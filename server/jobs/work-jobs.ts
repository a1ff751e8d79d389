import type { Context } from '../context';
import { newId } from '../http/new-id';
import { personRoom } from '../live/rooms';
import { JobCancelled, JobFailure, runnerOf } from './job-kinds';
import {
  claimJob,
  endJob,
  findJob,
  noteProgress,
  presentJob,
  releaseClaims,
  silence,
  waitingJob,
  type JobRow,
} from './job-queue';

/** Names this process among those that share the database. */
const thisProcess = newId();

/** How far apart two notes of progress lie at least, in milliseconds. */
const between = 150;

/** The work that goes on in this process, by its database. */
const working = new WeakMap<object, Promise<void>>();

/**
 * Works on the jobs that wait, one after the other, until none is left. While that goes on every further call waits for
 * the same end; a failure of a job is in its row, never thrown.
 */
export function workJobs(context: Context): Promise<void> {
  const under = working.get(context.db);
  if (under) return under;
  const work = workAll(context)
    .catch((error: unknown) => {
      context.log.error({ error: String(error) }, 'the queue of jobs could not be read');
    })
    .finally(() => working.delete(context.db));
  working.set(context.db, work);
  return work;
}

/** Waits until a job has ended, for a time. @returns its row as it is then */
export async function awaitJob(context: Context, jobId: string, longest: number): Promise<JobRow | undefined> {
  let timer: NodeJS.Timeout | undefined;
  const enough = new Promise<void>((resolve) => {
    timer = setTimeout(resolve, longest);
  });
  await Promise.race([workJobs(context), enough]);
  clearTimeout(timer);
  return findJob(context.db, jobId);
}

/** Leaves what this process works on to the next one; called when the server stops. */
export function leaveJobs(context: Pick<Context, 'db'>): void {
  releaseClaims(context.db, thisProcess);
}

async function workAll(context: Context): Promise<void> {
  const { db, clock } = context;
  // Every caller's transaction is committed before the first job is looked for.
  await Promise.resolve();
  // Looking takes no lock; claiming does.
  while (waitingJob(db, clock.now())) {
    const row = db.transaction((tx) => claimJob(tx, thisProcess, clock.now()), { behavior: 'immediate' });
    if (!row) return;
    await workOn(context, row);
  }
}

async function workOn(context: Context, row: JobRow): Promise<void> {
  const { db, clock, log } = context;
  let at = { done: 0, total: 0 };
  let notedAt = 0;
  const note = (): void => {
    notedAt = performance.now();
    if (!noteProgress(db, row.id, thisProcess, { ...at, now: clock.now() })) throw new JobCancelled();
    tellJob(context, row.id);
  };
  // A step may take long: the others must not think that this process is gone.
  const alive = setInterval(() => {
    try {
      noteProgress(db, row.id, thisProcess, { ...at, now: clock.now() });
    } catch (error) {
      log.warn({ error: String(error) }, 'a job could not say that it goes on');
    }
  }, silence / 3);
  const end = (state: 'done' | 'failed' | 'cancelled', problem?: string): void => {
    endJob(db, row.id, state, clock.now(), problem ?? null, thisProcess);
    tellJob(context, row.id);
  };
  try {
    const run = runnerOf(row.kind);
    if (!run) throw new JobFailure('This version of the server does not know how to do it.');
    tellJob(context, row.id);
    await run(context, {
      jobId: row.id,
      input: row.input,
      startedById: row.startedById,
      progress: (done, total) => {
        at = { done, total };
        if (done >= total || performance.now() - notedAt >= between) note();
      },
    });
    end('done');
  } catch (error) {
    if (error instanceof JobCancelled) end('cancelled');
    else if (error instanceof JobFailure) end('failed', error.message);
    else {
      log.error({ error: String(error), job: row.kind }, 'a job failed');
      end('failed', 'Something in the server failed. Nothing was changed; try it again, or tell your administrator.');
    }
  } finally {
    clearInterval(alive);
  }
}

/** Tells who started a job how far it is. */
export function tellJob(context: Context, jobId: string): void {
  const row = findJob(context.db, jobId);
  if (!row) return;
  const { id, state, done, total } = presentJob(row);
  context.live.emit([personRoom(row.startedById)], 'jobMoved', { jobId: id, state, done, total });
}
