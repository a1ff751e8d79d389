import { ChangeDetectionStrategy, Component, booleanAttribute, input, output } from '@angular/core';

let instances = 0;

/** A small field of a table or a form: whatever is typed is kept, and what is wrong with it stands beneath. */
@Component({
  selector: 'app-typed-field',
  template: `
    @if (!hideLabel()) {
      <label [for]="id">{{ label() }}</label>
    }
    @if (rows() > 0) {
      <textarea
        #area
        [id]="id"
        [rows]="rows()"
        [value]="value()"
        [disabled]="disabled()"
        [attr.aria-label]="hideLabel() ? label() : null"
        [attr.aria-invalid]="fault() ? true : null"
        [attr.aria-describedby]="fault() ? id + '-fault' : null"
        (input)="valueChange.emit(area.value)"
      ></textarea>
    } @else {
      <input
        #box
        [id]="id"
        [class.mono]="mono()"
        [class.number]="numeric()"
        [value]="value()"
        [disabled]="disabled()"
        [placeholder]="placeholder()"
        [attr.inputmode]="numeric() ? 'decimal' : null"
        [attr.aria-label]="hideLabel() ? label() : null"
        [attr.aria-invalid]="fault() ? true : null"
        [attr.aria-describedby]="fault() ? id + '-fault' : null"
        autocomplete="off"
        spellcheck="false"
        (input)="valueChange.emit(box.value)"
      />
    }
    @if (fault(); as why) {
      <p class="fault" [id]="id + '-fault'">{{ why }}</p>
    }
  `,
  styleUrl: './typed-field.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: { '[class.beside]': 'beside()' },
})
export class TypedField {
  /** What the field is called; read out where it is not shown. */
  readonly label = input.required<string>();
  readonly value = input.required<string>();
  /** What is wrong, in a sentence; empty where nothing is. */
  readonly fault = input('');
  readonly placeholder = input('');
  readonly hideLabel = input(false, { transform: booleanAttribute });
  /** Whether the label stands before the field rather than over it. */
  readonly beside = input(false, { transform: booleanAttribute });
  readonly mono = input(false, { transform: booleanAttribute });
  readonly numeric = input(false, { transform: booleanAttribute });
  /** More than 0 makes it a field of several lines. */
  readonly rows = input(0);
  readonly disabled = input(false, { transform: booleanAttribute });
  readonly valueChange = output<string>();

  protected readonly id = `typed-field-${String(++instances)}`;
}
