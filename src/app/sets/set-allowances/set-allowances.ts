import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  inject,
  input,
  linkedSignal,
  signal,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatAutocompleteModule } from '@angular/material/autocomplete';
import { MatButtonModule } from '@angular/material/button';
import { MatCheckboxModule } from '@angular/material/checkbox';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { firstValueFrom } from 'rxjs';
import { type Allowance, allowanceFields } from '@shared/allowances';
import type { SetDetail, StudentProgress } from '@shared/sets';
import { fullMomentOf, instantAt, wallClockOf, zoneOf } from '@shared/times';
import { AllowancesApi } from '../../core/api/allowances-api';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Now } from '../../core/now';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** A student as the field names them: chosen from the list, or what is typed so far. */
type Named = Pick<StudentProgress, 'membershipId' | 'name'>;

/** Who has more time than the others, and a form to give it. */
@Component({
  selector: 'app-set-allowances',
  imports: [
    ErrorState,
    LoadingBars,
    MatAutocompleteModule,
    MatButtonModule,
    MatCheckboxModule,
    MatFormFieldModule,
    MatInputModule,
    ReactiveFormsModule,
  ],
  templateUrl: './set-allowances.html',
  styleUrl: './set-allowances.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SetAllowances {
  private readonly api = inject(AllowancesApi);
  private readonly sets = inject(SetsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly set = input.required<SetDetail>();

  protected readonly messageOf = messageOf;
  protected readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly zoneName = computed(() => `${this.zone()}, ${zoneOf(this.clock.now(), this.zone())} now`);
  private readonly setId = computed(() => this.set().id);
  protected readonly fetched = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.allowances(params),
  });
  protected readonly problem = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly rows = linkedSignal<readonly Allowance[]>(() =>
    this.fetched.hasValue() ? this.fetched.value().items : [],
  );
  protected readonly shown = computed(() =>
    this.rows().map((each) => ({
      ...each,
      until: each.closesAt === null ? 'with the others' : fullMomentOf(each.closesAt, this.zone()),
      given: `${each.givenBy}, ${fullMomentOf(each.givenAt, this.zone())}`,
      isUsed: this.isClosed() && each.closesAt !== null && !each.isOpen,
    })),
  );
  protected readonly isClosed = computed(() => ['closed', 'marking', 'moderation'].includes(this.set().stage));
  protected readonly isOver = computed(() => ['released', 'archived'].includes(this.set().stage));

  protected readonly search = signal('');
  protected readonly found = rxResource({
    params: () => ({ setId: this.setId(), search: this.search() }),
    stream: ({ params: { setId, search } }) => this.sets.progress(setId, { search, page: 1 }),
  });
  protected readonly students = computed<readonly Named[]>(() =>
    this.found.hasValue() ? this.found.value().items.slice(0, 12) : [],
  );

  protected readonly form = new FormGroup({
    membershipId: new FormControl<Named | string>('', {
      nonNullable: true,
      validators: ({ value }) => (typeof value === 'string' ? { message: 'Choose a student from the list.' } : null),
    }),
    closesAt: new FormControl('', { nonNullable: true }),
    waivesLateRule: new FormControl(false, { nonNullable: true }),
    reason: new FormControl('', {
      nonNullable: true,
      validators: checkedBy(allowanceFields.shape.reason),
      updateOn: 'blur',
    }),
  });
  protected readonly isGiving = signal(false);
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  /** What was done last, with the way back. */
  protected readonly done = signal<{ text: string; undo?: () => Promise<void> } | null>(null);

  protected readonly nameOf = (student: Named | string | null): string =>
    student === null ? '' : typeof student === 'string' ? student : student.name;

  protected lookFor(text: string): void {
    this.search.set(text.trim());
  }

  protected begin(allowance?: Allowance): void {
    const { closesAt } = this.set();
    const from = allowance?.closesAt ?? closesAt;
    this.form.reset({
      membershipId: allowance ? { membershipId: allowance.membershipId, name: allowance.name } : '',
      closesAt: from === null ? '' : wallClockOf(from, this.zone()),
      waivesLateRule: allowance?.waivesLateRule ?? false,
      reason: allowance?.reason ?? '',
    });
    this.failure.set('');
    this.done.set(null);
    this.isGiving.set(true);
    setTimeout(() => this.host.nativeElement.querySelector<HTMLElement>('form input')?.focus());
  }

  protected async give(): Promise<void> {
    const { membershipId: student, closesAt: text, waivesLateRule, reason } = this.form.getRawValue();
    if (this.form.invalid || typeof student === 'string') {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    if (this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    const before = this.rows().find((each) => each.membershipId === student.membershipId);
    // The others' time, left as it is, says: with the others.
    const isTheirs = this.set().closesAt !== null && text === wallClockOf(this.set().closesAt ?? 0, this.zone());
    const closesAt = text === '' || (isTheirs && waivesLateRule) ? null : instantAt(text, this.zone());
    try {
      const body = { membershipId: student.membershipId, closesAt, waivesLateRule, reason };
      const given = await firstValueFrom(this.api.give(this.setId(), body));
      this.isGiving.set(false);
      this.say(`${given.name} has an allowance now, and a letter says so.`, () => this.goBack(given, before));
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }

  protected async withdraw(allowance: Allowance): Promise<void> {
    await this.attempt(async () => {
      await firstValueFrom(this.api.withdraw(allowance.id));
      const isFinal = allowance.closesAt !== null && allowance.closesAt <= Date.now();
      this.say(
        `The allowance of ${allowance.name} is withdrawn.`,
        isFinal ? undefined : () => this.giveAgain(allowance),
      );
    });
  }

  private async goBack(given: Allowance, before: Allowance | undefined): Promise<void> {
    if (before) return this.giveAgain(before);
    await this.attempt(async () => {
      await firstValueFrom(this.api.withdraw(given.id));
      this.say(`${given.name} has no allowance any more.`);
    });
  }

  private async giveAgain({ membershipId, name, closesAt, waivesLateRule, reason }: Allowance): Promise<void> {
    await this.attempt(async () => {
      await firstValueFrom(this.api.give(this.setId(), { membershipId, closesAt, waivesLateRule, reason }));
      this.say(`${name} has the allowance again.`);
    });
  }

  private say(text: string, undo?: () => Promise<void>): void {
    this.done.set(undo ? { text, undo } : { text });
    this.fetched.reload();
  }

  private async attempt(act: () => Promise<void>): Promise<void> {
    this.failure.set('');
    try {
      await act();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }
}
