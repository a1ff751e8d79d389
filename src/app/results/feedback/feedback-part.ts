import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { MatIconModule } from '@angular/material/icon';
import type { Verdict } from '@shared/problems';
import { printComplex, printNumber } from '@shared/reading/print';
import type { FeedbackPart as Part } from '@shared/results';
import { dayOf } from '@shared/times';
import { Session } from '../../core/session';
import { FormulaText } from '../../ui/formula-text/formula-text';
import type { PrintedGivens } from '../../ui/formula-text/printed-given';
import { ToleranceRuler } from '../../ui/tolerance-ruler/tolerance-ruler';
import { WorkedPages } from '../../ui/worked-pages/worked-pages';

/** How a verdict is said to a student: words, sign and tone. */
const verdictWords: Readonly<Record<Verdict, { words: string; icon: string; tone: string }>> = {
  right: { words: 'right', icon: 'check', tone: 'tone-right' },
  unit: { words: 'right, but without its unit', icon: 'flag', tone: 'tone-slip' },
  'follow-through': { words: 'follow-through', icon: 'arrow_forward', tone: 'tone-ft' },
  slip: { words: 'slip', icon: 'flag', tone: 'tone-slip' },
  wrong: { words: 'not right', icon: 'close', tone: 'tone-wrong' },
  unreadable: { words: 'could not be read', icon: 'close', tone: 'tone-wrong' },
  unanswered: { words: 'not answered', icon: 'remove', tone: 'quiet' },
};

/** One part as a student reads it: question, own answer, key where it is shown, criteria, remark, own pages. */
@Component({
  selector: 'app-feedback-part',
  imports: [FormulaText, MatIconModule, ToleranceRuler, WorkedPages],
  templateUrl: './feedback-part.html',
  styleUrl: './feedback-part.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FeedbackPart {
  private readonly session = inject(Session);

  readonly part = input.required<Part>();
  readonly givens = input<PrintedGivens>({});
  /** Whether a criterion that was not awarded can be queried now. */
  readonly mayQuery = input(false);
  /** The student wants to query this criterion. */
  readonly queried = output<string>();

  protected readonly verdict = computed(() => {
    const { verdict, relation, slip } = this.part();
    if (!verdict) return null;
    const { words, icon, tone } = verdictWords[verdict];
    const named = verdict === 'slip' && slip?.name ? `slip: ${slip.name}` : (relation ?? words);
    return { icon, tone, words: named };
  });

  /** `key 0.2030, right from 0.2010 to 0.2050`. */
  protected readonly keyLine = computed(() => {
    const { key, verdict } = this.part();
    if (!key) return '';
    const unit = key.unit ? ` ${key.unit}` : '';
    const words = `key ${print(key.value, 5)}${unit}`;
    const { band } = key;
    if (!band || verdict === 'right') return words;
    return `${words}, right from ${print(band.low, 4)} to ${print(band.high, 4)}${unit}`;
  });

  /** Only where the key is shown, and the answer is another number. */
  protected readonly ruler = computed(() => {
    const { key, verdict } = this.part();
    if (!key || typeof key.value !== 'number' || typeof key.answer !== 'number') return null;
    if (verdict === 'right' || !key.band) return null;
    return { key: key.value, band: key.band, answer: key.answer, unit: key.unit ?? '' };
  });

  protected dayOf(at: number): string {
    return dayOf(at, this.session.course()?.timeZone ?? 'UTC');
  }
}

function print(value: unknown, figures: number): string {
  if (typeof value === 'number') return printNumber(value, figures);
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return `[${value.map((each) => print(each, figures)).join(', ')}]`;
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value)
    return printComplex({ re: Number(value.re), im: Number(value.im) }, figures);
  return '';
}
