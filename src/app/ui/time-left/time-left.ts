import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

const minute = 60_000;
const hour = 60 * minute;
const day = 24 * hour;

/**
 * The time between now and then in the two largest units that matter: `2 d 3 h`, `3 h 24 min`, `12 min`, `under a minute`.
 * Rounded down, so that nobody is promised time that is not there.
 */
export function spanInWords(milliseconds: number): string {
  const span = Math.abs(milliseconds);
  if (span < minute) return 'under a minute';
  const days = Math.floor(span / day);
  const hours = Math.floor((span % day) / hour);
  const minutes = Math.floor((span % hour) / minute);
  if (days >= 10) return `${days} d`;
  if (days > 0) return hours > 0 ? `${days} d ${hours} h` : `${days} d`;
  if (hours > 0) return minutes > 0 ? `${hours} h ${minutes} min` : `${hours} h`;
  return `${minutes} min`;
}

/** The time left until a moment, or gone since: `in 2 d 3 h`, `3 h ago`. */
@Component({
  selector: 'app-time-left',
  template: `<time [attr.datetime]="iso()">{{ words() }}</time>`,
  styles: `
    :host {
      white-space: nowrap;
    }

    :host(.soon) {
      color: var(--slip);
    }
  `,
  host: { '[class.soon]': 'soon()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TimeLeft {
  /** UTC milliseconds. */
  readonly until = input.required<number>();
  /** UTC milliseconds; the page's clock. */
  readonly now = input.required<number>();
  /** From how many milliseconds before it counts as soon; 0: never. */
  readonly soonWithin = input(0);

  protected readonly iso = computed(() => new Date(this.until()).toISOString());
  private readonly left = computed(() => this.until() - this.now());
  protected readonly soon = computed(() => this.left() > 0 && this.left() <= this.soonWithin());
  protected readonly words = computed(() => {
    const words = spanInWords(this.left());
    return this.left() >= 0 ? `in ${words}` : `${words} ago`;
  });
}
