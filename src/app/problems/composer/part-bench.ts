import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import type { DraftAnswer, DraftPart } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { AgreementBadge } from '../../ui/agreement-badge/agreement-badge';
import { ToleranceRuler } from '../../ui/tolerance-ruler/tolerance-ruler';
import { changeAnswer, changePart, changeTolerance } from './draft-changes';
import { ExpressionEditor, type ExpressionFault } from './expression-editor';
import type { KeyNames } from './key-language';
import { OpenProblem } from './open-problem';
import { numberOf, textOfValue, valued, type ValuedKey } from './present-value';
import { rightBand, slipStanding } from './right-band';
import { SampleVariants } from './sample-variants';
import { SlipsTable } from './slips-table';
import { TypedField } from './typed-field';

/** A slip by its name, or by its place where it has none yet. */
function slipName(slips: DraftAnswer['slips'], index: number): string {
  const name = slips[index]?.name.trim() ?? '';
  return name === '' ? `slip ${String(index + 1)}` : name;
}

/** The key bench of one part: expression, sample variants by each method, tolerance and slips. */
@Component({
  selector: 'app-part-bench',
  imports: [
    AgreementBadge,
    ExpressionEditor,
    FormulaText,
    MatButtonModule,
    MatIconModule,
    SlipsTable,
    ToleranceRuler,
    TypedField,
  ],
  templateUrl: './part-bench.html',
  styleUrl: './part-bench.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PartBench {
  protected readonly open = inject(OpenProblem);
  protected readonly samples = inject(SampleVariants);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();
  readonly names = input.required<KeyNames>();

  protected readonly label = computed(() => partLabel(this.index()));
  protected readonly givens = computed(() => this.open.draft()?.givens.filter((given) => given.name.trim()) ?? []);

  /** The key's faults: as typed, then as evaluated, on the first variant on which it fails. */
  protected readonly keyFaults = computed<readonly ExpressionFault[]>(() => {
    const typed = this.part().answer.key.trim() === '' && !this.open.showsAll();
    const faults = typed ? [] : this.open.faultsAt('parts', this.index(), 'answer', 'key');
    if (faults.length > 0 || this.samples.isWaiting()) return faults;
    const failing = this.samples.keyFaults()[this.index()];
    return failing ? [failing] : [];
  });

  /** The key of the variant that is shown. */
  protected readonly shownKey = computed(() => valued(this.samples.shown()?.parts[this.index()]?.key));

  /** What the badge says: the fewest digits to which two methods agree on any of the samples. */
  protected readonly agreement = computed(() => {
    const keys = this.samples.variants().map((variant) => valued(variant.parts[this.index()]?.key));
    const weakest = keys
      .filter((key) => key !== null)
      .reduce<ValuedKey | null>((least, key) => ((key.agreesTo ?? 99) < (least?.agreesTo ?? 100) ? key : least), null);
    if (!weakest || this.keyFaults().length > 0) return null;
    return {
      methods: weakest.second ? [weakest.method, weakest.second.method] : [weakest.method],
      digits: weakest.agreesTo,
      dimension: weakest.dimension,
      outsideWeight: weakest.outsideWeight,
    };
  });

  /** The methods that were run, in the order of the columns. */
  protected readonly methods = computed<readonly string[]>(() => {
    const found = new Set<string>();
    for (const variant of this.samples.variants()) {
      const key = valued(variant.parts[this.index()]?.key);
      if (key) found.add(key.method);
      if (key?.second) found.add(key.second.method);
    }
    return [...found];
  });

  protected readonly hasDimension = computed(() =>
    this.samples.variants().some((variant) => valued(variant.parts[this.index()]?.key)?.dimension !== undefined),
  );

  protected readonly rows = computed(() => {
    const { tolerance, slips } = this.part().answer;
    return this.samples.variants().map((variant, place) => {
      const key = variant.parts[this.index()]?.key ?? null;
      const value = valued(key);
      const number = numberOf(key);
      const values = (variant.parts[this.index()]?.slips ?? []).map((slip, index) => ({
        name: slipName(slips, index),
        value: numberOf(slip),
      }));
      return {
        place,
        number: variant.number,
        isShown: variant === this.samples.shown(),
        givens: this.givens().map((given) => variant.givens[given.name.trim()]?.printed ?? '–'),
        values: this.methods().map((method) => {
          const one =
            value?.method === method ? value.value : value?.second?.method === method ? value.second.value : undefined;
          return one === undefined ? '' : textOfValue(one, 13);
        }),
        unit: value?.unit ?? '',
        dimension: value?.dimension,
        // What is said once under the expression is not said again in every row.
        fault:
          key && 'fault' in key
            ? key.fault.message === this.keyFaults()[0]?.message
              ? 'no value'
              : key.fault.message
            : '',
        slips: number === null ? null : slipStanding(number, values, tolerance),
      };
    });
  });

  /** The ruler's key, band and slips for the variant that is shown. */
  protected readonly ruler = computed(() => {
    const key = numberOf(this.shownKey());
    const band = key === null ? null : rightBand(key, this.part().answer.tolerance);
    if (key === null || band === null) return null;
    const slips = (this.samples.shown()?.parts[this.index()]?.slips ?? []).flatMap((slip, index) => {
      const value = numberOf(slip);
      const name = slipName(this.part().answer.slips, index);
      return value === null ? [] : [{ name, value }];
    });
    return { key, ...band, slips };
  });

  protected readonly rightMeans = computed(() => {
    const ruler = this.ruler();
    const variant = this.samples.shown()?.number;
    if (!ruler) return '';
    const range = `${textOfValue(ruler.low, 4)} to ${textOfValue(ruler.high, 4)}`;
    return `${variant ? `for variant ${String(variant)} ` : ''}right means ${range}`;
  });

  /** The earlier parts whose values the key uses. */
  protected readonly earlier = computed(() => [
    ...new Set([...this.part().answer.key.matchAll(/\bpart_([a-z])\b/g)].map((match) => `(${match[1] ?? ''})`)),
  ]);

  protected fault(typed: string, ...path: (string | number)[]): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', ...path);
  }

  protected changeHeading(heading: string): void {
    this.open.change((draft) => changePart(draft, this.index(), { heading }));
  }

  protected change(change: Partial<DraftAnswer>): void {
    this.open.change((draft) => changeAnswer(draft, this.index(), change));
  }

  protected changeTolerance(change: Partial<DraftAnswer['tolerance']>): void {
    this.open.change((draft) => changeTolerance(draft, this.index(), change));
  }
}
