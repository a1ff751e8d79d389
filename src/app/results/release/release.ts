import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  linkedSignal,
  signal,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { setStageNames } from '@shared/primitives';
import { release as releaseSchema, type Release } from '@shared/results';
import { dayOf, fullMomentOf, spanOf } from '@shared/times';
import { ResultsApi } from '../../core/api/results-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { Now } from '../../core/now';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { StageLine, type StageMark } from '../../ui/stage-line/stage-line';
import { TotalsFigure } from './totals-figure';

/** What is to be looked at before marks go out, what students will see, and the release itself. */
@Component({
  selector: 'app-release',
  imports: [ErrorState, LoadingBars, MatButtonModule, MatIconModule, RouterLink, StageLine, TotalsFigure],
  templateUrl: './release.html',
  styleUrl: './release.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ReleasePage {
  private readonly api = inject(ResultsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly pageTitle = inject(PageTitle);

  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();

  protected readonly fetched = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.release(params),
  });
  private readonly changed = signal<Release | null>(null);
  protected readonly release = computed(() => {
    const changed = this.changed();
    if (changed?.setId === this.setId()) return changed;
    return this.fetched.hasValue() ? this.fetched.value() : null;
  });
  protected readonly problem = computed(() => (this.fetched.error() ? sentenceOf(this.fetched.error()) : null));
  protected readonly refusal = signal('');
  protected readonly busy = signal(false);
  /** The letter's own wording; null while the usual one serves. */
  protected readonly wording = linkedSignal<string, string | null>({ source: this.setId, computation: () => null });

  private readonly timeZone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly moment = computed(() => fullMomentOf(this.clock.now(), this.timeZone()));
  protected readonly releasedOn = computed(() => {
    const at = this.release()?.releasedAt;
    return at === null || at === undefined ? '' : fullMomentOf(at, this.timeZone());
  });
  protected readonly timeToTakeBack = computed(() => {
    const until = this.release()?.takeBackUntil;
    const left = until === null || until === undefined ? 0 : until - this.clock.now();
    return left > 0 ? spanOf(left) : null;
  });
  protected readonly stages = computed<readonly StageMark[]>(() => {
    const entered = this.release()?.stages ?? [];
    const now = setStageNames.indexOf(this.release()?.stage ?? 'draft');
    return setStageNames.map((name, index) => {
      const at = entered.filter((each) => each.stage === name).at(-1)?.at;
      return at !== undefined && index <= now ? { name, date: dayOf(at, this.timeZone()) } : { name };
    });
  });
  protected readonly present = computed(() => setStageNames.indexOf(this.release()?.stage ?? 'draft'));
  protected readonly students = computed(() => {
    const count = this.release()?.students ?? 0;
    return `${String(count)} ${count === 1 ? 'student' : 'students'}`;
  });
  protected readonly visible = computed(() =>
    this.release()?.showKeys
      ? 'Their marks, criterion by criterion; remarks; the key of their own variant; the slip that matches'
      : 'Their marks, criterion by criterion; remarks; the slip that matches. Keys are not shown for this set.',
  );

  constructor() {
    effect(() => {
      const release = this.release();
      if (release) this.pageTitle.set(`Release set ${String(release.number)}`);
    });
  }

  protected send(release: Release, leaveOutOpen: boolean): Promise<void> {
    return this.act(() =>
      firstValueFrom(this.api.releaseSet(release.setId, release.version, this.wording() ?? undefined, leaveOutOpen)),
    );
  }

  protected takeBack(release: Release): Promise<void> {
    return this.act(() => firstValueFrom(this.api.takeBackRelease(release.setId, release.version)));
  }

  private async act(deed: () => Promise<Release>): Promise<void> {
    if (this.busy()) return;
    this.busy.set(true);
    this.refusal.set('');
    try {
      this.changed.set(await deed());
    } catch (error) {
      this.refusal.set(sentenceOf(error));
      const current = error instanceof RequestFailure ? releaseSchema.safeParse(error.details.current) : null;
      if (current?.success) this.changed.set(current.data);
      else {
        this.changed.set(null);
        this.fetched.reload();
      }
    } finally {
      this.busy.set(false);
    }
  }
}
