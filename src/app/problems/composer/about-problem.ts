import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import type { Convention } from '@shared/primitives';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

/** What concerns the whole problem: tags, safety line, convention. */
@Component({
  selector: 'app-about-problem',
  imports: [TypedField],
  templateUrl: './about-problem.html',
  styleUrl: './about-problem.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AboutProblem {
  protected readonly open = inject(OpenProblem);

  protected readonly convention = computed(() => this.open.draft()?.convention);
  /** Laboratory work asks for a safety line. */
  protected readonly isLaboratory = computed(() => /\blab(oratory)?\b/i.test(this.open.draft()?.tags ?? ''));

  protected change(change: { readonly tags?: string; readonly safety?: string }): void {
    this.open.change((draft) => ({ ...draft, ...change }));
  }

  protected changeConvention(change: Partial<Convention>): void {
    this.open.change((draft) => ({ ...draft, convention: { ...draft.convention, ...change } }));
  }

  protected setVariance(text: string): void {
    this.changeConvention({ vacuumVariance: text === '1' ? 1 : text === '0.25' ? 0.25 : 0.5 });
  }

  protected setSign(text: string): void {
    this.changeConvention({ squeezingSign: text === '-1' ? -1 : 1 });
  }

  protected setPhase(text: string): void {
    this.changeConvention({ splitterPhase: text === '0' ? 0 : Math.PI / 2 });
  }
}
