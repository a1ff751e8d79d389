import { ChangeDetectionStrategy, Component, computed, inject, input, linkedSignal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatMenuModule } from '@angular/material/menu';
import type { DraftCriterion, DraftPart } from '@shared/problem-draft';
import { partLabel, type CriterionKind, type Verdict } from '@shared/problems';
import { readTypedNumber, typeNumber } from '@shared/typed-number';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { addCriterion, changeCriterion, changePart, moveCriterion, removeCriterion } from './draft-changes';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

const kindWords: Readonly<Record<CriterionKind, string>> = {
  M: 'method',
  A: 'accuracy',
  B: 'independent',
  ft: 'follow-through',
};

/** The verdicts for which a criterion can be proposed. */
const proposing: readonly Verdict[] = ['right', 'unit', 'follow-through', 'slip'];
/** Of a choice there is no unit, no follow-through and no slip. */
const proposingForChoice: readonly Verdict[] = ['right'];

/** The mark scheme of a part: its criteria, and what stands without a person. */
@Component({
  selector: 'app-mark-scheme',
  imports: [FormulaText, MatButtonModule, MatIconModule, MatMenuModule, TypedField],
  templateUrl: './mark-scheme.html',
  styleUrl: './mark-scheme.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MarkScheme {
  protected readonly open = inject(OpenProblem);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();

  protected readonly kinds = Object.entries(kindWords) as [CriterionKind, string][];
  protected readonly verdicts = computed(() => (this.part().answer.form === 'choice' ? proposingForChoice : proposing));
  protected readonly label = computed(() => partLabel(this.index()));
  /** Criteria whose guidance is open although nothing is written there yet. */
  protected readonly opened = linkedSignal<string, ReadonlySet<string>>({
    source: () => this.part().id,
    computation: () => new Set<string>(),
  });

  protected readonly total = computed(() => {
    const sum = this.part().criteria.reduce((total, each) => total + (readTypedNumber(each.marks) ?? 0), 0);
    return `${typeNumber(sum)} ${sum === 1 ? 'mark' : 'marks'}`;
  });
  protected readonly wholeFault = computed(() =>
    this.open.showsAll() ? (this.open.faultsAt('parts', this.index(), 'criteria')[0]?.message ?? '') : '',
  );
  protected readonly isComputed = computed(() => this.part().answer.form !== 'worked');

  protected fault(typed: string, index: number, field: keyof DraftCriterion): string {
    return this.open.faultAt(typed, 'parts', this.index(), 'criteria', index, field);
  }

  protected change(index: number, change: Partial<DraftCriterion>): void {
    this.open.change((draft) => changeCriterion(draft, this.index(), index, change));
  }

  protected changeKind(index: number, kind: string): void {
    const [found] = this.kinds.find(([each]) => each === kind) ?? [];
    if (found) this.change(index, { kind: found });
  }

  protected toggleVerdict(index: number, verdict: Verdict, isOn: boolean): void {
    const present = this.part().criteria[index]?.awardedBy ?? [];
    this.change(index, {
      awardedBy: proposing.filter((each) => (each === verdict ? isOn : present.includes(each))),
    });
  }

  protected toggleStanding(verdict: 'right' | 'unanswered', isOn: boolean): void {
    const standsAlone = (['right', 'unanswered'] as const).filter((each) =>
      each === verdict ? isOn : this.part().standsAlone.includes(each),
    );
    this.open.change((draft) => changePart(draft, this.index(), { standsAlone }));
  }

  protected setWorkedPage(workedPage: boolean): void {
    this.open.change((draft) => changePart(draft, this.index(), { workedPage }));
  }

  protected openGuidance(criterion: DraftCriterion): void {
    this.opened.update((opened) => new Set([...opened, criterion.id]));
  }

  protected add(kind: CriterionKind): void {
    this.open.change((draft) => addCriterion(draft, this.index(), kind, crypto.randomUUID()));
  }

  protected move(from: number, to: number): void {
    this.open.change((draft) => moveCriterion(draft, this.index(), from, to));
  }

  protected remove(index: number): void {
    this.open.change((draft) => removeCriterion(draft, this.index(), index));
  }
}
