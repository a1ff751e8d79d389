import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatPaginatorModule } from '@angular/material/paginator';
import { MatSelectModule } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import type { SetStage } from '@shared/primitives';
import { progressPageSize, studentProgress, type StudentProgress } from '@shared/sets';
import { momentOf } from '@shared/times';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** Who has opened their sheet, answered and handed in. */
@Component({
  selector: 'app-student-progress-table',
  imports: [
    EmptyState,
    ErrorState,
    LoadingBars,
    MatFormFieldModule,
    MatInputModule,
    MatPaginatorModule,
    MatSelectModule,
    RouterLink,
  ],
  templateUrl: './student-progress.html',
  styleUrl: './student-progress.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StudentProgressTable {
  private readonly api = inject(SetsApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);

  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();
  /** The set's stage: when it changes, so do the students. */
  readonly stage = input.required<SetStage>();
  readonly state = input<StudentProgress['state']>();
  readonly search = input('');
  readonly page = input(1);

  protected readonly states = studentProgress.shape.state.options;
  protected readonly pageSize = progressPageSize;
  protected readonly students = rxResource({
    params: () => ({
      setId: this.setId(),
      stage: this.stage(),
      state: this.state(),
      search: this.search(),
      page: this.page(),
    }),
    stream: ({ params: { setId, state, search, page } }) => this.api.progress(setId, { state, search, page }),
  });
  protected readonly problem = computed(() => {
    const error = this.students.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly isFiltered = computed(() => this.search() !== '' || this.state() !== undefined);
  protected readonly rows = computed(() => {
    const zone = this.session.course()?.timeZone ?? 'UTC';
    return (this.students.hasValue() ? this.students.value().items : []).map((each) => ({
      ...each,
      saved: each.lastSavedAt === null ? '' : momentOf(each.lastSavedAt, zone),
      submitted: each.handedInAt === null ? '' : momentOf(each.handedInAt, zone),
    }));
  });

  protected filterBy(filter: { search?: string; state?: StudentProgress['state'] | null; page?: number }): void {
    const queryParams = { page: null, ...filter, ...(filter.search === '' ? { search: null } : {}) };
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }
}
