import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { injectElementWidth } from '../../ui/element-width';

const height = 104;
const tallest = 104;

/** The totals of all scripts, the lowest first, one bar a script, with a sentence that says where the middle half lies. */
@Component({
  selector: 'app-totals-figure',
  template: `
    <p>{{ sentence() }}</p>
    @if (totals().length > 0) {
      <svg role="img" [attr.aria-label]="caption()" [attr.width]="width()" [attr.height]="height + 24">
        @for (bar of bars(); track $index) {
          <rect [attr.x]="bar.x" [attr.y]="bar.y" [attr.width]="bar.width" [attr.height]="bar.height" />
        }
        <path [attr.d]="'M0 ' + (height + 0.5) + 'H' + width()" />
        <text x="0" [attr.y]="height + 18">lowest {{ totals()[0] }}</text>
        @if (width() > 380) {
          <text text-anchor="middle" [attr.x]="width() / 2" [attr.y]="height + 18">{{ caption() }}</text>
        }
        <text text-anchor="end" [attr.x]="width()" [attr.y]="height + 18">highest {{ totals().at(-1) }}</text>
      </svg>
    }
  `,
  styles: `
    :host {
      display: block;
      min-width: 0;
    }

    p {
      margin: 4px 0 16px;
      font: 17px/24px var(--read);
    }

    svg {
      display: block;
      overflow: visible;
    }

    rect {
      fill: var(--ink);
      fill-opacity: 0.78;
    }

    path {
      stroke: var(--ink);
    }

    text {
      fill: var(--silver-4);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TotalsFigure {
  protected readonly width = injectElementWidth(576);
  protected readonly height = height;

  /** The lowest first. */
  readonly totals = input.required<readonly number[]>();
  readonly outOf = input.required<number>();

  protected readonly bars = computed(() => {
    const totals = this.totals();
    const pitch = this.width() / Math.max(1, totals.length);
    const width = Math.min(24, Math.max(1, Math.round(pitch * 0.62)));
    return totals.map((total, index) => {
      const size = Math.max(2, (total / Math.max(1, this.outOf())) * tallest);
      return { x: index * pitch, y: height - size, width, height: size };
    });
  });

  protected readonly sentence = computed(() => {
    const totals = this.totals();
    if (totals.length === 0) return 'No script has marks.';
    if (totals.length < 4) return `${String(totals.length)} ${totals.length === 1 ? 'script' : 'scripts'}.`;
    return `Half of the scripts lie between ${String(quantile(totals, 0.25))} and ${String(quantile(totals, 0.75))} marks.`;
  });

  protected readonly caption = computed(() => {
    const totals = this.totals();
    const mean = totals.reduce((sum, total) => sum + total, 0) / Math.max(1, totals.length);
    return `${String(totals.length)} totals of ${String(this.outOf())}, mean ${mean.toFixed(1)}`;
  });
}

/** The value below which a share of sorted values lies; one of the values. */
function quantile(sorted: readonly number[], share: number): number {
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? 0;
}
