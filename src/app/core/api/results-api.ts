import { Injectable, inject } from '@angular/core';
import { resultsRoutes } from '@shared/results';
import { ApiClient } from './api-client';

/** Results, release and feedback. */
@Injectable({ providedIn: 'root' })
export class ResultsApi {
  private readonly api = inject(ApiClient);

  resultsList(courseId: string) {
    return this.api.call(resultsRoutes.resultsList, { params: { courseId } });
  }

  results(setId: string) {
    return this.api.call(resultsRoutes.results, { params: { setId } });
  }

  release(setId: string) {
    return this.api.call(resultsRoutes.release, { params: { setId } });
  }

  releaseSet(setId: string, version: number, text: string | undefined, leaveOutOpen: boolean) {
    return this.api.call(resultsRoutes.releaseSet, {
      params: { setId },
      version,
      body: text === undefined ? { leaveOutOpen } : { text, leaveOutOpen },
    });
  }

  takeBackRelease(setId: string, version: number) {
    return this.api.call(resultsRoutes.takeBackRelease, { params: { setId }, version });
  }

  feedbackList(courseId: string) {
    return this.api.call(resultsRoutes.feedbackList, { params: { courseId } });
  }

  feedback(setId: string) {
    return this.api.call(resultsRoutes.feedback, { params: { setId } });
  }
}
