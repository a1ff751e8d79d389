import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { ResultsSummary } from '@shared/results';
import { ResultsApi } from '../../core/api/results-api';
import { sentenceOf } from '../../core/api/request-failure';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** The sets that have scripts: their results, and their release. */
@Component({
  selector: 'app-results-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, RouterLink],
  template: `
    <div class="page">
      <header class="pages">
        <h1>Results</h1>
        <a matButton routerLink="../queries">Mark queries</a>
        <a matButton routerLink="../receipts">Verify a receipt</a>
      </header>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="list.reload()" />
      } @else if (list.hasValue()) {
        @if (list.value().items.length > 0) {
          <ul class="rows">
            @for (set of list.value().items; track set.setId) {
              <li>
                <a class="name" [routerLink]="[set.setId]">Set {{ set.number }}, {{ set.title }}</a>
                <span class="quiet">{{ set.stage }}</span>
                <span>{{ marksOf(set) }}</span>
                <span class="deeds">
                  <a matButton [routerLink]="[set.setId]" [attr.aria-label]="'Marks of set ' + set.number">Marks</a>
                  <a
                    matButton="outlined"
                    [routerLink]="[set.setId, 'release']"
                    [attr.aria-label]="'Release of set ' + set.number"
                    >{{ isReleased(set) ? 'The release' : 'Release' }}</a
                  >
                </span>
              </li>
            }
          </ul>
        } @else {
          <app-empty-state
            text="No results yet. When a set has closed and is marked, its marks and its release are here."
          />
        }
      } @else {
        <app-loading-bars [count]="4" [rowHeight]="52" label="The results are on their way" />
      }
    </div>
  `,
  styleUrl: '../results-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ResultsList {
  private readonly api = inject(ResultsApi);

  readonly courseId = input.required<string>();

  protected readonly list = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.resultsList(params),
  });
  protected readonly problem = computed(() => (this.list.error() ? sentenceOf(this.list.error()) : null));

  protected isReleased({ stage }: ResultsSummary): boolean {
    return stage === 'released' || stage === 'archived';
  }

  protected marksOf(set: ResultsSummary): string {
    const aside = set.setAside > 0 ? `, ${String(set.setAside)} set aside` : '';
    return `${String(set.scripts)} scripts, ${String(set.marked)} of ${String(set.answers)} answers marked${aside}`;
  }
}
