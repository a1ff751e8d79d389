import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { linearScale } from '../tolerance-ruler/ruler-scale';

const left = 28;
const top = 9;
const foot = 20;

/** A photon-number distribution as bars, from 0 photons on. */
@Component({
  selector: 'app-probability-bars',
  templateUrl: './probability-bars.html',
  styleUrl: './probability-bars.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ProbabilityBars {
  /** P(first), P(first + 1), … */
  readonly probabilities = input.required<readonly number[]>();
  /** The photon number of the first bar. */
  readonly first = input(0);
  /** From one bar's photon number to the next. */
  readonly step = input(1);
  /** The photon number of the key, drawn in the line's colour. */
  readonly highlight = input<number | null>(null);
  /** What the distribution is of: `P(n) at output 2`. */
  readonly label = input('P(n)');
  readonly width = input(184);
  readonly height = input(172);

  /** Bars with their numbers; a long tail of next to nothing is cut, and said to be. */
  private readonly shown = computed(() => {
    const all = this.probabilities().map((p) => (Number.isFinite(p) && p > 0 ? p : 0));
    const highest = Math.max(0, ...all);
    let count = all.length;
    const keep = Math.max(8, ((this.highlight() ?? 0) - this.first()) / this.step() + 1);
    while (count > keep && (all[count - 1] ?? 0) < highest / 1000) count--;
    return all.slice(0, count);
  });

  protected readonly drawing = computed(() => {
    const bars = this.shown();
    const [width, base] = [this.width(), this.height() - foot];
    const highest = Math.max(...bars, 1e-300);
    const scale = linearScale([0, highest / 1.06], base, top);
    const step = (width - left) / Math.max(1, bars.length);
    // Longer numbers need more room.
    const digits = String(this.first() + this.step() * bars.length).length;
    const every = Math.max(1, Math.ceil((digits > 2 ? 8 * digits + 6 : 18) / step));
    return {
      base,
      baseLine: `M${left} ${base + 0.5}H${width}`,
      levels: scale.ticks
        .filter((tick) => tick.at < base - 1 && tick.at >= top - 5)
        .map((tick) => ({ ...tick, text: tick.text.replace(/^0\./, '.'), line: `M${left} ${tick.at}H${width}` })),
      bars: bars.map((p, at) => {
        const n = at * this.step() + this.first();
        const y = Math.min(scale.place(p), p > 0 ? base - 0.6 : base);
        return {
          n,
          x: left + at * step + step * 0.22,
          width: step * 0.56,
          y,
          height: base - y,
          middle: left + (at + 0.5) * step,
          numbered: at % every === 0 || n === this.highlight(),
          highlighted: n === this.highlight(),
        };
      }),
    };
  });

  protected readonly sentence = computed(() => {
    const bars = this.shown();
    const words = bars.slice(0, 12).map((p, at) => `${at * this.step() + this.first()}: ${printNumber(p, 3)}`);
    return `${this.label()}. ${words.join('; ')}${bars.length > 12 ? '; and further' : ''}`;
  });
}
