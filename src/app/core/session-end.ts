import { Injectable, signal } from '@angular/core';

/** Says that the server no longer knows the session, so that the shell can ask to sign in without losing the page. */
@Injectable({ providedIn: 'root' })
export class SessionEnd {
  private readonly ended = signal(false);

  /** Whether the session ended under an open page. */
  readonly hasEnded = this.ended.asReadonly();

  announce(): void {
    this.ended.set(true);
  }

  forget(): void {
    this.ended.set(false);
  }
}
