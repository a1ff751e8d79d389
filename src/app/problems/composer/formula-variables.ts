import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import { emptyVariable, type DraftPart, type DraftVariable } from '@shared/problem-draft';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { changeAnswer } from './draft-changes';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

/** The variables of a formula: names with the ranges in which formulas are compared, and how each is written. */
@Component({
  selector: 'app-formula-variables',
  imports: [FormulaText, MatButtonModule, MatIconModule, MatTooltipModule, TypedField],
  templateUrl: './formula-variables.html',
  styleUrl: './formula-variables.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FormulaVariables {
  protected readonly open = inject(OpenProblem);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();

  protected readonly rows = computed(() => {
    const givens = this.open.draft()?.givens ?? [];
    return this.part().answer.variables.map((variable, index) => {
      const name = variable.name.trim();
      const given = givens.find((each) => each.name.trim() === name && name !== '');
      return {
        variable,
        title: name || `variable ${String(index + 1)}`,
        // A given of the same name lends symbol and spellings where the variable has none of its own.
        symbol: variable.symbol.trim() || (given?.symbol.trim() ?? '') || name,
        lentSymbol: given?.symbol.trim() ?? '',
        lentSpellings: given?.spellings.trim() ?? '',
      };
    });
  });
  protected readonly wholeFault = computed(() =>
    this.open.showsAll() ? (this.open.faultsAt('parts', this.index(), 'answer', 'variables')[0]?.message ?? '') : '',
  );

  protected fault(typed: string, variable: number, field: keyof DraftVariable): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'answer', 'variables', variable, field);
  }

  protected change(variable: number, change: Partial<DraftVariable>): void {
    this.changeVariables((all) => all.map((each, place) => (place === variable ? { ...each, ...change } : each)));
  }

  protected add(): void {
    this.changeVariables((all) => [...all, emptyVariable()]);
  }

  protected remove(variable: number): void {
    this.changeVariables((all) => all.filter((_, place) => place !== variable));
  }

  private changeVariables(next: (all: readonly DraftVariable[]) => DraftVariable[]): void {
    this.open.change((draft) => {
      const present = draft.parts[this.index()]?.answer.variables ?? [];
      return changeAnswer(draft, this.index(), { variables: next(present) });
    });
  }
}
