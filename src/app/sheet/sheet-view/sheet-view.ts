import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  ElementRef,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatMenuModule } from '@angular/material/menu';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import type { Sheet } from '@shared/scripts';
import { fullMomentOf, momentOf, secondOf, spanOf } from '@shared/times';
import { newIdempotencyKey } from '../../core/api/api-client';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { ScriptsApi } from '../../core/api/scripts-api';
import { Now } from '../../core/now';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { CountsTable } from '../../ui/counts-table/counts-table';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { Typesetter } from '../../ui/formula-text/typesetter';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { conventionInWords } from '../convention-words';
import { KeptCopies } from '../kept-copies';
import { type PartInHand, SheetKeeper } from '../sheet-keeper';
import { SheetPart } from '../sheet-part/sheet-part';

const hour = 60 * 60_000;

/** A student's sheet: one column of paper, kept as it is typed, until it closes. */
@Component({
  selector: 'app-sheet-view',
  imports: [
    CountsTable,
    ErrorState,
    FormulaText,
    LoadingBars,
    MatButtonModule,
    MatIconModule,
    MatMenuModule,
    RouterLink,
    SheetPart,
  ],
  templateUrl: './sheet-view.html',
  styleUrl: './sheet-view.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: {
    '(window:pagehide)': 'leave()',
    '(document:visibilitychange)': 'leaveIfHidden()',
    '(window:online)': 'tryNow()',
    '(window:beforeunload)': 'warn($event)',
  },
})
export default class SheetView {
  private readonly api = inject(ScriptsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly router = inject(Router);
  private readonly pageTitle = inject(PageTitle);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  protected readonly typesetter = inject(Typesetter);

  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();

  protected readonly conventionInWords = conventionInWords;
  protected readonly fetched = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.sheet(params),
  });
  protected readonly problem = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly sheet = signal<Sheet | null>(null);
  protected readonly keeper = signal<SheetKeeper | null>(null);
  /** How far this machine's clock is behind the server's. */
  private readonly behind = signal(0);
  protected readonly reviewing = signal(false);
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  private submissionKey = newIdempotencyKey();

  private readonly now = computed(() => this.clock.now() + this.behind());
  protected readonly isOpen = computed(() => this.sheet()?.state === 'open');
  protected readonly zone = computed(() => this.sheet()?.timeZone ?? 'UTC');
  /** Whether the closing time is over, and late work is taken. */
  protected readonly isLate = computed(() => {
    const its = this.sheet();
    return its?.state === 'open' && its.late !== null && its.closesAt !== null && its.closesAt <= this.now();
  });
  /** The closing time, or once that is over the last time for late work. */
  private readonly endsAt = computed(
    () => (this.isLate() ? this.sheet()?.late?.until : this.sheet()?.closesAt) ?? null,
  );
  protected readonly left = computed(() => (this.endsAt() ?? 0) - this.now());
  protected readonly isSoon = computed(() => this.left() < 3 * hour);
  protected readonly timeLeft = computed(() => (this.left() > 0 ? `in ${spanOf(this.left())}` : 'now'));
  protected readonly closing = computed(() => {
    const at = this.endsAt();
    return at === null ? '' : momentOf(at, this.zone());
  });
  protected readonly lateUntil = computed(() => {
    const late = this.sheet()?.late;
    return late ? momentOf(late.until, this.zone()) : '';
  });
  protected readonly othersClose = computed(() => {
    const at = this.sheet()?.allowance?.othersCloseAt;
    return at == null ? '' : momentOf(at, this.zone());
  });
  protected readonly ownClosing = computed(() => {
    const at = this.sheet()?.allowance?.closesAt;
    return at == null ? '' : momentOf(at, this.zone());
  });
  protected readonly closedOn = computed(() => {
    const at = this.sheet()?.closesAt;
    return at == null ? '' : fullMomentOf(at, this.zone());
  });
  protected readonly lastKept = computed(() => {
    const at = this.keeper()?.lastSavedAt();
    return at == null ? '' : secondOf(at, this.zone());
  });
  protected readonly submittedAt = computed(() => {
    const at = this.sheet()?.submission?.at;
    return at === undefined ? '' : fullMomentOf(at, this.zone());
  });
  /** What the bar says of asking and empty parts. */
  protected readonly gaps = computed(() => {
    const keeper = this.keeper();
    if (!keeper) return '';
    const asks = keeper.asking() > 0 ? [`${String(keeper.asking())} ${keeper.asking() === 1 ? 'asks' : 'ask'}`] : [];
    const empty = keeper.missing() > 0 ? [`${String(keeper.missing())} empty`] : [];
    return [...asks, ...empty].join(', ');
  });

  constructor() {
    // At the same time as the sheet itself; the paper is shown once both are there, and then stands still.
    this.typesetter.load();
    effect(() => {
      const sheet = this.fetched.hasValue() ? this.fetched.value() : null;
      if (sheet)
        untracked(() => {
          this.takeSheet(sheet);
        });
    });
    effect(() => {
      // The page notices the closing time by itself; the last letters are on their way before it.
      if (this.isOpen() && this.endsAt() !== null && this.left() <= 0)
        untracked(() => {
          this.fetched.reload();
        });
    });
    inject(DestroyRef).onDestroy(() => {
      void this.keeper()?.flush();
      this.keeper()?.stop();
    });
  }

  private takeSheet(sheet: Sheet): void {
    const before = this.sheet();
    this.behind.set(sheet.now - Date.now());
    this.sheet.set(sheet);
    this.pageTitle.set(`Set ${String(sheet.number)}, ${sheet.title}`);
    if (before?.setId === sheet.setId && before.state === sheet.state && this.keeper()) return;
    this.keeper()?.stop();
    const membershipId = this.session.courseOf(this.courseId())?.membershipId ?? '';
    this.keeper.set(
      new SheetKeeper(sheet, {
        copies: new KeptCopies(membershipId, sheet.setId),
        save: (save) => this.api.saveAnswer(save),
        saveInPassing: (save) => {
          this.api.saveInPassing(save);
        },
        closed: () => {
          this.fetched.reload();
        },
      }),
    );
  }

  protected leave(): void {
    this.keeper()?.leave();
  }

  protected leaveIfHidden(): void {
    if (document.visibilityState === 'hidden') void this.keeper()?.flush();
  }

  protected tryNow(): void {
    this.keeper()?.tryNow();
  }

  /** Asks before the page goes only where the browser's copy might not be found again. */
  protected warn(event: BeforeUnloadEvent): void {
    if (this.keeper()?.isOffline()) event.preventDefault();
  }

  protected goTo(part: PartInHand): void {
    const place = this.host.nativeElement.querySelector<HTMLElement>(`#${part.anchor}`);
    place?.scrollIntoView({ block: 'start', behavior: 'smooth' });
    const field = place?.querySelector<HTMLElement>('input, textarea') ?? place;
    field?.focus({ preventScroll: true });
  }

  /** Shows what is missing, or hands in at once where nothing is. */
  protected async review(keeper: SheetKeeper): Promise<void> {
    this.failure.set('');
    if (keeper.open().length === 0 && keeper.clashes().length === 0) {
      await this.handIn(keeper);
      return;
    }
    this.reviewing.set(true);
    setTimeout(() => {
      const heading = this.host.nativeElement.querySelector<HTMLElement>('#before-handing-in');
      heading?.scrollIntoView({ block: 'center' });
      heading?.focus({ preventScroll: true });
    });
  }

  protected async handIn(keeper: SheetKeeper): Promise<void> {
    if (this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    try {
      await keeper.flush();
      if (!keeper.isAllKept()) {
        this.failure.set(
          keeper.clashes().length > 0
            ? 'An answer was changed in another window too. Choose which one goes on, then hand in.'
            : 'Not everything has reached the server yet, so nothing was handed in. It is kept in this browser and sent as soon as there is a connection; then hand in.',
        );
        return;
      }
      await firstValueFrom(this.api.submitSheet(this.setId(), this.submissionKey));
      await this.router.navigate(['/courses', this.courseId(), 'sheets', this.setId(), 'receipt']);
    } catch (error) {
      this.failure.set(sentenceOf(error));
      // A refusal is final for this act; without an answer the same act is tried again.
      if (error instanceof RequestFailure && error.details.status >= 400 && error.details.status < 500) {
        this.submissionKey = newIdempotencyKey();
        if (error.details.status === 409) this.fetched.reload();
      }
    } finally {
      this.busy.set(false);
    }
  }
}
