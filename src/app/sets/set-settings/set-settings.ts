import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  effect,
  inject,
  input,
  linkedSignal,
  signal,
} from '@angular/core';
import { rxResource, toObservable, toSignal } from '@angular/core/rxjs-interop';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatCheckboxModule } from '@angular/material/checkbox';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatRadioModule } from '@angular/material/radio';
import { MatSelectModule } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom, map, of, startWith, switchMap } from 'rxjs';
import { type SetDetail, isBeforeOpening, setDetail } from '@shared/sets';
import { instantAt, spanOf, zoneOf } from '@shared/times';
import { SetsApi } from '../../core/api/sets-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Now } from '../../core/now';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { type Chosen, ChosenProblems } from '../chosen-problems/chosen-problems';
import { fieldsOf, setForm } from './set-form';

/** A set's title, times, rules and problems: of a new set, or of one that is there. */
@Component({
  selector: 'app-set-settings',
  imports: [
    ChosenProblems,
    ErrorState,
    FormulaText,
    LoadingBars,
    MatButtonModule,
    MatCheckboxModule,
    MatFormFieldModule,
    MatInputModule,
    MatRadioModule,
    MatSelectModule,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './set-settings.html',
  styleUrl: './set-settings.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SetSettings {
  private readonly api = inject(SetsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly router = inject(Router);
  private readonly pageTitle = inject(PageTitle);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly courseId = input.required<string>();
  /** Absent for a new set. */
  readonly setId = input<string>();

  protected readonly messageOf = messageOf;
  protected readonly fetched = rxResource({
    params: () => ({ setId: this.setId() }),
    stream: ({ params: { setId } }) => (setId === undefined ? of(null) : this.api.set(setId)),
  });
  protected readonly problem = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly set = linkedSignal<SetDetail | null>(() =>
    this.fetched.hasValue() ? this.fetched.value() : null,
  );
  protected readonly isReady = computed(() => this.fetched.hasValue());
  protected readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly zoneName = computed(() => `${this.zone()}, ${zoneOf(this.clock.now(), this.zone())} now`);
  protected readonly form = computed(() => setForm(this.set(), this.zone()));
  protected readonly chosen = linkedSignal<readonly Chosen[]>(() => this.set()?.problems ?? []);
  protected readonly isFrozen = computed(() => !isBeforeOpening(this.set()?.stage ?? 'draft'));
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly messages = signal<ReadonlyMap<number, string>>(new Map());
  /** What a colleague made of the set meanwhile. */
  protected readonly theirs = signal<SetDetail | null>(null);

  private readonly typed = toSignal(
    toObservable(this.form).pipe(
      switchMap((form) =>
        form.valueChanges.pipe(
          startWith(null),
          map(() => form.getRawValue()),
        ),
      ),
    ),
  );
  protected readonly coverText = computed(() => this.typed()?.coverText ?? '');
  protected readonly takesLate = computed(() => this.typed()?.lateRule.taken ?? false);
  protected readonly lateIn = computed(() => this.spanTo(this.typed()?.lateRule.until, 'the last comes'));
  protected readonly opensIn = computed(() => this.spanTo(this.typed()?.opensAt, 'opens'));
  protected readonly closesIn = computed(() => this.spanTo(this.typed()?.closesAt, 'closes'));

  constructor() {
    effect(() => {
      const set = this.set();
      this.pageTitle.set(set ? `Settings of Set ${String(set.number)}` : 'New set');
    });
  }

  protected save(): Promise<void> {
    return this.saveOver(this.set()?.version ?? 0);
  }

  protected takeTheirs(set: SetDetail): void {
    this.theirs.set(null);
    this.set.set(set);
  }

  protected keepMine(set: SetDetail): Promise<void> {
    this.theirs.set(null);
    return this.saveOver(set.version);
  }

  private async saveOver(version: number): Promise<void> {
    const form = this.form();
    if (form.invalid) {
      showWhatIsMissing(form, this.host.nativeElement);
      return;
    }
    if (this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    this.messages.set(new Map());
    const before = this.set();
    const problems = this.chosen().map(({ problemId, revisionId }) => ({ problemId, revisionId }));
    const body = { ...fieldsOf(form, before, this.zone()), ...(this.isFrozen() ? {} : { problems }) };
    try {
      const set = await firstValueFrom(
        before ? this.api.changeSet(before.id, version, body) : this.api.createSet(this.courseId(), body),
      );
      await this.router.navigate(['/courses', this.courseId(), 'sets', set.id]);
    } catch (error) {
      this.showRefusal(error);
    } finally {
      this.busy.set(false);
    }
  }

  private showRefusal(error: unknown): void {
    if (error instanceof RequestFailure && error.details.status === 412) {
      this.theirs.set(setDetail.parse(error.details.current));
      return;
    }
    if (error instanceof RequestFailure) {
      const own = (error.details.fields ?? []).filter((field) => field.path[0] === 'problems');
      this.messages.set(new Map(own.map((field) => [Number(field.path[1] ?? 0), field.message])));
    }
    this.failure.set(showFailure(this.form(), error));
  }

  private spanTo(text: string | undefined, word: string): string {
    if (!text) return '';
    const left = instantAt(text, this.zone()) - this.clock.now();
    if (Number.isNaN(left)) return '';
    return left > 0 ? `${word} in ${spanOf(left)}` : `${spanOf(left)} ago`;
  }
}
