import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  computed,
  effect,
  inject,
  input,
  linkedSignal,
} from '@angular/core';
import { rxResource, takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { Router, RouterLink } from '@angular/router';
import { type SetStage, setStage } from '@shared/primitives';
import { isBeforeOpening, type SetDetail, type StudentProgress } from '@shared/sets';
import { fullMomentOf, spanOf } from '@shared/times';
import { address } from '../../core/address';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { LiveConnection } from '../../core/live-connection';
import { Now } from '../../core/now';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { StageLine } from '../../ui/stage-line/stage-line';
import { lateRuleInWords } from '@shared/late-rule';
import { CopySet } from '../copy-set/copy-set';
import { MoveSet } from '../move-set/move-set';
import { SetAllowances } from '../set-allowances/set-allowances';
import { marksOf, nextActOf, presentOf, progressOf } from '../set-life';
import { StudentProgressTable } from '../student-progress/student-progress';

/** A set: where it is in its life, what is next, what it asks, and how far the students are. */
@Component({
  selector: 'app-set-page',
  imports: [
    CopySet,
    SetAllowances,
    EmptyState,
    ErrorState,
    LoadingBars,
    MatButtonModule,
    MoveSet,
    RouterLink,
    StageLine,
    StudentProgressTable,
  ],
  templateUrl: './set-page.html',
  styleUrl: './set-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SetPage {
  private readonly api = inject(SetsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly live = inject(LiveConnection);
  private readonly pageTitle = inject(PageTitle);
  private readonly router = inject(Router);

  /** From the address: course and set, the stage that is looked at, and the filters of the students. */
  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();
  readonly move = input<string>();
  /** Whether a copy is being thought of. */
  readonly copy = input<string>();
  readonly state = input<StudentProgress['state']>();
  readonly search = input('', { transform: address.text });
  readonly page = input(1, { transform: address.page });

  protected readonly fetched = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.set(params),
  });
  protected readonly set = linkedSignal<SetDetail | undefined, SetDetail | null>({
    source: () => (this.fetched.hasValue() ? this.fetched.value() : undefined),
    // While it is fetched anew the page keeps what it shows.
    computation: (fetched, before) => fetched ?? before?.value ?? null,
  });
  protected readonly problem = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly summary = computed(() => {
    const set = this.set();
    return set && { ...set, problems: set.problems.length };
  });
  protected readonly marks = computed(() => {
    const set = this.summary();
    return set ? marksOf(set, this.zone()) : [];
  });
  protected readonly present = computed(() => presentOf(this.set() ?? { stage: 'draft' }));
  protected readonly progress = computed(() => {
    const set = this.summary();
    return set ? progressOf(set, this.clock.now()) : 0;
  });
  protected readonly next = computed(() => {
    const set = this.summary();
    return set && nextActOf(set);
  });
  /** The stage that the address asks to look at, where it can be moved to. */
  protected readonly target = computed<SetStage | null>(() => {
    const wanted = setStage.safeParse(this.move());
    return wanted.success && this.set()?.moves.includes(wanted.data) ? wanted.data : null;
  });
  /** Moves besides the next one. */
  protected readonly otherMoves = computed(() =>
    (this.set()?.moves ?? [])
      .filter((stage) => stage !== this.next()?.move)
      .map((stage) => ({ stage, label: moveLabels[stage] })),
  );
  protected readonly opens = computed(() => {
    const set = this.set();
    if (!set) return '';
    if (set.opensAt === null) return 'by hand';
    const left = set.opensAt - this.clock.now();
    return `${fullMomentOf(set.opensAt, this.zone())}${left > 0 && isBeforeOpening(set.stage) ? `, in ${spanOf(left)}` : ''}`;
  });
  protected readonly closes = computed(() => {
    const set = this.set();
    if (set?.closesAt == null) return 'not set yet';
    const left = set.closesAt - this.clock.now();
    return `${fullMomentOf(set.closesAt, this.zone())}${left > 0 ? `, in ${spanOf(left)}` : ''}`;
  });
  protected readonly late = computed(() => {
    const rule = this.set()?.lateRule;
    if (!rule) return 'not taken';
    return `taken until ${fullMomentOf(rule.until, this.zone())}; ${lateRuleInWords(rule)}`;
  });
  protected readonly isMarked = computed(() =>
    ['closed', 'marking', 'moderation'].includes(this.set()?.stage ?? 'draft'),
  );

  constructor() {
    effect(() => {
      const set = this.set();
      if (set) this.pageTitle.set(`Set ${String(set.number)}, ${set.title}`);
    });
    effect((onCleanup) => {
      onCleanup(this.live.watchCourse(this.courseId()));
    });
    this.live
      .of('stageChanged')
      .pipe(takeUntilDestroyed(inject(DestroyRef)))
      .subscribe(({ setId }) => {
        if (setId === this.setId()) this.fetched.reload();
      });
  }

  protected takeMoved(set: SetDetail): void {
    this.set.set(set);
    this.leaveMove();
  }

  protected leaveMove(): void {
    void this.router.navigate([], {
      queryParams: { move: null, copy: null },
      queryParamsHandling: 'merge',
      replaceUrl: true,
    });
  }
}

const moveLabels: Readonly<Record<SetStage, string>> = {
  draft: 'Back to draft',
  review: 'Move to review',
  ready: 'Make it ready',
  open: 'Open it now',
  closed: 'Close it now',
  marking: 'Back to marking',
  moderation: 'Go on to moderation',
  released: 'Release',
  archived: 'Archive it',
};
