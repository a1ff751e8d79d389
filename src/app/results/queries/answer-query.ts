import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  inject,
  input,
  linkedSignal,
  output,
  signal,
} from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { firstValueFrom } from 'rxjs';
import { newQueryAnswer, query as querySchema, type Query } from '@shared/queries';
import { newIdempotencyKey } from '../../core/api/api-client';
import { QueriesApi } from '../../core/api/queries-api';
import { RequestFailure } from '../../core/api/request-failure';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { CriterionToggle } from '../../ui/criterion-toggle/criterion-toggle';
import { FormulaText } from '../../ui/formula-text/formula-text';

/** The answer to a query: the criteria as they are to stand, and the words that the student reads. */
@Component({
  selector: 'app-answer-query',
  imports: [CriterionToggle, FormulaText, MatButtonModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule],
  templateUrl: './answer-query.html',
  styleUrl: './answer-query.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AnswerQuery {
  private readonly api = inject(QueriesApi);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly query = input.required<Query>();
  /** What the student was told. */
  readonly policy = input.required<string>();
  readonly answered = output<Query>();

  protected readonly messageOf = messageOf;
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly form = new FormGroup({
    words: new FormControl('', { nonNullable: true, validators: checkedBy(newQueryAnswer.shape.words) }),
  });
  private readonly before = computed(() => {
    const standing = this.query().marks.find(({ stands }) => stands);
    return new Set(standing?.criteria.filter(({ awarded }) => awarded).map(({ criterionId }) => criterionId));
  });
  protected readonly awarded = linkedSignal<ReadonlySet<string>>(() => this.before());
  protected readonly isChanged = computed(() =>
    this.query().criteria.some(({ id }) => this.awarded().has(id) !== this.before().has(id)),
  );
  protected readonly totals = computed(() => ({
    before: this.totalOf(this.before()),
    after: this.totalOf(this.awarded()),
  }));
  /** A mark that would fall where the student was told that it cannot. */
  protected readonly fallsShort = computed(
    () => this.query().policy === 'only raise' && this.totals().after < this.totals().before,
  );
  private readonly key = newIdempotencyKey();

  protected award(id: string, isAwarded: boolean): void {
    const next = new Set(this.awarded());
    if (isAwarded) next.add(id);
    else next.delete(id);
    this.awarded.set(next);
  }

  protected async send(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    if (this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    const { id: queryId, version, criteria } = this.query();
    const changed = criteria.map(({ id }) => ({ criterionId: id, awarded: this.awarded().has(id) }));
    const { words } = this.form.getRawValue();
    try {
      const sent = { queryId, version, criteria: this.isChanged() ? changed : null, words, idempotencyKey: this.key };
      this.answered.emit(await firstValueFrom(this.api.answerQuery(sent)));
    } catch (error) {
      if (error instanceof RequestFailure && error.details.status === 412)
        this.answered.emit(querySchema.parse(error.details.current));
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }

  private totalOf(awarded: ReadonlySet<string>): number {
    const total = this.query()
      .criteria.filter(({ id }) => awarded.has(id))
      .reduce((sum, { marks }) => sum + marks, 0);
    return Math.round(total * 1e6) / 1e6;
  }
}
