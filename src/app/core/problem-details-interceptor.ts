import { HttpErrorResponse, type HttpInterceptorFn } from '@angular/common/http';
import { inject } from '@angular/core';
import { catchError, throwError } from 'rxjs';
import { problemDetails, type ProblemDetails } from '@shared/problem-details';
import { RequestFailure } from './api/request-failure';
import { SessionEnd } from './session-end';

const unreachable: ProblemDetails = {
  type: '/errors/unexpected',
  title: 'No connection',
  status: 0,
  detail: 'The server cannot be reached. What you typed is kept here; try again when you are back online.',
};

/** Turns every failed request into a `RequestFailure` with the server's problem details. */
export const problemDetailsInterceptor: HttpInterceptorFn = (request, next) => {
  const sessionEnd = inject(SessionEnd);
  return next(request).pipe(
    catchError((error: unknown) => {
      if (!(error instanceof HttpErrorResponse)) return throwError(() => error);
      const parsed = problemDetails.safeParse(error.error);
      const details = parsed.success ? parsed.data : { ...unreachable, status: error.status };
      if (details.status === 401 && !request.url.endsWith('/api/session')) sessionEnd.announce();
      return throwError(() => new RequestFailure(details));
    }),
  );
};
