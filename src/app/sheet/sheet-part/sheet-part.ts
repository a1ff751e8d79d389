import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { timeOf } from '@shared/times';
import { AnswerField, type TypedField } from '../../ui/answer-field/answer-field';
import { FormulaText } from '../../ui/formula-text/formula-text';
import type { PrintedGivens } from '../../ui/formula-text/printed-given';
import { WorkedText } from '../../ui/worked-text/worked-text';
import { ChoiceField } from '../../ui/choice-field/choice-field';
import { PageFiles } from '../page-files/page-files';
import type { PartInHand } from '../sheet-keeper';

/** One part of a sheet: what is asked, the answer as it is typed and read, worked pages. */
@Component({
  selector: 'app-sheet-part',
  imports: [AnswerField, ChoiceField, FormulaText, MatButtonModule, PageFiles, WorkedText],
  templateUrl: './sheet-part.html',
  styleUrl: './sheet-part.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: {
    role: 'group',
    '[id]': 'inHand().anchor',
    '[attr.aria-label]': "'Part ' + inHand().name",
    '[class.asks]': "inHand().standing() === 'asks'",
    '[class.empty]': "inHand().standing() === 'empty'",
    tabindex: '-1',
  },
})
export class SheetPart {
  readonly inHand = input.required<PartInHand>();
  readonly givens = input.required<PrintedGivens>();
  readonly timeZone = input.required<string>();
  readonly readonly = input(false);

  protected readonly part = computed(() => this.inHand().part);
  protected readonly keeper = computed(() => this.inHand().keeper);
  protected readonly label = computed(() => `Answer to ${this.inHand().name}`);
  protected readonly marks = computed(() => {
    const { marks } = this.part();
    return `${String(marks)} ${marks === 1 ? 'mark' : 'marks'}`;
  });
  /** The field as it is typed into; null for a choice and for words. */
  protected readonly typed = computed<TypedField | null>(() => {
    const { field } = this.part();
    return field.form === 'choice' || field.form === 'worked' ? null : field;
  });
  protected readonly isSeveral = computed(() => {
    const { field } = this.part();
    return field.form === 'choice' && field.several;
  });
  protected readonly theirTime = computed(() => {
    const at = this.keeper().theirs()?.savedAt;
    return at == null ? '' : timeOf(at, this.timeZone());
  });
}
