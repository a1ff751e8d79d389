import { errorTypes, type ErrorType, type FieldProblem } from '@shared/problem-details';

/** What an error may carry besides its sentence. */
interface ErrorExtras {
  readonly fields?: readonly FieldProblem[];
  readonly current?: unknown;
  readonly retryAfter?: number;
}

/** An error that is meant for the person who asked. Translated to problem details once, at the end. */
export class RequestError extends Error {
  readonly status: number;

  constructor(
    readonly type: ErrorType,
    readonly title: string,
    detail: string,
    readonly extras: ErrorExtras = {},
  ) {
    super(detail);
    this.name = 'RequestError';
    this.status = errorTypes[type];
  }
}

/** 400: one or more fields are wrong; each says where and why. */
export function invalidInput(fields: readonly FieldProblem[], detail = 'Some of what was entered cannot be used.') {
  return new RequestError('/errors/invalid-input', 'Something needs another look', detail, { fields });
}

/** 400 for a single field. */
export function invalidField(path: FieldProblem['path'], message: string) {
  return invalidInput([{ path, message }], message);
}

/** 401: nobody is signed in, or the session has ended. */
export function notSignedIn(detail = 'Sign in to go on. What you typed is kept in this browser.') {
  return new RequestError('/errors/not-signed-in', 'Not signed in', detail);
}

/** 403: signed in, but this is for others. */
export function notAllowed(detail = 'Your role in this course does not allow that.') {
  return new RequestError('/errors/not-allowed', 'Not allowed', detail);
}

/** 404: no such thing, or none that this person may know of. */
export function notFound(what: string) {
  return new RequestError('/errors/not-found', 'Not found', `There is no such ${what}, or it is not yours to see.`);
}

/** 409: the request does not fit the state of the thing. */
export function conflict(detail: string, extras: ErrorExtras = {}) {
  return new RequestError('/errors/conflict', 'That does not fit any more', detail, extras);
}

/** 410: a link that was used already, or has expired. */
export function gone(detail: string) {
  return new RequestError('/errors/gone', 'No longer valid', detail);
}

/** 412: somebody else changed it first; carries the current state. */
export function stale(detail: string, current: unknown) {
  return new RequestError('/errors/stale', 'Changed meanwhile', detail, { current });
}

/** 413: more than is taken. */
export function tooLarge(detail: string) {
  return new RequestError('/errors/too-large', 'Too large', detail);
}

/** 415: a file of a kind that is not taken. */
export function wrongMediaType(detail: string) {
  return new RequestError('/errors/wrong-media-type', 'Not a kind of file that is taken', detail);
}

/** 428: the request must name the version that it changes. */
export function versionMissing() {
  return new RequestError(
    '/errors/version-missing',
    'Version missing',
    'The request must carry If-Match with the version that it changes.',
  );
}

/** 429: too many wrong guesses. */
export function tooManyGuesses(seconds: number) {
  const minutes = Math.ceil(seconds / 60);
  return new RequestError(
    '/errors/too-many-guesses',
    'Too many tries',
    `Too many tries. Wait ${String(minutes)} ${minutes === 1 ? 'minute' : 'minutes'}, or set a new password.`,
    { retryAfter: seconds },
  );
}
