import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  effect,
  inject,
  input,
  output,
  signal,
} from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { firstValueFrom } from 'rxjs';
import { newQuery, type OwnQueries, type OwnQuery } from '@shared/queries';
import { queryPolicyWords } from '@shared/query-policy';
import { momentOf } from '@shared/times';
import { newIdempotencyKey } from '../../core/api/api-client';
import { QueriesApi } from '../../core/api/queries-api';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Session } from '../../core/session';

/** What a student queries: a criterion of a part. */
export interface QueriedMark {
  readonly position: number;
  readonly partId: string;
  readonly partLabel: string;
  readonly criterionId: string;
  readonly criterionName: string;
}

/** A student's queries on one part with what became of them, and the form while they ask one. */
@Component({
  selector: 'app-part-queries',
  imports: [MatButtonModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule],
  templateUrl: './part-queries.html',
  styleUrl: './part-queries.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PartQueries {
  private readonly api = inject(QueriesApi);
  private readonly session = inject(Session);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly setId = input.required<string>();
  readonly terms = input.required<OwnQueries>();
  /** Those on this part. */
  readonly queries = input.required<readonly OwnQuery[]>();
  /** What is being queried; null while nothing is. */
  readonly asking = input<QueriedMark | null>(null);
  /** A query was sent: how all of them are now. */
  readonly sent = output<OwnQueries>();
  readonly left = output();

  protected readonly messageOf = messageOf;
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly form = new FormGroup({
    reason: new FormControl('', {
      nonNullable: true,
      validators: checkedBy(newQuery.shape.reason),
      updateOn: 'change',
    }),
  });
  protected readonly policy = computed(() => queryPolicyWords[this.terms().policy]);
  /** A query that is sent again after a lost answer is the same one. */
  private key = newIdempotencyKey();

  constructor() {
    effect(() => {
      if (!this.asking()) return;
      this.form.reset();
      this.failure.set('');
      this.key = newIdempotencyKey();
      queueMicrotask(() => setTimeout(() => this.host.nativeElement.querySelector('textarea')?.focus()));
    });
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected marksOf({ outcome }: OwnQuery): string {
    if (!outcome) return '';
    const { before, after } = outcome;
    return before === after
      ? `The mark, ${String(after)}, stands.`
      : `The mark went from ${String(before)} to ${String(after)}.`;
  }

  protected async send({ position, partId, criterionId }: QueriedMark): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    if (this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    const body = { position, partId, criterionId, reason: this.form.getRawValue().reason };
    try {
      this.sent.emit(await firstValueFrom(this.api.askQuery(this.setId(), body, this.key)));
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }
}
