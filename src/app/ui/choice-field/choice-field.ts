import { ChangeDetectionStrategy, Component, computed, effect, input, model, output, untracked } from '@angular/core';
import type { Reading } from '@shared/reading';
import { FormulaText } from '../formula-text/formula-text';

let fields = 0;

/** An answer that is chosen among options: one of them, or several. */
@Component({
  selector: 'app-choice-field',
  imports: [FormulaText],
  template: `
    <fieldset [attr.aria-label]="label()">
      <p class="hint">{{ several() ? 'Choose all that hold.' : 'Choose one.' }}</p>
      @for (option of options(); track option.label) {
        <label class="option">
          <input
            [type]="several() ? 'checkbox' : 'radio'"
            [name]="name"
            [checked]="chosen().includes(option.label)"
            [disabled]="readonly()"
            (change)="choose(option.label, $event)"
          />
          <b class="mono">{{ option.label }}</b>
          @if (option.text) {
            <app-formula-text [inline]="true" [text]="option.text" />
          }
        </label>
      }
      @if (!several() && chosen().length > 0 && !readonly()) {
        <button type="button" class="plain" (click)="text.set('')">Take the choice back</button>
      }
    </fieldset>
  `,
  styleUrl: './choice-field.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChoiceField {
  readonly options = input.required<readonly { readonly label: string; readonly text: string }[]>();
  readonly several = input(false);
  /** What the field is called by those who hear it. */
  readonly label = input.required<string>();
  /** The labels that are chosen, separated by commas. */
  readonly text = model('');
  readonly readonly = input(false);
  readonly readingChange = output<Reading>();

  protected readonly name = `choice-${String(++fields)}`;
  protected readonly chosen = computed(() =>
    this.text()
      .split(',')
      .map((each) => each.trim())
      .filter(Boolean),
  );

  constructor() {
    effect(() => {
      const labels = this.chosen();
      untracked(() => {
        this.readingChange.emit(
          labels.length === 0 ? { kind: 'empty' } : { kind: 'choice', labels, readAs: labels.join(', ') },
        );
      });
    });
  }

  protected choose(label: string, event: Event): void {
    const on = (event.target as HTMLInputElement).checked;
    if (!this.several()) {
      this.text.set(label);
      return;
    }
    const now = this.chosen().filter((each) => each !== label);
    const wanted = on ? [...now, label] : now;
    this.text.set(
      this.options()
        .map((option) => option.label)
        .filter((each) => wanted.includes(each))
        .join(', '),
    );
  }
}
