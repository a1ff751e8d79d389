import { ChangeDetectionStrategy, Component, DestroyRef, computed, effect, inject, input } from '@angular/core';
import { rxResource, takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { LiveConnection } from '../../core/live-connection';
import { Now } from '../../core/now';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { StageLine } from '../../ui/stage-line/stage-line';
import { marksOf, nextActOf, presentOf, progressOf, standingOf } from '../set-life';

/** The sets of a course, each with its life as a line and the one thing that is next. */
@Component({
  selector: 'app-set-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, RouterLink, StageLine],
  templateUrl: './set-list.html',
  styleUrl: './set-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SetList {
  private readonly api = inject(SetsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly live = inject(LiveConnection);

  readonly courseId = input.required<string>();

  protected readonly sets = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.sets(params),
  });
  protected readonly problem = computed(() => {
    const error = this.sets.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  private readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly items = computed(() =>
    (this.sets.hasValue() ? this.sets.value().items : []).map((set) => ({
      set,
      marks: marksOf(set, this.zone()),
      present: presentOf(set),
      progress: progressOf(set, this.clock.now()),
      standing: standingOf(set, this.clock.now(), this.zone()),
      next: nextActOf(set),
    })),
  );

  constructor() {
    effect((onCleanup) => {
      onCleanup(this.live.watchCourse(this.courseId()));
    });
    this.live
      .of('stageChanged')
      .pipe(takeUntilDestroyed(inject(DestroyRef)))
      .subscribe(() => this.sets.reload());
  }
}
