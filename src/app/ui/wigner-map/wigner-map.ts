import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  afterRenderEffect,
  computed,
  input,
  viewChild,
} from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { axisTicks } from '../plane-axes';
import { injectSchemeChanges } from '../scheme-changes';
import { type Colour, colourOf, pixelsOf, readColour } from './diverging-map';

/** A Wigner function on a square grid. */
export interface WignerGrid {
  /** Points along each axis. */
  readonly points: number;
  readonly x: readonly [number, number];
  readonly p: readonly [number, number];
  /** The largest magnitude. */
  readonly scale: number;
  /** Row by row from the lowest p, in thousandths of `scale`. */
  readonly values: readonly number[];
  readonly least: number;
  readonly most: number;
}

const left = 38;
const foot = 34;
const barHeight = 8;

/**
 * W(x, p) as a map whose middle colour is zero, so that what is negative shows; axes of one scale, a bar of the colours
 * beneath. Readable from 96 px on, where the labels are left out.
 */
@Component({
  selector: 'app-wigner-map',
  template: `
    @let d = drawing();
    <div class="map" role="img" [attr.aria-label]="sentence()" [style.width.px]="d.width" [style.height.px]="d.height">
      <canvas
        #canvas
        [attr.width]="size() * 2"
        [attr.height]="size() * 2"
        [style.left.px]="d.left"
        [style.width.px]="size()"
        [style.height.px]="size()"
      ></canvas>
      <svg aria-hidden="true" [attr.width]="d.width" [attr.height]="d.height">
        <path [attr.d]="d.frame" />
        @if (!small()) {
          @for (tick of d.across; track tick.at) {
            <path [attr.d]="'M' + tick.at + ' ' + size() + 'v4'" />
            <text text-anchor="middle" [attr.x]="tick.at" [attr.y]="size() + 16">{{ tick.text }}</text>
          }
          @for (tick of d.up; track tick.at) {
            <path [attr.d]="'M' + d.left + ' ' + tick.at + 'h-4'" />
            <text text-anchor="end" [attr.x]="d.left - 6" [attr.y]="tick.at + 4">{{ tick.text }}</text>
          }
          <text class="name" text-anchor="middle" [attr.x]="d.left + size() / 2" [attr.y]="size() + 31">x</text>
          <text class="name" text-anchor="middle" x="5" [attr.y]="size() / 2 + 4">p</text>
        }
      </svg>
    </div>
    @if (!small()) {
      <div class="scale" aria-hidden="true" [style.margin-left.px]="d.left" [style.width.px]="size()">
        <canvas #bar [attr.width]="size()" height="8"></canvas>
        <span>{{ d.ends[0] }}</span>
        <span>0</span>
        <span>{{ d.ends[1] }}</span>
      </div>
    }
  `,
  styleUrl: './wigner-map.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WignerMap {
  private readonly canvas = viewChild.required<ElementRef<HTMLCanvasElement>>('canvas');
  private readonly bar = viewChild<ElementRef<HTMLCanvasElement>>('bar');
  private readonly schemeChanges = injectSchemeChanges();

  readonly grid = input.required<WignerGrid>();
  /** The side of the map in px. */
  readonly size = input(176);
  /** What the state is: `at output 2`. */
  readonly label = input('');

  protected readonly small = computed(() => this.size() < 140);

  protected readonly drawing = computed(() => {
    const { x, p, scale } = this.grid();
    const size = this.size();
    const at = this.small() ? 0 : left;
    return {
      left: at,
      width: at + size + 1,
      height: size + (this.small() ? 1 : foot),
      frame: `M${String(at + 0.5)} 0.5h${String(size - 1)}v${String(size - 1)}h${String(1 - size)}z`,
      across: axisTicks(x[0], x[1], at, at + size),
      up: axisTicks(p[0], p[1], size, 0),
      ends: [printNumber(-scale, 2), printNumber(scale, 2)],
    };
  });

  protected readonly sentence = computed(() => {
    const { x, p, least, most, scale } = this.grid();
    const range = (ends: readonly [number, number]) => `${printNumber(ends[0], 2)} to ${printNumber(ends[1], 2)}`;
    const negative =
      least < -1e-6 * scale ? `negative down to ${printNumber(least, 3)}` : 'nowhere negative beyond rounding';
    return `Wigner function${this.label() ? ` ${this.label()}` : ''}: x from ${range(x)}, p from ${range(p)}; at most ${printNumber(most, 3)}, ${negative}.`;
  });

  constructor() {
    afterRenderEffect(() => {
      this.schemeChanges();
      this.draw();
    });
  }

  private draw(): void {
    const { points, values } = this.grid();
    const canvas = this.canvas().nativeElement;
    const style = getComputedStyle(canvas);
    const token = (name: string, otherwise: Colour) => readColour(style.getPropertyValue(name)) ?? otherwise;
    const colours = {
      negative: token('--w-neg', [140, 47, 91]),
      zero: token('--w-zero', [251, 250, 246]),
      positive: token('--w-pos', [11, 110, 134]),
    };
    const context = canvas.getContext('2d');
    if (!context) return;
    const own = document.createElement('canvas');
    own.width = points;
    own.height = points;
    own.getContext('2d')?.putImageData(new ImageData(pixelsOf(values, points, 1000, colours), points, points), 0, 0);
    const side = this.size() * 2;
    context.imageSmoothingEnabled = true;
    context.imageSmoothingQuality = 'high';
    context.drawImage(own, 0, 0, side, side);
    const bar = this.bar()?.nativeElement;
    const beneath = bar?.getContext('2d');
    if (!bar || !beneath) return;
    for (let at = 0; at < bar.width; at++) {
      const [red, green, blue] = colourOf((2 * at) / (bar.width - 1) - 1, colours);
      beneath.fillStyle = `rgb(${String(red)} ${String(green)} ${String(blue)})`;
      beneath.fillRect(at, 0, 1, barHeight);
    }
  }
}
