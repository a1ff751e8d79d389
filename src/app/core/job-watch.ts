import { Injectable, inject } from '@angular/core';
import { EMPTY, type Observable, catchError, exhaustMap, filter, merge, map, of, takeWhile, timer } from 'rxjs';
import { hasEnded, type Job } from '@shared/jobs';
import { JobsApi } from './api/jobs-api';
import { LiveConnection } from './live-connection';

/** How often a job is asked after; the server tells more often where the connection is live. */
const between = 1_000;

/** Follows work that takes long. */
@Injectable({ providedIn: 'root' })
export class JobWatch {
  private readonly api = inject(JobsApi);
  private readonly live = inject(LiveConnection);

  /**
   * A job from now until it has ended. What the server tells comes at once where something is watched; asking it goes on
   * beside that, so that nothing depends on it. A request that fails is made again.
   */
  follow(job: Job): Observable<Job> {
    let known = job;
    const asked = timer(between / 2, between).pipe(
      exhaustMap(() => this.api.job(job.id).pipe(catchError(() => EMPTY))),
    );
    const told = this.live.of('jobMoved').pipe(
      filter(({ jobId }) => jobId === job.id),
      // Whatever ends it may say more than the fact does.
      exhaustMap(({ state, done, total }) =>
        hasEnded({ state }) ? this.api.job(job.id).pipe(catchError(() => EMPTY)) : of({ ...known, state, done, total }),
      ),
    );
    return merge(of(job), told, asked).pipe(
      map((next) => (known = next)),
      takeWhile((next) => !hasEnded(next), true),
    );
  }
}
