import { ChangeDetectionStrategy, Component, computed, input, viewChild } from '@angular/core';
import type { BenchAnswer } from '@shared/marking';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { givenInFormula } from '../../ui/formula-text/printed-given';
import { ToleranceRuler, type RulerAnswer } from '../../ui/tolerance-ruler/tolerance-ruler';
import { WorkedPages } from '../../ui/worked-pages/worked-pages';
import { printValue } from './print-value';

/** What a card on the light table is: in hand, kept ready, or only looked at. */
export type CardPlace = 'in hand' | 'next' | 'after that' | 'looked at';

/** One answer on the light table, beside its own key. */
@Component({
  selector: 'app-answer-card',
  imports: [FormulaText, ToleranceRuler, WorkedPages],
  templateUrl: './answer-card.html',
  styleUrl: './answer-card.scss',
  host: { '[class.in-hand]': "place() === 'in hand'" },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AnswerCard {
  private readonly pages = viewChild(WorkedPages);

  /** Undefined while it is on its way. */
  readonly answer = input.required<BenchAnswer | undefined>();
  readonly code = input.required<string>();
  readonly place = input.required<CardPlace>();
  /** Its place in its pattern, from 1, and how many there are. */
  readonly number = input(0);
  readonly of = input(0);
  readonly patternName = input('');
  /** The class's answers ÷ key. */
  readonly ratios = input<readonly RulerAnswer[]>([]);
  /** What is said of an answer that is only looked at. */
  readonly state = input('');

  protected readonly status = computed(() => {
    switch (this.place()) {
      case 'in hand':
        return 'in hand, held by you';
      case 'next':
        return 'next, kept ready';
      case 'after that':
        return 'after that, kept ready';
      case 'looked at':
        return this.state() || 'only looked at';
    }
  });

  protected readonly ordinal = computed(() => `${ordinalOf(this.number())} of ${String(this.of())}`);

  protected readonly givens = computed(() =>
    (this.answer()?.givens ?? [])
      .map(({ name, symbol, printed, unit }) => `$${symbol} = ${givenInFormula(name, { printed, unit })}$`)
      .join(', '),
  );

  protected readonly key = computed(() => {
    const key = this.answer()?.key;
    if (!key) return '';
    const unit = key.unit ? ` ${key.unit}` : '';
    return printValue(key.value) + unit;
  });

  protected readonly ratio = computed(() => {
    const ratio = this.answer()?.ratio ?? null;
    return ratio === null ? '' : ratio.toPrecision(4);
  });

  /** The relation in words, where the factor alone does not say it. */
  protected readonly relation = computed(() => {
    const answer = this.answer();
    if (!answer?.relation || answer.relation.factor !== undefined) return '';
    if (answer.verdict !== 'slip' && answer.verdict !== 'wrong')
      return answer.ratio === null ? (answer.verdict ?? '') : '';
    return answer.relation.name;
  });

  protected readonly ruler = computed(() => {
    const answer = this.answer();
    const key = answer?.key?.value;
    if (!answer || typeof key !== 'number' || key === 0) return null;
    return {
      key,
      band: answer.band,
      slips: answer.slips.flatMap(({ name, value }) => (typeof value === 'number' ? [{ name, value }] : [])),
      value: typeof answer.value === 'number' ? answer.value : null,
      unit: answer.key?.unit ?? '',
    };
  });

  /** Shows its page large, or closes it. */
  toggleLarge(): void {
    this.pages()?.toggleLarge();
  }

  /** Turns its worked pages. */
  turn(steps: number): void {
    this.pages()?.turn(steps);
  }
}

/** `1st`, `2nd`, `11th`. */
export function ordinalOf(number: number): string {
  const teen = number % 100 >= 11 && number % 100 <= 13;
  const ending = teen ? 'th' : ({ 1: 'st', 2: 'nd', 3: 'rd' }[number % 10] ?? 'th');
  return `${String(number)}${ending}`;
}
