import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { FormulaText } from '../formula-text/formula-text';
import { countsAsCsv, tallyOf } from './tally';

/** Simulated counts: how often each number was counted, as a table; every single shot as CSV. */
@Component({
  selector: 'app-counts-table',
  imports: [FormulaText, MatButtonModule, MatIconModule],
  template: `
    <figure>
      <figcaption>
        <span>Your data, <app-formula-text inline [text]="'$' + symbol() + '$'" />: {{ counts().length }} shots</span>
        <button type="button" matButton class="compact no-print" (click)="download()">
          <mat-icon svgIcon="download" />Download as CSV
        </button>
      </figcaption>
      <div class="scroll" tabindex="0" role="region" [attr.aria-label]="'Counts ' + name()">
        <table>
          <tbody>
            <tr>
              <th scope="row">counts in a shot</th>
              @for (row of tally(); track row.count) {
                <td>{{ row.count }}</td>
              }
            </tr>
            <tr>
              <th scope="row">how often</th>
              @for (row of tally(); track row.count) {
                <td>{{ row.times }}</td>
              }
            </tr>
          </tbody>
        </table>
      </div>
    </figure>
  `,
  styles: `
    figure {
      margin: 8px 0 16px;
    }

    figcaption {
      display: flex;
      flex-wrap: wrap;
      gap: 4px 16px;
      align-items: center;
      justify-content: space-between;
    }

    .scroll {
      overflow-x: auto;
    }

    table {
      width: auto;
      font: 14px/20px var(--ui);
      font-variant-numeric: tabular-nums;
    }

    th,
    td {
      padding: 4px 12px 4px 0;
      border-bottom: var(--hair);
      text-align: right;
      white-space: nowrap;
    }

    th {
      position: sticky;
      left: 0;
      background: var(--paper);
      text-align: left;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CountsTable {
  readonly name = input.required<string>();
  /** KaTeX. */
  readonly symbol = input.required<string>();
  /** One number a shot, in the order of the shots. */
  readonly counts = input.required<readonly number[]>();

  protected readonly tally = computed(() => tallyOf(this.counts()));

  protected download(): void {
    const url = URL.createObjectURL(new Blob([countsAsCsv(this.name(), this.counts())], { type: 'text/csv' }));
    const link = document.createElement('a');
    link.href = url;
    link.download = `${this.name()}.csv`;
    link.click();
    URL.revokeObjectURL(url);
  }
}
