import { ChangeDetectionStrategy, Component, computed, inject, input, numberAttribute } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatPaginatorModule } from '@angular/material/paginator';
import { Router, RouterLink } from '@angular/router';
import type { QuerySummary } from '@shared/queries';
import { momentOf } from '@shared/times';
import { QueriesApi } from '../../core/api/queries-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { QueryTerms } from './query-terms';

const pageSize = 50;

/** The mark queries of a course, those that wait first; for leads what students are told of them. */
@Component({
  selector: 'app-query-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, MatPaginatorModule, QueryTerms, RouterLink],
  templateUrl: './query-list.html',
  styleUrls: ['../results-page.scss', './query-list.scss'],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class QueryList {
  private readonly api = inject(QueriesApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);

  readonly courseId = input.required<string>();
  /** From 1, in the address. */
  readonly page = input(1, { transform: (value: unknown) => numberAttribute(value, 1) });

  protected readonly size = pageSize;
  protected readonly list = rxResource({
    params: () => ({ courseId: this.courseId(), page: this.page() }),
    stream: ({ params }) => this.api.queries(params.courseId, params.page),
  });
  protected readonly problem = computed(() => (this.list.error() ? sentenceOf(this.list.error()) : null));
  protected readonly isLead = computed(() => this.session.role() === 'lead');
  protected readonly summary = computed(() => {
    if (!this.list.hasValue()) return '';
    const { waiting, total } = this.list.value();
    const all = total === 1 ? 'One query' : `${String(total)} queries`;
    return `${all}; ${waiting === 0 ? 'none waits' : waiting === 1 ? 'one waits' : `${String(waiting)} wait`} for you.`;
  });

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected whatOf({ setNumber, part, criterionName }: QuerySummary): string {
    return `Set ${String(setNumber)}, ${part}${criterionName ? `, ${criterionName}` : ''}`;
  }

  protected stateOf({ outcome, notYours }: QuerySummary): string {
    if (outcome)
      return outcome.before === outcome.after
        ? `answered: ${String(outcome.after)} stands`
        : `answered: ${String(outcome.before)} to ${String(outcome.after)}`;
    return notYours ? 'waits for a colleague: you gave the mark' : 'waits';
  }

  protected goTo(index: number): void {
    void this.router.navigate([], { queryParams: { page: index + 1 }, queryParamsHandling: 'merge' });
  }
}
