import type { FieldProblem, ProblemDetails } from '@shared/problem-details';

/** A request that did not succeed, with what the server said of it. */
export class RequestFailure extends Error {
  constructor(readonly details: ProblemDetails) {
    super(details.detail);
    this.name = 'RequestFailure';
  }

  /** Whether the server could not be reached at all. */
  get isOffline(): boolean {
    return this.details.status === 0;
  }

  /** The first message about a field, or null. */
  messageFor(...path: FieldProblem['path']): string | null {
    const wanted = path.join('.');
    return this.details.fields?.find((field) => field.path.join('.') === wanted)?.message ?? null;
  }
}

/** What went wrong, in a sentence for the page. */
export function sentenceOf(error: unknown): string {
  return error instanceof RequestFailure ? error.message : 'Something went wrong in this page. Reload it to go on.';
}
