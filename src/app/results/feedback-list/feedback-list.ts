import { ChangeDetectionStrategy, Component, computed, effect, inject, input } from '@angular/core';
import { rxResource, takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { momentOf } from '@shared/times';
import { ResultsApi } from '../../core/api/results-api';
import { sentenceOf } from '../../core/api/request-failure';
import { LiveConnection } from '../../core/live-connection';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** A student's sets whose marks are released. */
@Component({
  selector: 'app-feedback-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, RouterLink],
  template: `
    <div class="page">
      <h1>Feedback</h1>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="list.reload()" />
      } @else if (list.hasValue()) {
        @if (list.value().items.length > 0) {
          <ul class="rows">
            @for (set of list.value().items; track set.setId) {
              <li>
                <a class="name" [routerLink]="[set.setId]">Set {{ set.number }}, {{ set.title }}</a>
                <span
                  ><b>{{ set.total }}</b> of {{ set.outOf }}</span
                >
                <span class="quiet">released {{ moment(set.releasedAt) }}</span>
                <span class="deeds">
                  <a
                    matButton="outlined"
                    [routerLink]="[set.setId]"
                    [attr.aria-label]="'Read feedback on set ' + set.number"
                    >Read feedback</a
                  >
                </span>
              </li>
            }
          </ul>
        } @else {
          <app-empty-state
            text="No marks are released yet. When they are, a letter tells you, and each lost mark is explained here beside your own work."
          />
        }
      } @else {
        <app-loading-bars [count]="3" [rowHeight]="52" label="Your feedback is on its way" />
      }
    </div>
  `,
  styleUrl: '../results-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class FeedbackList {
  private readonly api = inject(ResultsApi);
  private readonly session = inject(Session);

  readonly courseId = input.required<string>();

  protected readonly list = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.feedbackList(params),
  });
  protected readonly problem = computed(() => (this.list.error() ? sentenceOf(this.list.error()) : null));

  constructor() {
    const live = inject(LiveConnection);
    live
      .of('stageChanged')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.list.reload());
    effect((onCleanup) => {
      onCleanup(live.watchCourse(this.courseId()));
    });
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }
}
