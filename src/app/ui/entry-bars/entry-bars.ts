import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { injectElementWidth } from '../element-width';

const height = 72;
const foot = 18;
const head = 4;
const mostBars = 48;

/**
 * The entries of a list as bars while it is typed, so that a slip of the finger shows. The height is there before the
 * first entry, so that nothing moves.
 */
@Component({
  selector: 'app-entry-bars',
  template: `
    @let d = drawing();
    <svg role="img" [attr.aria-label]="sentence()" [attr.width]="width()" height="72">
      @for (bar of d.bars; track bar.index) {
        <rect
          [class.below]="bar.below"
          [attr.x]="bar.x"
          [attr.y]="bar.y"
          [attr.width]="bar.width"
          [attr.height]="bar.height"
        />
        @if (bar.numbered) {
          <text text-anchor="middle" [attr.x]="bar.middle" y="68">{{ bar.index }}</text>
        }
      }
      <path [attr.d]="d.zero" />
    </svg>
  `,
  styleUrl: './entry-bars.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EntryBars {
  protected readonly width = injectElementWidth(320);

  readonly entries = input.required<readonly number[]>();
  /** The number of the first entry: 0 for photon numbers. */
  readonly first = input(1);

  protected readonly sentence = computed(() => {
    const entries = this.entries();
    if (entries.length === 0) return 'No entry yet';
    const words = entries.slice(0, 12).map((entry, at) => `${String(at + this.first())}: ${printNumber(entry, 3)}`);
    return `${words.join('; ')}${entries.length > 12 ? '; and further' : ''}`;
  });

  protected readonly drawing = computed(() => {
    const entries = this.entries().slice(0, mostBars);
    const [most, least] = [Math.max(0, ...entries), Math.min(0, ...entries)];
    const room = height - foot - head;
    const scale = most - least > 0 ? room / (most - least) : 0;
    const zero = scale === 0 ? height - foot : head + most * scale;
    const step = Math.min(48, this.width() / Math.max(1, entries.length));
    const every = Math.max(1, Math.ceil(18 / step));
    return {
      zero: `M0 ${String(Math.round(zero) + 0.5)}H${String(this.width())}`,
      bars: entries.map((entry, at) => {
        const size = Math.max(Math.abs(entry) * scale, entry === 0 ? 0 : 0.8);
        return {
          index: at + this.first(),
          x: at * step + step * 0.18,
          y: entry < 0 ? zero : zero - size,
          width: step * 0.64,
          height: size,
          below: entry < 0,
          middle: (at + 0.5) * step,
          numbered: at % every === 0,
        };
      }),
    };
  });
}
