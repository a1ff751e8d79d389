import { ChangeDetectionStrategy, Component, computed, effect, inject, input, numberAttribute } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatPaginatorModule } from '@angular/material/paginator';
import { Router, RouterLink } from '@angular/router';
import { ResultsApi } from '../../core/api/results-api';
import { sentenceOf } from '../../core/api/request-failure';
import { PageTitle } from '../../core/page-title';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

const pageSize = 50;

/** The marks of a set, script by script and part by part. */
@Component({
  selector: 'app-set-results',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, MatIconModule, MatPaginatorModule, RouterLink],
  template: `
    <div class="page">
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="results.reload()" />
      } @else if (results.hasValue()) {
        @let set = results.value();
        <header>
          <h1>Set {{ set.number }}, {{ set.title }}</h1>
          <p class="quiet">
            {{ set.stage }}; out of {{ set.outOf }}.
            @if (!named()) {
              Names appear once the set is released.
            }
          </p>
        </header>
        @if (set.items.length > 0) {
          <div class="pages no-print">
            <a matButton="outlined" [href]="'/api/sets/' + set.setId + '/results.csv'" download>
              <mat-icon svgIcon="download" />Save as CSV
            </a>
            <a matButton routerLink="release">Release</a>
          </div>
          <div class="scroll" tabindex="0" role="region" aria-label="Marks">
            <table class="figures">
              <thead>
                <tr>
                  <th scope="col">script</th>
                  @if (named()) {
                    <th scope="col">name</th>
                  }
                  @for (part of set.parts; track part.pileId) {
                    <th scope="col" class="number">{{ part.label }}, {{ part.marks }}</th>
                  }
                  @if (set.takesLateWork) {
                    <th scope="col" class="number">late, taken off</th>
                  }
                  <th scope="col" class="number">total</th>
                </tr>
              </thead>
              <tbody>
                @for (row of rows(); track row.code) {
                  <tr>
                    <td class="mono">{{ row.code }}</td>
                    @if (named()) {
                      <td>{{ row.name }}</td>
                    }
                    @for (mark of row.marks; track $index) {
                      <td class="number">{{ mark ?? '–' }}</td>
                    }
                    @if (set.takesLateWork) {
                      <td class="number">{{ row.late ? row.late.days + ' d, ' + row.late.marks : '–' }}</td>
                    }
                    <td class="number">
                      <b>{{ row.total }}</b>
                    </td>
                  </tr>
                }
              </tbody>
            </table>
          </div>
          @if (set.items.length > size) {
            <mat-paginator
              class="no-print"
              aria-label="Pages of the marks"
              hidePageSize
              [length]="set.items.length"
              [pageSize]="size"
              [pageIndex]="at()"
              (page)="goTo($event.pageIndex)"
            />
          }
        } @else {
          <app-empty-state text="No scripts yet. Marks appear here when the set has closed." />
        }
      } @else {
        <app-loading-bars [count]="8" [rowHeight]="32" label="The marks are on their way" />
      }
    </div>
  `,
  styleUrl: '../results-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SetResults {
  private readonly api = inject(ResultsApi);
  private readonly router = inject(Router);
  private readonly pageTitle = inject(PageTitle);

  readonly setId = input.required<string>();
  /** From 1, in the address. */
  readonly page = input(1, { transform: (value: unknown) => numberAttribute(value, 1) });

  protected readonly size = pageSize;
  protected readonly results = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.results(params),
  });
  protected readonly problem = computed(() => (this.results.error() ? sentenceOf(this.results.error()) : null));
  protected readonly at = computed(() => Math.max(0, this.page() - 1));
  protected readonly named = computed(
    () => this.results.hasValue() && typeof this.results.value().items[0]?.name === 'string',
  );
  protected readonly rows = computed(() =>
    this.results.hasValue() ? this.results.value().items.slice(this.at() * pageSize, (this.at() + 1) * pageSize) : [],
  );

  constructor() {
    effect(() => {
      if (this.results.hasValue()) this.pageTitle.set(`Marks of set ${String(this.results.value().number)}`);
    });
  }

  protected goTo(index: number): void {
    void this.router.navigate([], { queryParams: { page: index + 1 }, queryParamsHandling: 'merge' });
  }
}
