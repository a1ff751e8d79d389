import { LiveAnnouncer } from '@angular/cdk/a11y';
import { Injectable, inject, signal } from '@angular/core';

/** Something that did not go as wished: what happened to which answer, and what can be done. */
export interface BenchNotice {
  /** Null where it is about no single answer. */
  readonly answerId: string | null;
  readonly text: string;
  /** Whether the answer can be taken in hand again. */
  readonly canTake: boolean;
  /** Whether the same save can be tried again as it was. */
  readonly retry: (() => void) | null;
}

/** What did not go as wished at a bench, at most one notice an answer. */
@Injectable()
export class BenchNotices {
  private readonly announcer = inject(LiveAnnouncer);
  private readonly list = signal<readonly BenchNotice[]>([]);

  readonly all = this.list.asReadonly();

  /** Says something, in place of what was said of the same answer. */
  tell(notice: Partial<BenchNotice> & Pick<BenchNotice, 'text'>): void {
    const whole: BenchNotice = { answerId: null, canTake: false, retry: null, ...notice };
    this.list.update((list) => [...list.filter((each) => each.answerId !== whole.answerId), whole]);
    void this.announcer.announce(whole.text, 'assertive');
  }

  /** Closes what was said of an answer, or with null what was said of none. */
  close(answerId: string | null): void {
    this.list.update((list) => list.filter((each) => each.answerId !== answerId));
  }

  /** Tries again whatever can be tried again as it was. */
  retryAll(): void {
    const again = this.list().filter((each) => each.retry !== null);
    this.list.update((list) => list.filter((each) => each.retry === null));
    for (const { retry } of again) retry?.();
  }
}
