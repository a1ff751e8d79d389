import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
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
import type { Reading } from '@shared/reading';
import { FormulaText } from '../formula-text/formula-text';
import { SignRow } from '../sign-row/sign-row';
import { signsFor, withSign, type Sign } from '../sign-row/signs';

let fields = 0;

/** Whether a text has anything in it that is set otherwise than it is typed. */
const isMarked = (text: string) => /[$*_`#>|[\]]|^\s*(?:[-+]|\d+\.)\s/m.test(text);

/** An answer in words, with Markdown and formulas; how it will be read stands beneath once that differs from what is typed. */
@Component({
  selector: 'app-worked-text',
  imports: [FormulaText, SignRow],
  template: `
    <textarea
      #box
      rows="4"
      [id]="id"
      [attr.aria-label]="label()"
      [attr.aria-describedby]="preview() ? id + '-read' : null"
      [placeholder]="readonly() ? '' : placeholder()"
      [readOnly]="readonly()"
      [value]="text()"
      (input)="text.set(box.value)"
    ></textarea>
    @if (focused() && !readonly()) {
      <app-sign-row [signs]="signs" [label]="'Signs for ' + label()" (chosen)="writeSign($event)" (left)="goBack()" />
    }
    @if (preview()) {
      <section class="read" [id]="id + '-read'" aria-label="How this will be read">
        <p class="quiet">read as</p>
        <app-formula-text [text]="text()" (formulaProblems)="problems.set($event)" />
        @for (problem of problems(); track $index) {
          <p class="tone-wrong caption">\${{ problem.formula }}$: {{ problem.message }}</p>
        }
      </section>
    }
  `,
  styleUrl: './worked-text.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: { '(focusin)': 'focused.set(true)', '(focusout)': 'leave($event)' },
})
export class WorkedText {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  private readonly box = viewChild.required<ElementRef<HTMLTextAreaElement>>('box');

  /** What the field is called by those who hear it. */
  readonly label = input.required<string>();
  readonly text = model('');
  readonly readonly = input(false, { transform: booleanAttribute });
  readonly placeholder = input('in words');
  readonly readingChange = output<Reading>();

  protected readonly id = `worked-${String(++fields)}`;
  protected readonly signs = signsFor({ form: 'worked' });
  protected readonly focused = signal(false);
  protected readonly problems = signal<readonly { readonly formula: string; readonly message: string }[]>([]);
  protected readonly preview = computed(() => isMarked(this.text()));

  constructor() {
    effect(() => {
      const kept = this.text().trim();
      untracked(() => {
        this.readingChange.emit(kept === '' ? { kind: 'empty' } : { kind: 'worked', text: kept, readAs: kept });
      });
    });
  }

  protected leave(event: FocusEvent): void {
    const next = event.relatedTarget;
    if (!(next instanceof Node) || !this.host.nativeElement.contains(next)) this.focused.set(false);
  }

  protected writeSign(sign: Sign): void {
    const area = this.box().nativeElement;
    const edited = withSign({ text: area.value, from: area.selectionStart, to: area.selectionEnd }, sign);
    area.value = edited.text;
    this.text.set(edited.text);
    area.setSelectionRange(edited.from, edited.to);
  }

  protected goBack(): void {
    this.box().nativeElement.focus();
  }
}
