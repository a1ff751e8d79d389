import type { NextFunction, Request, Response } from 'express';
import type { Logger } from 'pino';
import type { ProblemDetails } from '@shared/problem-details';
import { RequestError } from './errors';

/** Translates whatever was thrown into problem details; the last of the middleware. */
export function translateErrors(log: Logger) {
  // Express tells an error handler by its four parameters.
  return (error: unknown, request: Request, response: Response, _next: NextFunction): void => {
    const known = asRequestError(error);
    const requestId = String(response.locals['requestId'] ?? '');
    if (known.status >= 500) log.error({ requestId, error: describe(error) }, 'request failed');
    if (response.headersSent) {
      response.end();
      return;
    }
    const details: ProblemDetails = {
      type: known.type,
      title: known.title,
      status: known.status,
      detail: known.message,
      requestId,
      ...(known.extras.fields ? { fields: [...known.extras.fields] } : {}),
      ...(known.extras.current === undefined ? {} : { current: known.extras.current }),
      ...(known.extras.retryAfter === undefined ? {} : { retryAfter: known.extras.retryAfter }),
    };
    if (known.extras.retryAfter !== undefined) response.setHeader('Retry-After', String(known.extras.retryAfter));
    response.status(known.status).type('application/problem+json').send(JSON.stringify(details));
  };
}

function asRequestError(error: unknown): RequestError {
  if (error instanceof RequestError) return error;
  const { type, code } = (typeof error === 'object' && error !== null ? error : {}) as { type?: string; code?: string };
  if (type === 'entity.too.large')
    return new RequestError('/errors/too-large', 'Too large', 'That is more than is taken at once.');
  if (type === 'entity.parse.failed' || type === 'encoding.unsupported' || type === 'charset.unsupported')
    return new RequestError('/errors/invalid-input', 'Not readable', 'The request is not valid JSON.');
  if (code === 'SQLITE_FULL' || code === 'ENOSPC')
    return new RequestError(
      '/errors/storage-full',
      'The server’s disk is full',
      'The server’s disk is full, so nothing was saved there. What you typed is kept in this browser; tell an administrator.',
    );
  if (error instanceof URIError)
    return new RequestError('/errors/invalid-input', 'Not readable', 'The address cannot be read.');
  return new RequestError(
    '/errors/unexpected',
    'Something went wrong here',
    'Something went wrong on the server. What you typed is kept; try again, and name the request below if it stays so.',
  );
}

function describe(error: unknown): string {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
