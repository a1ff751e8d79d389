import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { RouterLink } from '@angular/router';

/** For a lead at a bench: to the correction of the part, or of the chosen pattern into a slip. */
@Component({
  selector: 'app-correct-pattern',
  imports: [RouterLink],
  template: `
    <h2>Correct this part</h2>
    @if (isNamed()) {
      <p>
        <a [routerLink]="page()" [queryParams]="{ pattern: pattern() }">Make “{{ name() }}” a slip</a>
        <span class="quiet caption"
          >{{ total() }} {{ total() === 1 ? 'answer' : 'answers' }}; you see first what would change</span
        >
      </p>
    }
    <p><a [routerLink]="page()">Key, tolerance or slips</a></p>
  `,
  styles: `
    :host {
      display: block;
      margin-top: 24px;
    }

    p {
      margin-top: 8px;
    }

    .caption {
      display: block;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CorrectPattern {
  readonly courseId = input.required<string>();
  readonly pileId = input.required<string>();
  /** The chosen pattern's key; null for none. */
  readonly pattern = input.required<string | null>();
  readonly name = input('');
  readonly total = input(0);
  /** The names of slips that the part has already. */
  readonly slips = input<readonly string[]>([]);

  protected readonly page = computed(() => ['/courses', this.courseId(), 'marking', this.pileId(), 'correction']);
  /** Only a relation to the key can be written as an expression, and only once. */
  protected readonly isNamed = computed(
    () => this.pattern()?.startsWith('relation ') === true && !this.slips().includes(this.name()),
  );
}
