import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import { emptyOption, type DraftAnswer, type DraftOption, type DraftPart } from '@shared/problem-draft';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { nextLabel } from './answer-form-words';
import { changeAnswer } from './draft-changes';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

/** The options of a choice: label, what it says, and which of them are correct. */
@Component({
  selector: 'app-choice-options',
  imports: [FormulaText, MatButtonModule, MatIconModule, MatTooltipModule, TypedField],
  templateUrl: './choice-options.html',
  styleUrl: './choice-options.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChoiceOptions {
  protected readonly open = inject(OpenProblem);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();

  protected readonly answer = computed(() => this.part().answer);
  /** What is wrong with the options as a whole, once there is something to choose among. */
  protected readonly wholeFaults = computed(() => {
    const isBegun = this.open.showsAll() || this.answer().options.some((option) => option.text.trim() !== '');
    if (!isBegun) return [];
    return [
      ...this.open.faultsAt('parts', this.index(), 'answer', 'options'),
      ...this.open.faultsAt('parts', this.index(), 'answer', 'correct'),
    ];
  });

  protected fault(typed: string, option: number, field: keyof DraftOption): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', 'options', option, field);
  }

  protected change(option: number, change: Partial<DraftOption>): void {
    this.changeOptions((options) => options.map((each, place) => (place === option ? { ...each, ...change } : each)));
  }

  /** One correct option drives out the other, unless several can be. */
  protected setCorrect(option: number, isCorrect: boolean): void {
    const { several } = this.answer();
    this.changeOptions((options) =>
      options.map((each, place) =>
        place === option ? { ...each, correct: isCorrect } : several ? each : { ...each, correct: false },
      ),
    );
  }

  protected setSeveral(several: boolean): void {
    this.open.change((draft) => changeAnswer(draft, this.index(), { several }));
  }

  protected add(): void {
    this.changeOptions((options) => [...options, emptyOption(nextLabel(options.map(({ label }) => label)))]);
  }

  protected remove(option: number): void {
    this.changeOptions((options) => options.filter((_, place) => place !== option));
  }

  private changeOptions(next: (options: DraftAnswer['options']) => DraftAnswer['options']): void {
    this.open.change((draft) => {
      const present = draft.parts[this.index()]?.answer.options ?? [];
      return changeAnswer(draft, this.index(), { options: next(present) });
    });
  }
}
