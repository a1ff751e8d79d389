import { Injectable, inject } from '@angular/core';
import { courseRoutes } from '@shared/courses';
import type { Role } from '@shared/primitives';
import { ApiClient, type CallParts } from './api-client';

type CourseFields = NonNullable<CallParts<typeof courseRoutes.createCourse>['body']>;

/** Courses and their people. */
@Injectable({ providedIn: 'root' })
export class CoursesApi {
  private readonly api = inject(ApiClient);

  courses() {
    return this.api.call(courseRoutes.courses);
  }

  createCourse(body: CourseFields) {
    return this.api.call(courseRoutes.createCourse, { body });
  }

  course(courseId: string) {
    return this.api.call(courseRoutes.course, { params: { courseId } });
  }

  changeCourse(courseId: string, version: number, body: CourseFields) {
    return this.api.call(courseRoutes.changeCourse, { params: { courseId }, version, body });
  }

  people(courseId: string, query: { search: string; role?: Role | undefined; page: number }) {
    return this.api.call(courseRoutes.people, { params: { courseId }, query });
  }

  addPerson(courseId: string, body: { name: string; email: string; role: Role }) {
    return this.api.call(courseRoutes.addPerson, { params: { courseId }, body });
  }

  changeRole(courseId: string, membershipId: string, role: Role) {
    return this.api.call(courseRoutes.changePerson, { params: { courseId, membershipId }, body: { role } });
  }

  removePerson(courseId: string, membershipId: string) {
    return this.api.call(courseRoutes.removePerson, { params: { courseId, membershipId } });
  }

  restorePerson(courseId: string, membershipId: string) {
    return this.api.call(courseRoutes.restorePerson, { params: { courseId, membershipId } });
  }

  inviteAgain(courseId: string, membershipId: string) {
    return this.api.call(courseRoutes.invitationLink, { params: { courseId, membershipId } });
  }

  previewRoster(courseId: string, csv: string) {
    return this.api.call(courseRoutes.previewRoster, { params: { courseId }, body: { csv } });
  }

  importRoster(courseId: string, csv: string) {
    return this.api.call(courseRoutes.importRoster, { params: { courseId }, body: { csv } });
  }
}
