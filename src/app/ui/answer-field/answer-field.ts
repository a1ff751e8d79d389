import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
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
  viewChild,
} from '@angular/core';
import type { AnswerField as ReadingField, readAnswer, Reading } from '@shared/reading';
import { EntryBars } from '../entry-bars/entry-bars';
import { ReadBack } from '../read-back/read-back';
import { SignRow } from '../sign-row/sign-row';
import { signsFor, withSign, type Sign } from '../sign-row/signs';

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

/** What an empty field of a form shows as its pattern; it tells nothing of the answer. */
const patterns: Readonly<Record<TypedField['form'], string>> = {
  number: '',
  complex: '1 + 2i',
  list: '1; 2; 3',
  distribution: '0.1; 0.2; 0.7',
  matrix: '1, 0; 0, 1',
  state: '(|0⟩ + i|1⟩)/√2',
  formula: '',
  worked: '',
};

/** What the field asks for, in a few words at its right. */
export function hintOf(field: TypedField): string {
  if (field.form !== 'number') return hints[field.form];
  if (field.hint === 'pure number') return 'a pure number';
  return field.unit ? `in ${field.unit}` : 'with a unit';
}

/** The pattern of an empty field; a formula names what it may contain. */
export function patternOf(field: TypedField): string {
  if (field.form !== 'formula') return patterns[field.form];
  return `in ${field.variables.map(({ name, spellings }) => spellings?.[0] ?? name).join(', ')}`;
}

/**
 * An answer as it is typed, with how it was read beneath. The reader is fetched with the first field and works without a
 * connection; the server's reading is the one that counts.
 */
@Component({
  selector: 'app-answer-field',
  imports: [EntryBars, ReadBack, SignRow],
  templateUrl: './answer-field.html',
  styleUrl: './answer-field.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: { '(focusin)': 'focused.set(true)', '(focusout)': 'leave($event)' },
})
export class AnswerField {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  private readonly pendingTasks = inject(PendingTasks);

  /** What is asked for. */
  readonly field = input.required<TypedField>();
  /** What the field is called by those who hear it: `Answer to (b)`. */
  readonly label = input.required<string>();
  /** The answer as typed. */
  readonly text = model('');
  /** Whether it can be read but not changed. */
  readonly readonly = input(false, { transform: booleanAttribute });
  /** What an empty field says; the form's own pattern where nothing is given. */
  readonly placeholder = input('');
  /** How the answer is read, whenever that changes. */
  readonly readingChange = output<Reading>();

  protected readonly id = `answer-${++fields}`;
  private readonly box = viewChild.required<ElementRef<HTMLInputElement>>('box');
  protected readonly hint = computed(() => hintOf(this.field()));
  protected readonly pattern = computed(() => this.placeholder() || patternOf(this.field()) || 'your answer');
  protected readonly signs = computed(() => signsFor(this.field()));
  protected readonly focused = signal(false);
  private readonly reader = signal<Reader | undefined>(undefined);
  private readonly readerFailed = signal(false);
  protected readonly reading = computed<Reading | null>(() => this.reader()?.(this.text(), this.field()) ?? null);
  /** The entries of a list as bars; null where the form has none, empty until they can be read as real numbers. */
  protected readonly bars = computed<readonly number[] | null>(() => {
    const { form } = this.field();
    if (form !== 'list' && form !== 'distribution') return null;
    const reading = this.reading();
    if (reading?.kind !== 'list' || reading.entries.some(({ im }) => im !== 0)) return [];
    return reading.entries.map(({ re }) => re);
  });
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

  /** The row of signs belongs to the field: going there leaves nothing. */
  protected leave(event: FocusEvent): void {
    const next = event.relatedTarget;
    if (!(next instanceof Node) || !this.host.nativeElement.contains(next)) this.focused.set(false);
  }

  protected writeSign(sign: Sign): void {
    const input = this.box().nativeElement;
    const from = input.selectionStart ?? input.value.length;
    const edited = withSign({ text: input.value, from, to: input.selectionEnd ?? from }, sign);
    // Set here and at once, so that the cursor can be placed in it.
    input.value = edited.text;
    this.text.set(edited.text);
    input.setSelectionRange(edited.from, edited.to);
  }

  /** Puts the cursor back into the answer. */
  protected goBack(): void {
    this.box().nativeElement.focus();
  }
}
