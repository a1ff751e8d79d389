import { inject } from '@angular/core';
import { type CanActivateFn, Router } from '@angular/router';
import type { Role } from '@shared/primitives';
import { Session } from './session';

/** Lets in who is signed in; others go to the sign-in page and come back afterwards. */
export const whoIsSignedIn: CanActivateFn = async (_route, state) => {
  const session = inject(Session);
  const router = inject(Router);
  await session.load();
  return session.person() ? true : router.createUrlTree(['/sign-in'], { queryParams: { then: state.url } });
};

/** Lets in who is in the course of the address; others go to their own first course. */
export const whoIsInTheCourse: CanActivateFn = async (route) => {
  const session = inject(Session);
  const router = inject(Router);
  await session.load();
  const courseId = route.paramMap.get('courseId');
  if (!session.courseOf(courseId)) return router.createUrlTree(['/']);
  session.enter(courseId);
  return true;
};

/** Lets in people of the given roles; others go to their desk. */
export function whoIs(...roles: readonly Role[]): CanActivateFn {
  return (route) => {
    const session = inject(Session);
    const router = inject(Router);
    const courseId = route.parent?.paramMap.get('courseId') ?? route.paramMap.get('courseId');
    const course = session.courseOf(courseId);
    if (course && roles.includes(course.role)) return true;
    return router.createUrlTree(course ? ['/courses', course.courseId, 'desk'] : ['/']);
  };
}

/** Lets in administrators. */
export const whoAdministers: CanActivateFn = async () => {
  const session = inject(Session);
  const router = inject(Router);
  await session.load();
  return session.person()?.isAdministrator ? true : router.createUrlTree(['/']);
};

/** The first page: the newest course's desk, the administrator's page, or a page that says what to do. */
export const whereToBegin: CanActivateFn = async () => {
  const session = inject(Session);
  const router = inject(Router);
  await session.load();
  if (!session.person()) return router.createUrlTree(['/sign-in']);
  const first = session.courses()[0];
  return first ? router.createUrlTree(['/courses', first.courseId, 'desk']) : true;
};
