import {
  ChangeDetectionStrategy,
  Component,
  PendingTasks,
  booleanAttribute,
  computed,
  effect,
  inject,
  input,
  model,
  output,
  signal,
  untracked,
} from '@angular/core';
import type { AnswerField as ReadingField, readAnswer, Reading } from '@shared/reading';
import { ReadBack } from '../read-back/read-back';

type Reader = typeof readAnswer;

/** What is printed beside a field whose answer is typed. */
export type TypedField = Exclude<ReadingField, { readonly form: 'choice' }>;

let fields = 0;

const hints: Readonly<Record<Exclude<TypedField['form'], 'number'>, string>> = {
  complex: 'a complex number',
  list: 'a list',
  distribution: 'probabilities',
  matrix: 'a matrix',
  state: 'a state',
  formula: 'a formula',
  worked: 'in words',
};

/** What the field asks for, in a few words at its right. */
export function hintOf(field: TypedField): string {
  if (field.form !== 'number') return hints[field.form];
  if (field.hint === 'pure number') return 'a pure number';
  return field.unit ? `in ${field.unit}` : 'with a unit';
}

/**
 * An answer as it is typed, with how it was read beneath. The reader is fetched with the first field and works without a
 * connection; the server's reading is the one that counts.
 */
@Component({
  selector: 'app-answer-field',
  imports: [ReadBack],
  templateUrl: './answer-field.html',
  styleUrl: './answer-field.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AnswerField {
  private readonly pendingTasks = inject(PendingTasks);

  /** What is asked for. */
  readonly field = input.required<TypedField>();
  /** What the field is called by those who hear it: `Answer to (b)`. */
  readonly label = input.required<string>();
  /** The answer as typed. */
  readonly text = model('');
  /** Whether it can be read but not changed. */
  readonly readonly = input(false, { transform: booleanAttribute });
  readonly placeholder = input('your answer');
  /** How the answer is read, whenever that changes. */
  readonly readingChange = output<Reading>();

  protected readonly id = `answer-${++fields}`;
  protected readonly hint = computed(() => hintOf(this.field()));
  private readonly reader = signal<Reader | undefined>(undefined);
  private readonly readerFailed = signal(false);
  protected readonly reading = computed<Reading | null>(() => this.reader()?.(this.text(), this.field()) ?? null);
  protected readonly waiting = computed(() => (this.readerFailed() ? 'kept here, read when back' : ''));
  protected readonly wrong = computed(() => this.reading()?.kind === 'unreadable');

  constructor() {
    const done = this.pendingTasks.add();
    import('@shared/reading')
      .then(
        (reading) => this.reader.set(reading.readAnswer),
        () => this.readerFailed.set(true),
      )
      .finally(done);
    effect(() => {
      const reading = this.reading();
      if (reading) untracked(() => this.readingChange.emit(reading));
    });
  }

  protected type(event: Event): void {
    this.text.set((event.target as HTMLInputElement).value);
  }
}
