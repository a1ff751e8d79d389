import { Injectable, inject } from '@angular/core';
import { deskRoutes } from '@shared/desk';
import { ApiClient } from './api-client';

/** What needs somebody now. */
@Injectable({ providedIn: 'root' })
export class DeskApi {
  private readonly api = inject(ApiClient);

  desk(courseId: string) {
    return this.api.call(deskRoutes.desk, { params: { courseId } });
  }
}
