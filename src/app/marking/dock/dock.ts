import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { BenchAnswer } from '@shared/marking';
import type { Criterion } from '@shared/problems';
import { CriterionToggle } from '../../ui/criterion-toggle/criterion-toggle';
import { ApplyPattern } from '../pattern/apply-pattern';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { BenchHand } from '../bench/bench-hand';
import { BenchNotices } from '../bench/bench-notices';
import { criterionKeys } from '../bench/bench-keys';

/** Where marks are given: the mark scheme, the remark, the total, and what to do with the answer. */
@Component({
  selector: 'app-dock',
  imports: [ApplyPattern, CriterionToggle, FormulaText, MatButtonModule],
  templateUrl: './dock.html',
  styleUrl: './dock.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Dock {
  protected readonly hand = inject(BenchHand);
  protected readonly notices = inject(BenchNotices);
  private readonly remark = viewChild<ElementRef<HTMLTextAreaElement>>('remark');
  private readonly reason = viewChild<ElementRef<HTMLTextAreaElement>>('asideReason');
  private readonly pattern = viewChild(ApplyPattern);
  private readonly dialog = viewChild<ElementRef<HTMLDialogElement>>('asideDialog');

  readonly criteria = input.required<readonly Criterion[]>();
  readonly marks = input.required<number>();
  /** Whether single keys act. */
  readonly singleKeys = input(true);
  /** Whether this person may return what was set aside. */
  readonly mayReturn = input(false);

  /** The keys are asked for. */
  readonly keysAsked = output();

  protected readonly asideProblem = signal('');
  protected readonly answer = computed<BenchAnswer | null>(() => this.hand.current());
  protected readonly check = computed(() => {
    const answer = this.answer();
    if (!answer?.verdict) return '';
    const name = answer.verdict === 'slip' || answer.verdict === 'wrong' ? answer.relation?.name : answer.verdict;
    return `The check reads “${name ?? answer.verdict}”. It is evidence, not a decision.`;
  });
  protected readonly aside = computed(() => this.answer()?.state === 'set aside');

  protected keyOf(index: number): string {
    return this.singleKeys() ? (criterionKeys[index] ?? '') : '';
  }

  protected isAwarded(criterionId: string): boolean {
    return this.hand.draft()?.awarded.includes(criterionId) ?? false;
  }

  /** Puts the cursor into the remark. */
  focusRemark(): void {
    this.remark()?.nativeElement.focus();
  }

  /** Shows what the mark in hand would reach if it were applied to its pattern. */
  askPattern(): void {
    void this.pattern()?.ask();
  }

  /** Takes the last application to a pattern back. */
  undoPattern(): void {
    void this.pattern()?.undo();
  }

  /** Asks for the reason to set the answer aside. */
  askAside(): void {
    const dialog = this.dialog()?.nativeElement;
    if (!dialog || dialog.open || !this.hand.canMark() || this.answer()?.state !== 'waits') return;
    this.asideProblem.set('');
    dialog.showModal();
  }

  protected setAside(text: string): void {
    const reason = text.trim();
    if (!reason) {
      this.asideProblem.set('Say why, so that the lead knows what to look at.');
      this.reason()?.nativeElement.focus();
      return;
    }
    this.closeAside();
    this.hand.setAside(reason);
  }

  protected closeAside(): void {
    const field = this.reason()?.nativeElement;
    if (field) field.value = '';
    this.dialog()?.nativeElement.close();
  }
}
