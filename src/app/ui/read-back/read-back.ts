import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import type { Reading } from '@shared/reading';
import { FormulaText } from '../formula-text/formula-text';

/**
 * One line under an answer: how it was read, or the question it leaves. It says how, never whether: no tick, nothing green.
 */
@Component({
  selector: 'app-read-back',
  imports: [FormulaText, MatButtonModule, MatIconModule],
  templateUrl: './read-back.html',
  styleUrl: './read-back.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ReadBack {
  /** How the answer was read; null while that is not known. */
  readonly reading = input.required<Reading | null>();
  /** What to say while it is not known, for example `kept here, read when back`. */
  readonly waiting = input('');
  /** What an empty answer is called. */
  readonly emptyText = input('nothing yet');

  /** The student answers the question: the text that replaces the whole answer. */
  readonly choiceMade = output<string>();

  protected readonly typeset = computed(() => {
    const reading = this.reading();
    return reading && 'typeset' in reading ? `$${reading.typeset}$` : '';
  });

  /** What was read, as one line of words; for typeset answers what follows the formula. */
  protected readonly line = computed(() => {
    const reading = this.reading();
    if (!reading || !('readAs' in reading)) return '';
    return reading.readAs;
  });

  protected readonly additions = computed(() => {
    const reading = this.reading();
    if (!reading || !('readAs' in reading)) return '';
    const parts: string[] = [];
    if (reading.kind === 'state') parts.push(`norm ${Number(reading.norm.toPrecision(4))}`);
    if (reading.dropped) parts.push(`without “${reading.dropped}”`);
    return parts.map((part) => `, ${part}`).join('');
  });
}
