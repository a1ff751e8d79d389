import { ChangeDetectionStrategy, Component, booleanAttribute, computed, input } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { injectElementWidth } from '../element-width';
import { type LooseLabel, placeLabels, stackDots } from './ruler-labels';
import { chooseScale, ratioScale } from './ruler-scale';

/** An anticipated wrong answer on the ruler. */
export interface RulerSlip {
  readonly name: string;
  readonly value: number;
}

/** An answer of the class; `chosen` where it belongs to the chosen pattern. */
export interface RulerAnswer {
  readonly value: number;
  readonly chosen?: boolean;
}

const edge = 8;
const labelRows = 3;

/**
 * A number line around a key: the band that counts as right, slips as ticks with their names, answers as dots beneath. With
 * `ratio` the axis is answer ÷ key, so that answers to different variants stand on one line.
 */
@Component({
  selector: 'app-tolerance-ruler',
  templateUrl: './tolerance-ruler.html',
  styleUrl: './tolerance-ruler.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ToleranceRuler {
  private readonly width = injectElementWidth(536);

  /** The key's value, in its unit. */
  readonly value = input.required<number>();
  /** From where to where an answer counts as right, in the same unit. */
  readonly band = input<{ readonly low: number; readonly high: number } | null>(null);
  readonly slips = input<readonly RulerSlip[]>([]);
  /** Answers of the class, in the key's unit, or as answer ÷ key with `ratio`. */
  readonly answers = input<readonly RulerAnswer[]>([]);
  /** The answer in hand, in the key's unit. */
  readonly answer = input<number | null>(null);
  /** Whether the axis is answer ÷ key. Value, band, slips and answer stay in the key's unit. */
  readonly ratio = input(false, { transform: booleanAttribute });
  readonly unit = input('');

  private readonly relative = computed(() => this.ratio() && this.value() !== 0);
  private readonly onAxis = computed(() => {
    const key = this.value();
    return this.relative() ? (value: number) => value / key : (value: number) => value;
  });

  private readonly scale = computed(() => {
    const onAxis = this.onAxis();
    const band = this.band();
    const values = [
      this.value(),
      ...this.slips().map((slip) => slip.value),
      ...(band ? [band.low, band.high] : []),
      ...(this.answer() === null ? [] : [this.answer() ?? 0]),
    ].map(onAxis);
    const [from, to] = [edge, Math.max(edge + 80, this.width() - edge)];
    return this.relative()
      ? ratioScale([...values, ...this.answers().map((each) => each.value)], from, to)
      : chooseScale(values, from, to);
  });

  protected readonly drawing = computed(() => {
    const { place, ticks } = this.scale();
    const onAxis = this.onAxis();
    const tall = this.relative();
    const width = Math.max(2 * edge + 80, this.width());
    const keyX = place(onAxis(this.value()));

    const slips = this.slips()
      .filter((slip) => Number.isFinite(slip.value))
      .map((slip) => ({ ...slip, x: place(onAxis(slip.value)) }));
    const answer = this.answer();
    const answerX = answer === null || !Number.isFinite(answer) ? null : place(onAxis(answer));
    const loose: LooseLabel[] = [
      { x: keyX, text: tall ? 'key' : `key ${printNumber(this.value(), 4)}`, bold: true },
      ...(answerX === null ? [] : [{ x: answerX, text: 'answer', bold: true }]),
      ...slips.map((slip) => ({ x: slip.x, text: slip.name, bold: false })),
    ];
    const placed = placeLabels(loose, width, labelRows);
    const rowsUsed = 1 + Math.max(...placed.map((label) => label.row ?? 0));
    const [keyLabel, ...others] = placed;
    const answerLabel = answerX === null ? undefined : others.shift();

    const base = (tall ? 22 : 20) + rowsUsed * 20 - (tall ? 6 : 0);
    const baseline = (row: number) => base - (tall ? 22 : 20) - row * 20;

    const band = this.band();
    const bandEnds = band ? [place(onAxis(band.low)), place(onAxis(band.high))].sort((a, b) => a - b) : null;
    const [bandFrom = 0, bandTo = 0] = bandEnds ?? [];

    const near = (x: number, y: number, within: number) => Math.abs(x - y) < within;
    const dotted = this.answers().length > 0;
    const pitch = tall ? 3.9 : 4;
    const dots = stackDots(
      this.answers()
        .filter((each) => Number.isFinite(each.value))
        .map((each) => ({ x: place(each.value), chosen: each.chosen ?? false })),
      tall ? 3.9 : 4.3,
      base + (tall ? 7 : 10),
      pitch,
      tall ? 7 : 5,
    );
    const tickY = base + (tall && dotted ? 50 : 20);
    return {
      width,
      height: tickY + 8,
      base,
      axis: `M${edge} ${base}H${width - edge}`,
      ticks: ticks.map((tick) => ({
        ...tick,
        line: `M${tick.at} ${base}v${tall ? 4 : 5}`,
        shown: tall || !near(tick.at, keyX, 24),
      })),
      tickY,
      band: bandEnds && { x: bandFrom, width: Math.max(2, bandTo - bandFrom), top: base - 12 },
      posts: bandEnds && `M${bandFrom} ${base - 12}v24M${bandTo} ${base - 12}v24`,
      key: { line: `M${keyX} ${base - 16}v32`, label: keyLabel && { ...keyLabel, y: baseline(keyLabel.row ?? 0) } },
      answer:
        answerX === null
          ? null
          : { x: answerX, y: base - 3, label: answerLabel, labelY: baseline(answerLabel?.row ?? 0) },
      slips: slips.map((slip, index) => {
        const label = others[index];
        const row = label?.row ?? 0;
        return { ...slip, label, y: baseline(row), line: `M${slip.x} ${baseline(row) + 6}V${base}` };
      }),
      dots: dots.dots,
      each: dots.each,
      radius: tall ? 1.5 : 2,
    };
  });

  protected readonly sentence = computed(() => {
    const unit = this.unit() ? ` ${this.unit()}` : '';
    const print = (value: number) => printNumber(value, 4) + unit;
    const band = this.band();
    const words = [`Key ${print(this.value())}`];
    if (band) words.push(`right from ${print(band.low)} to ${print(band.high)}`);
    const answer = this.answer();
    if (answer !== null) words.push(`this answer ${print(answer)}`);
    words.push(...this.slips().map((slip) => `slip “${slip.name}” at ${print(slip.value)}`));
    const count = this.answers().length;
    if (count > 0) words.push(`${count} ${count === 1 ? 'answer' : 'answers'} of the class`);
    return words.join('; ');
  });
}
