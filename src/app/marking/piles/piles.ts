import { ChangeDetectionStrategy, Component, DestroyRef, computed, effect, inject, input } from '@angular/core';
import { rxResource, takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { RouterLink } from '@angular/router';
import type { PileSummary } from '@shared/marking';
import { MarkingApi } from '../../core/api/marking-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { LiveConnection } from '../../core/live-connection';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { MarkerToken } from '../../ui/marker-token/marker-token';

/** How often the counts are fetched again while the page is looked at, in milliseconds. */
const every = 15_000;

/** The piles of a course, set by set: what waits, and who is on it. */
@Component({
  selector: 'app-piles',
  imports: [EmptyState, ErrorState, FormulaText, LoadingBars, MarkerToken, RouterLink],
  templateUrl: './piles.html',
  styleUrl: './piles.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Piles {
  private readonly api = inject(MarkingApi);
  private readonly live = inject(LiveConnection);

  readonly courseId = input.required<string>();

  protected readonly piles = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.piles(params),
  });
  /** What was seen last stays while it is fetched again. */
  protected readonly sets = computed(() => (this.piles.hasValue() ? this.piles.value().items : null));
  protected readonly problem = computed(() => (this.piles.error() ? sentenceOf(this.piles.error()) : null));
  protected readonly requestId = computed(() => {
    const error = this.piles.error();
    return error instanceof RequestFailure ? error.details.requestId : undefined;
  });

  constructor() {
    const timer = setInterval(() => {
      if (document.visibilityState === 'visible') this.piles.reload();
    }, every);
    this.live
      .of('stageChanged')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.piles.reload());
    effect((onCleanup) => {
      onCleanup(this.live.watchCourse(this.courseId()));
    });
    inject(DestroyRef).onDestroy(() => {
      clearInterval(timer);
    });
  }

  protected nameOf(pile: PileSummary): string {
    return `Problem ${String(pile.position)} (${pile.partLabel})`;
  }

  protected progressOf(pile: PileSummary): string {
    const words = [`${String(pile.marked)} of ${String(pile.total)} marked`];
    if (pile.setAside > 0) words.push(`${String(pile.setAside)} set aside`);
    return words.join(', ');
  }
}
