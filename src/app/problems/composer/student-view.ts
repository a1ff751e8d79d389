import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import { namedGivens, splitStatement } from '@shared/statement';
import { readTypedNumber, typeNumber } from '@shared/typed-number';
import type { DraftPart } from '@shared/problem-draft';
import { CountsTable } from '../../ui/counts-table/counts-table';
import { FormulaText } from '../../ui/formula-text/formula-text';
import type { PrintedGivens } from '../../ui/formula-text/printed-given';
import { OpenProblem } from './open-problem';
import { SampleVariants } from './sample-variants';

/** How long typing may run ahead of the preview. */
const previewDelay = 60;

/** The statement as a student sees it, with the values of one sample variant, which can be walked through. */
@Component({
  selector: 'app-student-view',
  imports: [CountsTable, FormulaText, MatButtonModule, MatIconModule, MatTooltipModule],
  templateUrl: './student-view.html',
  styleUrl: './student-view.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StudentView {
  private readonly open = inject(OpenProblem);
  protected readonly samples = inject(SampleVariants);

  readonly statement = input.required<string>();
  readonly parts = input.required<readonly DraftPart[]>();
  readonly safety = input('');

  private readonly settled = signal('');
  /** Values of the variant that is shown; until the first is there each given stands as a gap, not as one that is unknown. */
  protected readonly givens = computed<PrintedGivens>(
    () =>
      this.samples.shown()?.givens ??
      Object.fromEntries((this.open.draft()?.givens ?? []).map(({ name }) => [name.trim(), { printed: '…' }])),
  );
  /** Lists of counts that the statement names, as students get them. */
  protected readonly data = computed(() => {
    const named = namedGivens(this.settled());
    return (this.open.draft()?.givens ?? []).flatMap(({ name, symbol }) => {
      const counts = this.samples.shown()?.givens[name.trim()]?.counts;
      return counts && named.includes(name.trim()) ? [{ name: name.trim(), symbol, counts }] : [];
    });
  });
  protected readonly split = computed(() => splitStatement(this.settled()));
  protected readonly marks = computed(() =>
    this.parts().map((part) => {
      const sum = part.criteria.reduce((total, each) => total + (readTypedNumber(each.marks) ?? 0), 0);
      return `${typeNumber(sum)} ${sum === 1 ? 'mark' : 'marks'}`;
    }),
  );
  /** What students choose among; null for a part that is no choice. */
  protected readonly options = computed(() =>
    this.parts().map(({ answer }) => (answer.form === 'choice' && answer.options.length > 0 ? answer.options : null)),
  );
  protected readonly where = computed(() => {
    const count = this.samples.sample()?.count;
    const number = this.samples.shown()?.number;
    if (!count || !number) return '';
    return count === 1 ? 'the same for everyone' : `variant ${String(number)} of ${String(count)}`;
  });

  constructor() {
    effect((onCleanup) => {
      const statement = this.statement();
      const timer = setTimeout(() => this.settled.set(statement), previewDelay);
      onCleanup(() => clearTimeout(timer));
    });
  }

  protected step(by: number): void {
    const number = this.samples.shown()?.number;
    if (number) this.samples.show(number + by);
  }
}
