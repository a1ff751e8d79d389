import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { textOfValue, type ValuedKey } from './present-value';

const mostColumns = 6;
const mostRows = 5;
const figures = 5;

/** A key as one reads it: numbers as text, lists and matrices as a small grid, states and formulas typeset. */
@Component({
  selector: 'app-key-value',
  imports: [FormulaText],
  template: `
    @if (key().typeset; as typeset) {
      <app-formula-text aria-hidden="true" [inline]="true" [text]="'$' + typeset + '$'" /><span
        class="cdk-visually-hidden"
        >{{ plain() }}</span
      >
      @if (key().example; as example) {
        <span class="example below">{{ example }}</span>
      }
    } @else if (grid(); as shown) {
      <span class="cdk-visually-hidden">{{ plain() }}</span>
      <span class="grid" aria-hidden="true">
        @for (row of shown.rows; track $index) {
          <span class="line">
            @for (cell of row; track $index) {
              <span class="cell">{{ cell }}</span>
            }
          </span>
        }
      </span>
      @if (shown.more) {
        <span class="example">{{ shown.more }}</span>
      }
    } @else {
      {{ plain() }}
    }
  `,
  styles: `
    :host {
      display: inline-block;
      vertical-align: middle;
    }

    app-formula-text {
      font: 16px/26px var(--read);
    }

    .grid {
      display: inline-block;
      margin: 3px 0;
      vertical-align: middle;
      border: 1px solid var(--silver-2);
      border-radius: var(--radius);
    }

    .line {
      display: flex;

      & + .line {
        border-top: 1px solid var(--silver-2);
      }
    }

    .cell {
      flex: 1 0 64px;
      padding: 1px 6px;
      text-align: right;
      font: 12px/18px var(--mono);

      & + .cell {
        border-left: 1px solid var(--silver-2);
      }
    }

    .example {
      margin-left: 8px;
      font: var(--t-12);
      color: var(--silver-4);

      &.below {
        display: block;
        margin: 0 0 4px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class KeyValue {
  readonly key = input.required<ValuedKey>();

  protected readonly plain = computed(() => {
    const { value, unit } = this.key();
    const text = typeof value === 'number' ? printNumber(value, 8) : textOfValue(value, 7);
    return `${text}${unit ? ` ${unit}` : ''}`;
  });

  /** The entries of a list or a matrix, those that fit, and what was left out. */
  protected readonly grid = computed(() => {
    const { value } = this.key();
    if (!Array.isArray(value)) return null;
    const entries: readonly unknown[] = value;
    const isMatrix = entries.every((entry) => Array.isArray(entry));
    const rows = isMatrix ? (entries as readonly (readonly unknown[])[]) : [entries];
    const cells = rows
      .slice(0, mostRows)
      .map((row) => row.slice(0, mostColumns).map((cell) => textOfValue(cell, figures)));
    const hidden = rows.length > mostRows || rows.some((row) => row.length > mostColumns);
    const size = isMatrix
      ? `${String(rows.length)} × ${String(rows[0]?.length ?? 0)}`
      : `${String(entries.length)} entries`;
    return { rows: cells, more: hidden ? `of ${size}` : '' };
  });
}
