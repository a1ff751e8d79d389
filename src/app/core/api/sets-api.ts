import { Injectable, inject } from '@angular/core';
import type { SetStage } from '@shared/primitives';
import { type StudentProgress, setsRoutes } from '@shared/sets';
import { ApiClient, type CallParts } from './api-client';

type EditedSet = NonNullable<CallParts<typeof setsRoutes.createSet>['body']>;

/** Sets, their stages, and how far students are. */
@Injectable({ providedIn: 'root' })
export class SetsApi {
  private readonly api = inject(ApiClient);

  sets(courseId: string) {
    return this.api.call(setsRoutes.sets, { params: { courseId } });
  }

  createSet(courseId: string, body: EditedSet) {
    return this.api.call(setsRoutes.createSet, { params: { courseId }, body });
  }

  set(setId: string) {
    return this.api.call(setsRoutes.set, { params: { setId } });
  }

  changeSet(setId: string, version: number, body: EditedSet) {
    return this.api.call(setsRoutes.changeSet, { params: { setId }, version, body });
  }

  copySet(setId: string, weeks: number) {
    return this.api.call(setsRoutes.copySet, { params: { setId }, body: { weeks } });
  }

  previewSheet(setId: string, membershipId: string) {
    return this.api.call(setsRoutes.previewSheet, { params: { setId, membershipId } });
  }

  usableProblems(courseId: string, search: string) {
    return this.api.call(setsRoutes.usableProblems, { params: { courseId }, query: { search } });
  }

  previewStage(setId: string, stage: SetStage) {
    return this.api.call(setsRoutes.previewStage, { params: { setId, stage } });
  }

  moveStage(setId: string, version: number, stage: SetStage) {
    return this.api.call(setsRoutes.moveStage, { params: { setId }, version, body: { stage } });
  }

  progress(
    setId: string,
    query: { readonly state?: StudentProgress['state'] | undefined; readonly search: string; readonly page: number },
  ) {
    return this.api.call(setsRoutes.progress, { params: { setId }, query });
  }
}
