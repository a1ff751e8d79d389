import { ChangeDetectionStrategy, Component, ElementRef, computed, effect, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { NonNullableFormBuilder, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { isComputed } from '@shared/answer-forms';
import type { CorrectablePart } from '@shared/corrections';
import { momentOf } from '@shared/times';
import { newIdempotencyKey } from '../../core/api/api-client';
import { CorrectionsApi } from '../../core/api/corrections-api';
import { sentenceOf } from '../../core/api/request-failure';
import { messageOf, showFailure } from '../../core/field-messages';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import {
  amendedAnswer,
  correctionForm,
  slipForm,
  toleranceNames,
  toleranceWords,
  type CorrectionForm,
} from './correction-fields';

/** Where a lead amends key, tolerance or slips of a part that was answered. Nothing changes before the next page. */
@Component({
  selector: 'app-propose-correction',
  imports: [
    ErrorState,
    FormulaText,
    LoadingBars,
    MatButtonModule,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './propose-correction.html',
  styleUrl: './correction-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ProposeCorrection {
  private readonly api = inject(CorrectionsApi);
  private readonly fb = inject(NonNullableFormBuilder);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly pageTitle = inject(PageTitle);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly courseId = input.required<string>();
  readonly pileId = input.required<string>();
  /** The pattern that is to become a slip, in the address. */
  readonly pattern = input<string>();

  protected readonly fetched = rxResource({
    params: () => ({ pileId: this.pileId(), pattern: this.pattern() }),
    stream: ({ params }) => this.api.correctablePart(params.pileId, params.pattern),
  });
  protected readonly part = computed(() => (this.fetched.hasValue() ? this.fetched.value() : null));
  protected readonly problem = computed(() => (this.fetched.error() ? sentenceOf(this.fetched.error()) : null));
  protected readonly form = computed<CorrectionForm | null>(() => {
    const part = this.part();
    return part && this.formFor(part);
  });
  protected readonly isComputed = computed(() => isComputed(this.part()?.answer ?? { form: 'worked' }));
  protected readonly tolerances = computed(() =>
    toleranceNames(this.part()?.answer ?? { form: 'worked' }).map((name) => ({ name, words: toleranceWords[name] })),
  );
  protected readonly refusal = signal('');
  protected readonly busy = signal(false);
  protected readonly messageOf = messageOf;

  /** Made once for what is typed: sending it twice proposes it once. */
  private key = newIdempotencyKey();

  constructor() {
    effect(() => {
      const part = this.part();
      if (part) this.pageTitle.set(`Correct ${part.place}`);
    });
  }

  private formFor(part: CorrectablePart): CorrectionForm {
    const form = correctionForm(this.fb, part.answer);
    if (part.slip) {
      const { name, expression } = part.slip;
      form.controls.answer.controls.slips.push(slipForm(this.fb, { name, expression, fraction: 0 }));
    }
    return form;
  }

  protected addSlip(form: CorrectionForm): void {
    form.controls.answer.controls.slips.push(slipForm(this.fb));
  }

  protected removeSlip(form: CorrectionForm, index: number): void {
    form.controls.answer.controls.slips.removeAt(index);
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected async propose(part: CorrectablePart, form: CorrectionForm): Promise<void> {
    if (this.busy()) return;
    this.busy.set(true);
    this.refusal.set('');
    const { reason, note } = form.getRawValue();
    try {
      const answer = amendedAnswer(part.answer, form);
      const made = await firstValueFrom(this.api.propose(part.pileId, this.key, { answer, reason, note }));
      await this.router.navigate(['/courses', this.courseId(), 'marking', 'corrections', made.id]);
    } catch (error) {
      this.key = newIdempotencyKey();
      this.refusal.set(showFailure(form, error));
      queueMicrotask(() =>
        this.host.nativeElement.querySelector<HTMLElement>('input.ng-invalid, textarea.ng-invalid')?.focus(),
      );
    } finally {
      this.busy.set(false);
    }
  }
}
