import { ChangeDetectionStrategy, Component, booleanAttribute, computed, input } from '@angular/core';

/** One of the eight hues of markers. */
export type MarkerHue = 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8;

/** The class that carries a hue; numbers beyond eight begin again. */
export function hueClass(hue: number, mine = false): string {
  return mine ? 'mine' : `hue-${((Math.max(1, Math.round(hue)) - 1) % 8) + 1}`;
}

/** A marker: initials beside their hue, so that neither has to be told apart alone. */
@Component({
  selector: 'app-marker-token',
  template: `<abbr [class]="colour()" [title]="name()">{{ initials() }}</abbr>`,
  styleUrl: './marker-token.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MarkerToken {
  /** The full name. */
  readonly name = input.required<string>();
  readonly initials = input.required<string>();
  /** 1 to 8. */
  readonly hue = input.required<number>();
  /** Whether it is the reader. */
  readonly mine = input(false, { transform: booleanAttribute });

  protected readonly colour = computed(() => hueClass(this.hue(), this.mine()));
}
