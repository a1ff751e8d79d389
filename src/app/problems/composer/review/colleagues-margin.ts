import { ChangeDetectionStrategy, Component, computed, inject, input, output, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import type { CommentPlace } from './comment-words';
import { CommentForm } from './comment-form';
import { CommentThread } from './comment-thread';
import { OpenReview } from './open-review';
import { SignOff } from './sign-off';
import { TryOutList } from './try-out-list';

/** The margin of the composer: what colleagues say, tied to lines, and whether the problem is signed off. */
@Component({
  selector: 'app-colleagues-margin',
  imports: [CommentForm, CommentThread, MatButtonModule, MatIconModule, SignOff, TryOutList],
  template: `
    <div class="heading">
      <h2>Colleagues</h2>
      <span class="quiet caption">{{ count() }}</span>
      <span class="grow"></span>
      @if (!isWriting()) {
        <button matButton class="compact" (click)="isWriting.set(true)"><mat-icon svgIcon="add" />Comment</button>
      }
    </div>
    @if (review.failure(); as words) {
      <p class="tone-wrong" role="alert">
        {{ words }} <button matButton class="compact" (click)="review.reload()">Try again</button>
      </p>
    }
    @if (isWriting()) {
      <app-comment-form [line]="line()" (closed)="isWriting.set(false)" />
    }
    @for (each of review.unsettled(); track each.comment.id) {
      <app-comment-thread [comment]="each.comment" [place]="each.place" (goTo)="goTo.emit($event)" />
    } @empty {
      @if (review.review() && !isWriting()) {
        <p class="quiet none">Nothing is open. A comment stands at a line, a part, a key or a criterion.</p>
      }
    }
    @if (review.settled().length > 0) {
      <button
        matButton
        class="compact first"
        [attr.aria-expanded]="showsSettled()"
        (click)="showsSettled.set(!showsSettled())"
      >
        {{ showsSettled() ? 'Hide' : 'Show' }} {{ review.settled().length }} settled
      </button>
      @if (showsSettled()) {
        @for (each of review.settled(); track each.comment.id) {
          <app-comment-thread [comment]="each.comment" [place]="each.place" (goTo)="goTo.emit($event)" />
        }
      }
    }
    <app-try-out-list [problemId]="problemId()" [courseId]="courseId()" />
    <app-sign-off [problemId]="problemId()" [courseId]="courseId()" (compare)="compare.emit($event)" />
  `,
  styleUrl: './colleagues-margin.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ColleaguesMargin {
  protected readonly review = inject(OpenReview);

  readonly problemId = input.required<string>();
  readonly courseId = input.required<string>();
  /** The line where the cursor stands. */
  readonly line = input.required<number>();
  /** A place on the page was asked for. */
  readonly goTo = output<CommentPlace>();
  /** What changed since a revision was asked for. */
  readonly compare = output<number>();

  protected readonly isWriting = signal(false);
  protected readonly showsSettled = signal(false);
  protected readonly count = computed(() => {
    const open = this.review.unsettled().length;
    return open === 0 ? '' : `${String(open)} open`;
  });
}
