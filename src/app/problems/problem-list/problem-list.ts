import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  signal,
  viewChild,
  type ElementRef,
} from '@angular/core';
import { rxResource, toObservable, takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { Router, RouterLink } from '@angular/router';
import { debounceTime, firstValueFrom, skip } from 'rxjs';
import { problemPageSize } from '@shared/problem-routes';
import { problemStatuses, type ProblemStatus, type ProblemSummary } from '@shared/problems';
import { momentOf } from '@shared/times';
import { typeNumber } from '@shared/typed-number';
import { ProblemsApi } from '../../core/api/problems-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** The bank, with one's own drafts: searched, filtered, a page at a time; what is chosen stands in the address. */
@Component({
  selector: 'app-problem-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, MatIconModule, RouterLink],
  templateUrl: './problem-list.html',
  styleUrl: './problem-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ProblemList {
  private readonly api = inject(ProblemsApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly titleBox = viewChild<ElementRef<HTMLInputElement>>('title');

  readonly courseId = input.required<string>();
  /** Words to find, in the address. */
  readonly search = input<string>();
  readonly status = input<string>();
  readonly page = input<string>();

  protected readonly statuses = problemStatuses;
  protected readonly typed = signal<string | null>(null);
  protected readonly isBeginning = signal(false);
  protected readonly isBusy = signal(false);
  protected readonly titleFault = signal('');
  protected readonly failure = signal('');

  protected readonly filter = computed(() => ({
    search: this.search() ?? '',
    status: problemStatuses.find((status) => status === this.status()),
    page: Math.max(1, Number(this.page() ?? 1) || 1),
  }));
  protected readonly isFiltered = computed(() => this.filter().search !== '' || this.filter().status !== undefined);

  protected readonly problems = rxResource({
    params: () => this.filter(),
    stream: ({ params }) => this.api.problems(params),
  });
  /** What was last shown stays while the next page loads. */
  private kept: readonly ProblemSummary[] = [];
  protected readonly rows = computed(() => {
    if (this.problems.hasValue()) this.kept = this.problems.value().items;
    return this.kept.map((problem) => ({
      ...problem,
      facts: `${String(problem.parts)} ${problem.parts === 1 ? 'part' : 'parts'}, ${typeNumber(problem.marks)} ${problem.marks === 1 ? 'mark' : 'marks'}`,
      revision: problem.latestRevision
        ? `revision ${String(problem.latestRevision.number)}${problem.changed ? ', changed since' : ''}`
        : 'no revision yet',
      saved: momentOf(problem.savedAt, this.session.course()?.timeZone ?? 'UTC'),
    }));
  });
  protected readonly pages = computed(() => {
    const total = this.problems.hasValue() ? this.problems.value().total : 0;
    return Math.max(1, Math.ceil(total / problemPageSize));
  });
  protected readonly error = computed(() => {
    const error = this.problems.error();
    const cause = error?.cause instanceof RequestFailure ? error.cause : error;
    return cause
      ? { text: sentenceOf(cause), id: cause instanceof RequestFailure ? cause.details.requestId : undefined }
      : null;
  });

  constructor() {
    toObservable(this.typed)
      .pipe(skip(1), debounceTime(250), takeUntilDestroyed())
      .subscribe((typed) => {
        const search = typed?.trim() ?? '';
        this.show({ search: search === '' ? null : search, page: null });
      });
  }

  /** Puts the filter into the address, from where it is read. */
  protected show(filter: { search?: string | null; status?: ProblemStatus | null; page?: number | null }): void {
    void this.router.navigate([], { queryParams: filter, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected clear(): void {
    this.typed.set(null);
    this.show({ search: null, status: null, page: null });
  }

  protected begin(): void {
    this.isBeginning.set(true);
    setTimeout(() => this.titleBox()?.nativeElement.focus());
  }

  protected async beginProblem(event: Event, title: string): Promise<void> {
    event.preventDefault();
    this.titleFault.set(title.trim() === '' ? 'Give the problem a title; it can be changed later.' : '');
    if (this.titleFault()) return;
    await this.attempt(async () => {
      const begun = await firstValueFrom(this.api.beginProblem(this.courseId(), title.trim()));
      await this.router.navigate(['/courses', this.courseId(), 'problems', begun.id]);
    });
  }

  protected async importFile(box: HTMLInputElement): Promise<void> {
    const file = box.files?.[0];
    box.value = '';
    if (!file) return;
    await this.attempt(async () => {
      const begun = await firstValueFrom(this.api.importProblem(await file.text()));
      await this.router.navigate(['/courses', this.courseId(), 'problems', begun.id]);
    });
  }

  private async attempt(deed: () => Promise<void>): Promise<void> {
    this.failure.set('');
    this.isBusy.set(true);
    try {
      await deed();
    } catch (error) {
      const ofTitle = error instanceof RequestFailure ? error.messageFor('title') : null;
      this.titleFault.set(ofTitle ?? '');
      if (!ofTitle)
        this.failure.set((error instanceof RequestFailure ? error.messageFor('text') : null) ?? sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
