import { Injectable, inject } from '@angular/core';
import { jobRoutes } from '@shared/jobs';
import { ApiClient } from './api-client';

/** Work that takes long. */
@Injectable({ providedIn: 'root' })
export class JobsApi {
  private readonly api = inject(ApiClient);

  job(jobId: string) {
    return this.api.call(jobRoutes.job, { params: { jobId } });
  }

  cancelJob(jobId: string) {
    return this.api.call(jobRoutes.cancelJob, { params: { jobId } });
  }
}
