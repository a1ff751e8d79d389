import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import type { DraftGiven } from '@shared/problem-draft';
import { valUses } from '@shared/problem-faults';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { addGiven, changeGiven, removeGiven } from './draft-changes';
import { ExpressionEditor, type ExpressionFault } from './expression-editor';
import type { KeyNames } from './key-language';
import { OpenProblem } from './open-problem';
import { SampleVariants } from './sample-variants';
import { TypedField } from './typed-field';

/** What each kind of given is called. */
const kindWords: Readonly<Record<DraftGiven['kind'], string>> = {
  uniform: 'drawn from a range',
  choice: 'drawn from a list',
  fixed: 'fixed',
  derived: 'derived from others',
};

/** The givens of a problem, and what they print in the sample variants. */
@Component({
  selector: 'app-givens-table',
  imports: [ExpressionEditor, FormulaText, MatButtonModule, MatIconModule, MatTooltipModule, TypedField],
  templateUrl: './givens-table.html',
  styleUrl: './givens-table.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class GivensTable {
  protected readonly open = inject(OpenProblem);
  protected readonly samples = inject(SampleVariants);

  protected readonly kinds = Object.entries(kindWords) as [DraftGiven['kind'], string][];

  protected readonly rows = computed(() =>
    (this.open.draft()?.givens ?? []).map((given, index) => ({
      given,
      title: given.name.trim() || `given ${String(index + 1)}`,
      printed: this.samples.variants().map((variant) => variant.givens[given.name.trim()]?.printed ?? '–'),
      expressionFaults: this.expressionFaults(index),
      listFault: this.open.faultAt(given.values, 'givens', index, 'values'),
    })),
  );

  /** Names that the statement uses and nobody gives yet. */
  protected readonly missing = computed(() => {
    const draft = this.open.draft();
    const given = new Set(draft?.givens.map((each) => each.name.trim()));
    const used = valUses(draft?.statement ?? '').map((use) => use.name);
    return [...new Set(used)].filter((name) => name !== '' && !given.has(name));
  });

  /** The other givens, which a derived one may use. */
  protected readonly names = computed<KeyNames>(() => ({
    values: (this.open.draft()?.givens ?? [])
      .filter((given) => given.name.trim() !== '')
      .map((given) => ({ name: given.name.trim(), detail: kindWords[given.kind] })),
    functions: [],
  }));

  private expressionFaults(index: number): readonly ExpressionFault[] {
    const isMine = (path: readonly (string | number)[]) => path.join('.') === `givens.${String(index)}.expression`;
    const typed = this.open.draft()?.givens[index]?.expression.trim() ?? '';
    if (typed === '' && !this.open.showsAll()) return [];
    const evaluated = this.samples.isWaiting() ? [] : this.samples.faults();
    return [...this.open.faults(), ...evaluated].filter((fault) => isMine(fault.path)).slice(0, 1);
  }

  protected fault(typed: string, index: number, field: keyof DraftGiven): string {
    return this.open.faultAt(typed, 'givens', index, field);
  }

  protected change(index: number, change: Partial<DraftGiven>): void {
    this.open.change((draft) => changeGiven(draft, index, change));
  }

  protected changeKind(index: number, kind: string): void {
    const [found] = this.kinds.find(([each]) => each === kind) ?? [];
    if (found) this.change(index, { kind: found });
  }

  /** A symbol that was never written follows the name. */
  protected changeName(index: number, name: string): void {
    const present = this.open.draft()?.givens[index];
    const follows = present?.symbol.trim() === present?.name.trim();
    this.change(index, follows ? { name, symbol: name.trim() } : { name });
  }

  protected add(name = ''): void {
    this.open.change((draft) => addGiven(draft, name));
  }

  protected remove(index: number): void {
    this.open.change((draft) => removeGiven(draft, index));
  }
}
