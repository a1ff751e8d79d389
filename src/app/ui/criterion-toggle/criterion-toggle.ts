import { ChangeDetectionStrategy, Component, booleanAttribute, computed, input, model } from '@angular/core';
import { MatIconModule } from '@angular/material/icon';

/**
 * A criterion in the dock: awarded or not awarded, by click or by its key. The key itself is listened to by the page, since it
 * acts wherever the focus is. What must be there, and a ruling that bears on it, are projected beneath.
 */
@Component({
  selector: 'app-criterion-toggle',
  imports: [MatIconModule],
  templateUrl: './criterion-toggle.html',
  styleUrl: './criterion-toggle.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CriterionToggle {
  /** As it is called on the bench: `M1`. */
  readonly name = input.required<string>();
  readonly marks = input.required<number>();
  readonly awarded = model(false);
  /** The key of the keyboard that does the same; empty where single keys are switched off. */
  readonly keyCap = input('');
  /** Whether a ruling has just changed it. */
  readonly changed = input(false, { transform: booleanAttribute });
  /** Whether it can only be read. */
  readonly disabled = input(false, { transform: booleanAttribute });

  protected readonly worth = computed(() => `${this.marks()} ${this.marks() === 1 ? 'mark' : 'marks'}`);
  protected readonly words = computed(() => (this.awarded() ? 'awarded' : 'not awarded'));

  /** Awards it, or takes the award back. */
  toggle(): void {
    if (!this.disabled()) this.awarded.set(!this.awarded());
  }
}
