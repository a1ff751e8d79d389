import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatPaginatorModule } from '@angular/material/paginator';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom, type Subscription } from 'rxjs';
import {
  changesPageSize,
  correction as correctionSchema,
  type Correction,
  type CorrectionChange,
  type CorrectionDeed,
  type CorrectionStep,
} from '@shared/corrections';
import { hasEnded, type Job } from '@shared/jobs';
import { momentOf } from '@shared/times';
import { address } from '../../core/address';
import { CorrectionsApi } from '../../core/api/corrections-api';
import { JobsApi } from '../../core/api/jobs-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { JobWatch } from '../../core/job-watch';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { JobProgress } from '../../ui/job-progress/job-progress';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { amendmentsOf } from './amendment';

const deedWords: Readonly<Record<CorrectionDeed, string>> = {
  'mark replaced': 'the mark of the check is replaced',
  'mark given': 'the check gives the mark',
  'returned to the pile': 'goes back to the pile',
  'another look': 'the mark stands, and is to be looked at again',
  'check alone': 'no mark changes',
};

/** A correction: what it amends, whose marks it changes, its confirmation, and how far it is. */
@Component({
  selector: 'app-correction-view',
  imports: [ErrorState, JobProgress, LoadingBars, MatButtonModule, MatPaginatorModule, RouterLink],
  templateUrl: './correction-view.html',
  styleUrl: './correction-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class CorrectionView {
  private readonly api = inject(CorrectionsApi);
  private readonly jobs = inject(JobsApi);
  private readonly watch = inject(JobWatch);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly pageTitle = inject(PageTitle);
  private following: Subscription | undefined;

  readonly courseId = input.required<string>();
  readonly correctionId = input.required<string>();
  readonly page = input(1, { transform: address.page });

  protected readonly pageSize = changesPageSize;
  private readonly state = signal<Correction | null>(null);
  protected readonly correction = this.state.asReadonly();
  protected readonly job = signal<Job | null>(null);
  protected readonly problem = signal('');
  protected readonly refusal = signal('');
  protected readonly busy = signal(false);

  protected readonly amendments = computed(() => {
    const its = this.correction();
    return its ? amendmentsOf(its.before, its.after) : [];
  });
  protected readonly isRunning = computed(() => {
    const job = this.job();
    return job !== null && !hasEnded(job);
  });
  protected readonly runningWords = computed(() =>
    this.correction()?.state === 'confirmed' ? 'Making the correction' : 'Looking what would change',
  );
  protected readonly changes = rxResource({
    params: () => {
      const its = this.correction();
      // Fetched anew when the correction has gone on.
      return its?.counts ? { id: its.id, page: this.page(), version: its.version } : undefined;
    },
    stream: ({ params }) => this.api.changes(params.id, params.page),
  });
  protected readonly summary = computed(() => {
    const counts = this.correction()?.counts;
    if (!counts) return [];
    const isMade = this.correction()?.state === 'made';
    const lines: readonly (readonly [number, string])[] = [
      [counts.replaced, isMade ? 'marks of the check were replaced' : 'marks of the check are replaced'],
      [counts.given, isMade ? 'answers got their mark from the check' : 'answers get their mark from the check'],
      [counts.returned, isMade ? 'answers went back to the pile' : 'answers go back to the pile'],
      [counts.look, 'marks of persons stand, to be looked at again'],
      [counts.alone, 'answers are checked otherwise, and no mark changes'],
    ];
    return lines.filter(([count]) => count > 0).map(([count, words]) => ({ count, words }));
  });

  constructor() {
    effect(() => {
      const id = this.correctionId();
      untracked(() => void this.load(id));
    });
    inject(DestroyRef).onDestroy(() => this.following?.unsubscribe());
  }

  protected async load(id: string): Promise<void> {
    this.problem.set('');
    try {
      this.take(await firstValueFrom(this.api.correction(id)));
    } catch (error) {
      this.problem.set(sentenceOf(error));
    }
  }

  private take(its: Correction): void {
    this.state.set(its);
    this.pageTitle.set(`Correction of ${its.place}`);
    this.following?.unsubscribe();
    this.job.set(its.job);
    if (!its.job || hasEnded(its.job)) return;
    this.following = this.watch.follow(its.job).subscribe((next) => {
      this.job.set(next);
      if (hasEnded(next)) void this.load(its.id);
    });
  }

  protected confirm(its: Correction): Promise<void> {
    return this.act(() => firstValueFrom(this.api.confirm(its.id, its.version)));
  }

  protected withdraw(its: Correction): Promise<void> {
    return this.act(() => firstValueFrom(this.api.withdraw(its.id, its.version)));
  }

  protected async cancel(job: Job): Promise<void> {
    this.job.set(await firstValueFrom(this.jobs.cancelJob(job.id)));
  }

  protected async letStand(its: Correction, change: CorrectionChange): Promise<void> {
    this.refusal.set('');
    try {
      await firstValueFrom(this.api.markStands(its.id, change.answerId));
    } catch (error) {
      this.refusal.set(sentenceOf(error));
    }
    this.changes.reload();
  }

  private async act(deed: () => Promise<Correction>): Promise<void> {
    if (this.busy()) return;
    this.busy.set(true);
    this.refusal.set('');
    try {
      this.take(await deed());
    } catch (error) {
      this.refusal.set(sentenceOf(error));
      const current = error instanceof RequestFailure ? correctionSchema.safeParse(error.details.current) : null;
      if (current?.success) this.take(current.data);
    } finally {
      this.busy.set(false);
    }
  }

  protected goTo(page: number): void {
    void this.router.navigate([], { queryParams: { page }, queryParamsHandling: 'merge' });
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected deedOf(change: CorrectionChange): string {
    return deedWords[change.deed];
  }

  protected verdictOf({ verdict, relation }: CorrectionStep): string {
    return `${verdict ?? 'not checked'}${relation ? `, ${relation.replace(/^slip: /, '')}` : ''}`;
  }

  protected totalOf({ total }: CorrectionStep): string {
    return total === null ? 'none yet' : String(total);
  }
}
