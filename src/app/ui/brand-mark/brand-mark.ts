import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** The mark: one beam, parted at a half-silvered mirror. It decorates the name beside it and says nothing itself. */
@Component({
  selector: 'app-brand-mark',
  template: `
    <svg viewBox="0 0 32 32" [attr.width]="size()" [attr.height]="size()" fill="none" aria-hidden="true">
      <path class="cube" d="M9 9h14v14H9zM9 23 23 9" />
      <path class="beam" d="M0 16h16" />
      <path class="parted" d="M16 16h16M16 16V0" />
    </svg>
  `,
  styles: `
    :host {
      display: inline-flex;
    }

    svg {
      display: block;
    }

    .cube {
      stroke: var(--silver-4);
      stroke-width: 1.5;
    }

    .beam {
      stroke: var(--line);
      stroke-width: 3;
    }

    .parted {
      stroke: var(--line);
      stroke-width: 1.5;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BrandMark {
  /** Width and height in pixels. */
  readonly size = input(26);
}
