import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import type { AnswerForm } from '@shared/answer-forms';
import type { DraftAnswer, DraftPart } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';
import { AgreementBadge } from '../../ui/agreement-badge/agreement-badge';
import { beginForm, formWords, keyHints } from './answer-form-words';
import { ChoiceOptions } from './choice-options';
import { changeAnswer } from './draft-changes';
import { ExpressionEditor, type ExpressionFault } from './expression-editor';
import { FormulaVariables } from './formula-variables';
import type { KeyNames } from './key-language';
import { OpenProblem } from './open-problem';
import { valued, type ValuedKey } from './present-value';
import { SampleTable } from './sample-table';
import { SampleVariants } from './sample-variants';
import { SlipsTable } from './slips-table';
import { ToleranceFields } from './tolerance-fields';
import { TypedField } from './typed-field';

/** The key bench of one part: the form of its answer, expression, sample variants, tolerance and slips. */
@Component({
  selector: 'app-part-bench',
  imports: [
    AgreementBadge,
    ChoiceOptions,
    ExpressionEditor,
    FormulaVariables,
    RouterLink,
    SampleTable,
    SlipsTable,
    ToleranceFields,
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

  protected readonly forms = Object.entries(formWords) as [AnswerForm, string][];
  protected readonly label = computed(() => partLabel(this.index()));
  protected readonly hint = computed(() => keyHints[this.part().answer.form] ?? '');
  protected readonly isComputed = computed(() => !['choice', 'worked'].includes(this.part().answer.form));

  /** What the key may name: a formula's variables before everything else. */
  protected readonly keyNames = computed<KeyNames>(() => {
    const { form, variables } = this.part().answer;
    if (form !== 'formula') return this.names();
    const own = variables
      .filter(({ name }) => name.trim() !== '')
      .map(({ name, low, high, integers }) => ({
        name: name.trim(),
        detail: `variable, ${integers ? 'whole numbers ' : ''}${low} to ${high}`,
      }));
    const others = this.names().values.filter((value) => !own.some((each) => each.name === value.name));
    return { ...this.names(), values: [...own, ...others] };
  });

  /** The key's faults: as typed, then as evaluated, on the first variant on which it fails. */
  protected readonly keyFaults = computed<readonly ExpressionFault[]>(() => {
    const typed = this.part().answer.key.trim() === '' && !this.open.showsAll();
    const faults = typed ? [] : this.open.faultsAt('parts', this.index(), 'answer', 'key');
    if (faults.length > 0 || this.samples.isWaiting()) return faults;
    const failing = this.samples.keyFaults()[this.index()];
    return failing ? [failing] : [];
  });

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

  /** The earlier parts whose values the key uses. */
  protected readonly earlier = computed(() => [
    ...new Set([...this.part().answer.key.matchAll(/\bpart_([a-z])\b/g)].map((match) => `(${match[1] ?? ''})`)),
  ]);

  protected fault(typed: string, ...path: (string | number)[]): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', ...path);
  }

  protected change(change: Partial<DraftAnswer>): void {
    this.open.change((draft) => changeAnswer(draft, this.index(), change));
  }

  /** Whatever was typed for another form is kept, and there again when that form is. */
  protected changeForm(chosen: string): void {
    const [form] = this.forms.find(([each]) => each === chosen) ?? [];
    if (form) this.change(beginForm(this.part().answer, form));
  }
}
