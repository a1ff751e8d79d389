import { DestroyRef, Injectable, computed, effect, inject, signal, untracked } from '@angular/core';
import { firstValueFrom, type Subscription } from 'rxjs';
import type { AuditFinding, AuditState } from '@shared/audit';
import { hasEnded, type Job } from '@shared/jobs';
import { AuditsApi } from '../../../core/api/audits-api';
import { JobsApi } from '../../../core/api/jobs-api';
import { sentenceOf } from '../../../core/api/request-failure';
import { JobWatch } from '../../../core/job-watch';
import { OpenProblem } from '../open-problem';

/** How long saving must rest before it is asked whether what is saved was audited, in milliseconds. */
const rest = 400;

/** The key audit of the open problem, as it is saved now. */
@Injectable()
export class ProblemAudit {
  private readonly api = inject(AuditsApi);
  private readonly jobs = inject(JobsApi);
  private readonly watch = inject(JobWatch);
  private readonly open = inject(OpenProblem);
  private readonly state = signal<AuditState | null>(null);
  private readonly running = signal<Job | null>(null);
  private readonly refusal = signal('');
  private following: Subscription | undefined;
  private timer: ReturnType<typeof setTimeout> | undefined;

  /** The audit of exactly what is saved; null where there is none. */
  readonly audit = computed(() => this.state()?.audit ?? null);
  /** The job that makes one, or how the last one ended. */
  readonly job = this.running.asReadonly();
  readonly isRunning = computed(() => {
    const job = this.running();
    return job !== null && !hasEnded(job);
  });
  /** Why no audit can be begun. */
  readonly obstacle = computed(() => this.state()?.obstacle ?? '');
  /** What went wrong with the last request. */
  readonly problem = this.refusal.asReadonly();
  readonly isKnown = computed(() => this.state() !== null);

  constructor() {
    effect(() => {
      const detail = this.open.detail();
      if (!detail) return;
      clearTimeout(this.timer);
      const wait = untracked(() => this.state()) === null ? 0 : rest;
      this.timer = setTimeout(() => void this.fetch(detail.id), wait);
    });
    inject(DestroyRef).onDestroy(() => {
      clearTimeout(this.timer);
      this.following?.unsubscribe();
    });
  }

  /** What was found about a part, or with null about the whole problem; what stops use first. */
  findingsOf(part: number | null): readonly AuditFinding[] {
    return (this.audit()?.findings ?? []).filter((finding) => finding.part === part);
  }

  /** How a part stands, in two words for its tab; empty where it was not audited as it is. */
  standingOf(part: number): 'audit clean' | 'to mend' | 'to look at' | '' {
    if (!this.audit()) return '';
    const findings = this.findingsOf(part);
    if (findings.some(({ grade }) => grade === 'stops use')) return 'to mend';
    return findings.length > 0 ? 'to look at' : 'audit clean';
  }

  /** Looks again a little later: something that was asked for may begin an audit, or need one. */
  lookAgainSoon(): void {
    clearTimeout(this.timer);
    const detail = this.open.detail();
    if (detail) this.timer = setTimeout(() => void this.fetch(detail.id), rest);
  }

  /** Audits what is written, once it is saved. */
  async run(): Promise<void> {
    await this.open.keep();
    const detail = this.open.detail();
    if (detail) await this.attempt(async () => this.take(await firstValueFrom(this.api.beginAudit(detail.id))));
  }

  async cancel(): Promise<void> {
    const job = this.running();
    if (job) await this.attempt(async () => this.running.set(await firstValueFrom(this.jobs.cancelJob(job.id))));
  }

  private async fetch(problemId: string): Promise<void> {
    await this.attempt(async () => this.take(await firstValueFrom(this.api.audit(problemId))));
  }

  private take(state: AuditState): void {
    this.state.set(state);
    if (state.job?.id === this.running()?.id && this.isRunning()) return;
    this.following?.unsubscribe();
    this.running.set(state.job);
    if (state.job && !hasEnded(state.job)) this.follow(state.job);
  }

  private follow(job: Job): void {
    this.following = this.watch.follow(job).subscribe((next) => {
      this.running.set(next);
      const detail = this.open.detail();
      if (hasEnded(next) && detail) void this.fetch(detail.id);
    });
  }

  private async attempt(deed: () => Promise<void>): Promise<void> {
    try {
      await deed();
      this.refusal.set('');
    } catch (error) {
      this.refusal.set(sentenceOf(error));
    }
  }
}
