import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { DraftPart } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { KeyValue } from './key-value';
import { OpenProblem } from './open-problem';
import { textOfValue, valued, valueOf, type ValuedKey } from './present-value';
import { slipStanding } from './right-band';
import { SampleVariants } from './sample-variants';
import { slipName } from './slip-name';
import { passesAsRight } from './value-match';

/** The sample variants of a part: givens, the key by each method, and how the slips stand to it. */
@Component({
  selector: 'app-sample-table',
  imports: [FormulaText, KeyValue, MatButtonModule],
  templateUrl: './sample-table.html',
  styleUrl: './sample-table.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SampleTable {
  private readonly open = inject(OpenProblem);
  protected readonly samples = inject(SampleVariants);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();
  /** What is said of the key above the table, and not again in every row. */
  readonly saidAbove = input('');

  protected readonly label = computed(() => partLabel(this.index()));
  protected readonly answer = computed(() => this.part().answer);
  protected readonly givens = computed(() => this.open.draft()?.givens.filter((given) => given.name.trim()) ?? []);
  /** A number stands once for each method, beside the other; what takes more room stands once. */
  protected readonly isNumber = computed(() => this.answer().form === 'number');

  private readonly keys = computed(() =>
    this.samples.variants().map((variant) => valued(variant.parts[this.index()]?.key)),
  );

  /** The methods that were run, in the order of the columns. */
  protected readonly methods = computed<readonly string[]>(() => {
    const found = new Set<string>();
    for (const key of this.keys()) {
      if (key) found.add(key.method);
      if (key?.second) found.add(key.second.method);
    }
    return [...found];
  });

  protected readonly hasDimension = computed(() => this.keys().some((key) => key?.dimension !== undefined));
  /** Columns that a fault takes the place of. */
  protected readonly keyColumns = computed(() =>
    this.isNumber() ? (this.methods().length || 1) + (this.hasDimension() ? 1 : 0) : 2,
  );

  protected readonly rows = computed(() => {
    const answer = this.answer();
    return this.samples.variants().map((variant, place) => {
      const key = variant.parts[this.index()]?.key ?? null;
      const value = valued(key);
      const slips = (variant.parts[this.index()]?.slips ?? []).map((slip, index) => ({
        name: slipName(answer.slips, index),
        value: valueOf(slip),
        passes: valued(slip)?.passes,
      }));
      return {
        place,
        number: variant.number,
        isShown: variant === this.samples.shown(),
        givens: this.givens().map((given) => variant.givens[given.name.trim()]?.printed ?? '–'),
        key: value,
        values: this.methods().map((method) => {
          const one =
            value?.method === method ? value.value : value?.second?.method === method ? value.second.value : undefined;
          return one === undefined ? '' : textOfValue(one, 13);
        }),
        how: value ? howComputed(value) : '',
        unit: value?.unit ?? '',
        dimension: value?.dimension,
        fault: key && 'fault' in key ? (key.fault.message === this.saidAbove() ? 'no value' : key.fault.message) : '',
        slips: value ? slipStanding(value.value, slips, (one, other) => passesAsRight(one, other, answer)) : null,
      };
    });
  });
}

/** The methods behind a key and how they agree, in a few words. */
function howComputed({ method, second, agreesTo, dimension }: ValuedKey): string {
  if (second || agreesTo !== undefined) return `${String(agreesTo ?? 0)} digits agree`;
  return dimension === undefined ? method : `${method}, ${String(dimension)}`;
}
