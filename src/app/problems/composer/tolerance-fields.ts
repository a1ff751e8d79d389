import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import type { DraftAnswer, DraftPart } from '@shared/problem-draft';
import { ToleranceRuler } from '../../ui/tolerance-ruler/tolerance-ruler';
import { changeAnswer, changeTolerance } from './draft-changes';
import { OpenProblem } from './open-problem';
import { numberOf, textOfValue, valued } from './present-value';
import { rightBand } from './right-band';
import { SampleVariants } from './sample-variants';
import { slipName } from './slip-name';
import { TypedField } from './typed-field';

/** What each form compares, in a few words beside the heading. */
const comparedWords: Readonly<Record<DraftAnswer['form'], string>> = {
  number: '',
  complex: 'of the distance in the complex plane',
  list: 'of every entry; the length must match',
  distribution: '½ Σ |p − q|, at most this',
  matrix: 'of every entry; the shape must match',
  state: 'up to a global phase and normalisation',
  formula: 'at 40 points inside the ranges, the same for everyone',
  choice: '',
  worked: '',
};

/** How far from the key an answer may lie, in the fields that the form has, with a ruler where it asks for a number. */
@Component({
  selector: 'app-tolerance-fields',
  imports: [ToleranceRuler, TypedField],
  templateUrl: './tolerance-fields.html',
  styleUrl: './tolerance-fields.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ToleranceFields {
  protected readonly open = inject(OpenProblem);
  private readonly samples = inject(SampleVariants);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();

  protected readonly answer = computed(() => this.part().answer);
  /** The key of the variant that is shown. */
  protected readonly shownKey = computed(() => valued(this.samples.shown()?.parts[this.index()]?.key));

  /** The ruler's key, band and slips for the variant that is shown; a ruler has one axis, so only for real numbers. */
  protected readonly ruler = computed(() => {
    const answer = this.answer();
    const key = answer.form === 'number' ? numberOf(this.shownKey()) : null;
    const band = key === null ? null : rightBand(key, answer.tolerance);
    if (key === null || band === null) return null;
    const slips = (this.samples.shown()?.parts[this.index()]?.slips ?? []).flatMap((slip, index) => {
      const value = numberOf(slip);
      return value === null ? [] : [{ name: slipName(answer.slips, index), value }];
    });
    return { key, ...band, slips };
  });

  protected readonly explanation = computed(() => {
    const ruler = this.ruler();
    const variant = this.samples.shown()?.number;
    if (!ruler) return comparedWords[this.answer().form];
    const range = `${textOfValue(ruler.low, 4)} to ${textOfValue(ruler.high, 4)}`;
    return `${variant ? `for variant ${String(variant)} ` : ''}right means ${range}`;
  });

  protected fault(typed: string, ...path: (string | number)[]): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', ...path);
  }

  protected change(change: Partial<DraftAnswer>): void {
    this.open.change((draft) => changeAnswer(draft, this.index(), change));
  }

  protected changeTolerance(change: Partial<DraftAnswer['tolerance']>): void {
    this.open.change((draft) => changeTolerance(draft, this.index(), change));
  }
}
