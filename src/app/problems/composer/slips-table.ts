import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import type { DraftPart, DraftSlip } from '@shared/problem-draft';
import { addSlip, changeSlip, removeSlip } from './draft-changes';
import { ExpressionEditor, type ExpressionFault } from './expression-editor';
import { KeyValue } from './key-value';
import type { KeyNames } from './key-language';
import { OpenProblem } from './open-problem';
import { textOfValue, valued } from './present-value';
import { SampleVariants } from './sample-variants';
import { TypedField } from './typed-field';

/** The slips of a part: name, expression with its value in the shown variant, fraction of the marks, feedback. */
@Component({
  selector: 'app-slips-table',
  imports: [ExpressionEditor, KeyValue, MatButtonModule, MatIconModule, MatTooltipModule, TypedField],
  templateUrl: './slips-table.html',
  styleUrl: './slips-table.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SlipsTable {
  protected readonly open = inject(OpenProblem);
  private readonly samples = inject(SampleVariants);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();
  readonly names = input.required<KeyNames>();

  protected readonly rows = computed(() =>
    this.part().answer.slips.map((slip, index) => {
      const sampled = this.samples.shown()?.parts[this.index()]?.slips[index];
      const value = valued(sampled);
      return {
        slip,
        value,
        number: value && typeof value.value === 'number' ? textOfValue(value.value, 4) : '',
        faults: this.expressionFaults(slip, index),
      };
    }),
  );

  private expressionFaults(slip: DraftSlip, index: number): readonly ExpressionFault[] {
    if (slip.expression.trim() === '') {
      return this.open.showsAll()
        ? this.open.faultsAt('parts', this.index(), 'answer', 'slips', index, 'expression')
        : [];
    }
    const outcomes = this.samples.variants().map((variant) => variant.parts[this.index()]?.slips[index]);
    const first = outcomes[0];
    const failsAlways = outcomes.every((outcome) => outcome && 'fault' in outcome);
    return !this.samples.isWaiting() && failsAlways && first && 'fault' in first ? [first.fault] : [];
  }

  protected fault(typed: string, index: number, field: keyof DraftSlip): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', 'slips', index, field);
  }

  protected change(index: number, change: Partial<DraftSlip>): void {
    this.open.change((draft) => changeSlip(draft, this.index(), index, change));
  }

  protected add(): void {
    this.open.change((draft) => addSlip(draft, this.index()));
  }

  protected remove(index: number): void {
    this.open.change((draft) => removeSlip(draft, this.index(), index));
  }
}
