import { Injectable, inject } from '@angular/core';
import { recordRoutes } from '@shared/record';
import { ApiClient } from './api-client';

/** The record of a course. */
@Injectable({ providedIn: 'root' })
export class RecordApi {
  private readonly api = inject(ApiClient);

  record(courseId: string, query: { search: string; thing: string; page: number }) {
    return this.api.call(recordRoutes.record, { params: { courseId }, query });
  }
}
