import { jobRoutes } from '@shared/jobs';
import { can, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import { notFound } from '../http/errors';
import type { Serve } from '../http/serve';
import { cancelJob, findJob, presentJob, type JobRow } from './job-queue';
import { tellJob } from './work-jobs';

/** How far long work is, and its cancellation: for who started it, and for the leads of its course. */
export function addJobRoutes(serve: Serve, { db, clock, ...context }: Context): void {
  serve(jobRoutes.job, ({ user, params }) => presentJob(demandJob(findJob(db, params.jobId), user)));

  serve(jobRoutes.cancelJob, ({ user, params }) => {
    const cancelled = db.transaction(
      (tx) => {
        const row = demandJob(findJob(tx, params.jobId), user);
        return cancelJob(tx, row.id, clock.now()) ?? row;
      },
      { behavior: 'immediate' },
    );
    tellJob({ ...context, db, clock }, cancelled.id);
    return presentJob(cancelled);
  });
}

/** @throws RequestError 404 where there is none, or it is not theirs to see */
function demandJob(row: JobRow | undefined, user: SignedIn): JobRow {
  const mayLead =
    row && (row.courseId === null ? can(user, 'write problems') : can(user, 'correct keys', row.courseId));
  if (!row || !mayLead) throw notFound('job');
  return row;
}
