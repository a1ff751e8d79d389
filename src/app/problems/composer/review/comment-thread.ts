import { ChangeDetectionStrategy, Component, computed, inject, input, output, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { ProblemComment } from '@shared/review';
import { momentOf } from '@shared/times';
import { sentenceOf } from '../../../core/api/request-failure';
import { Session } from '../../../core/session';
import { FormulaText } from '../../../ui/formula-text/formula-text';
import { OpenProblem } from '../open-problem';
import { TypedField } from '../typed-field';
import type { CommentPlace } from './comment-words';
import { OpenReview } from './open-review';

/** A comment with its replies, the wording it suggests, and what can be done about it. */
@Component({
  selector: 'app-comment-thread',
  imports: [FormulaText, MatButtonModule, TypedField],
  templateUrl: './comment-thread.html',
  styleUrl: './comment-thread.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: { '[class.shown]': 'isShown()', '[class.settled]': 'comment().settled !== null' },
})
export class CommentThread {
  private readonly session = inject(Session);
  private readonly review = inject(OpenReview);
  protected readonly open = inject(OpenProblem);

  readonly comment = input.required<ProblemComment>();
  readonly place = input.required<CommentPlace>();
  /** The place was asked for: a line of the statement, or the tab of a part. */
  readonly goTo = output<CommentPlace>();

  protected readonly isReplying = signal(false);
  protected readonly answer = signal('');
  protected readonly fault = signal('');
  protected readonly failure = signal('');
  protected readonly isBusy = signal(false);
  protected readonly isShown = computed(() => this.review.shownId() === this.comment().id);
  protected readonly maySettle = computed(
    () => this.session.role() === 'lead' || this.session.person()?.id === this.comment().by.id,
  );
  protected readonly mayAccept = computed(
    () =>
      this.open.canEdit() &&
      this.comment().suggestion !== null &&
      this.comment().suggestion?.accepted === null &&
      this.place().change === '',
  );

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected showPlace(): void {
    this.review.show(this.comment().id);
    this.goTo.emit(this.place());
  }

  protected async sendAnswer(event: Event): Promise<void> {
    event.preventDefault();
    const text = this.answer().trim();
    this.fault.set(text === '' ? 'Write an answer.' : '');
    if (text === '') return;
    await this.attempt(async () => {
      await this.review.reply(this.comment().id, text);
      this.isReplying.set(false);
      this.answer.set('');
    });
  }

  protected settle(settled: boolean): Promise<void> {
    return this.attempt(() => this.review.settle(this.comment().id, settled));
  }

  protected acceptWording(): Promise<void> {
    return this.attempt(() => this.review.acceptWording(this.comment().id));
  }

  private async attempt(deed: () => Promise<void>): Promise<void> {
    if (this.isBusy()) return;
    this.isBusy.set(true);
    this.failure.set('');
    try {
      await deed();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
