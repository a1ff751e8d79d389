import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  ElementRef,
  computed,
  effect,
  inject,
  input,
  output,
  signal,
  viewChildren,
} from '@angular/core';
import type { Sign } from './signs';

/**
 * A row of signs at the foot of the window, above a phone's keyboard where one is open. A tap leaves the cursor in the
 * answer; by keyboard it is one stop, walked with the arrow keys, and Escape goes back to the answer.
 */
@Component({
  selector: 'app-sign-row',
  template: `
    <div class="row" role="toolbar" [attr.aria-label]="label()">
      @for (sign of signs(); track sign.name) {
        <button
          #key
          type="button"
          [tabIndex]="$index === current() ? 0 : -1"
          [attr.aria-label]="sign.name"
          [title]="sign.name"
          (mousedown)="$event.preventDefault()"
          (focus)="visited.set($index)"
          (click)="chosen.emit(sign)"
        >
          {{ sign.label }}
        </button>
      }
    </div>
  `,
  styleUrl: './sign-row.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: {
    '[style.bottom]': 'bottom()',
    '(keydown.ArrowRight)': 'walk($event, 1)',
    '(keydown.ArrowLeft)': 'walk($event, -1)',
    '(keydown.Home)': 'walk($event, -1000)',
    '(keydown.End)': 'walk($event, 1000)',
    '(keydown.Escape)': 'left.emit()',
  },
})
export class SignRow {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  private readonly keys = viewChildren<ElementRef<HTMLButtonElement>>('key');

  readonly signs = input.required<readonly Sign[]>();
  /** What the row is called by those who hear it. */
  readonly label = input('Signs');
  readonly chosen = output<Sign>();
  /** Whoever walked the row wants back into the answer. */
  readonly left = output();

  protected readonly visited = signal(0);
  protected readonly current = computed(() => Math.min(this.visited(), this.signs().length - 1));
  private readonly covered = signal(0);
  /** Above the keyboard where it covers the page, otherwise above whatever stands at the page's foot. */
  protected readonly bottom = computed(() => (this.covered() > 0 ? `${String(this.covered())}px` : null));

  constructor() {
    const seen = window.visualViewport;
    if (seen) {
      const place = () => this.covered.set(Math.max(0, Math.round(window.innerHeight - seen.height - seen.offsetTop)));
      place();
      seen.addEventListener('resize', place);
      seen.addEventListener('scroll', place);
      inject(DestroyRef).onDestroy(() => {
        seen.removeEventListener('resize', place);
        seen.removeEventListener('scroll', place);
      });
    }
    // Another form begins at its own first sign.
    effect(() => {
      this.signs();
      this.host.nativeElement.scrollLeft = 0;
    });
  }

  protected walk(event: Event, by: number): void {
    event.preventDefault();
    const next = Math.min(Math.max(this.current() + by, 0), this.signs().length - 1);
    this.keys()[next]?.nativeElement.focus();
  }
}
