import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { axisTicks } from '../plane-axes';

/** Where a state's amplitude is, and the radius of its spread. */
export interface PathStep {
  readonly x: number;
  readonly p: number;
  readonly spread: number;
}

const left = 38;
const foot = 34;
/** Circles on the way, between the first and the last. */
const between = 4;

/** The way of a mean amplitude in phase space, with the circle of the spread where it begins, on the way and where it ends. */
@Component({
  selector: 'app-amplitude-path',
  template: `
    @let d = drawing();
    <svg role="img" [attr.aria-label]="sentence()" [attr.width]="d.width" [attr.height]="d.height">
      <path class="axis" [attr.d]="d.frame" />
      <path class="zero" [attr.d]="d.zeros" />
      @for (tick of d.across; track tick.at) {
        <path class="axis" [attr.d]="'M' + tick.at + ' ' + size() + 'v4'" />
        <text text-anchor="middle" [attr.x]="tick.at" [attr.y]="size() + 16">{{ tick.text }}</text>
      }
      @for (tick of d.up; track tick.at) {
        <path class="axis" [attr.d]="'M' + d.left + ' ' + tick.at + 'h-4'" />
        <text text-anchor="end" [attr.x]="d.left - 6" [attr.y]="tick.at + 4">{{ tick.text }}</text>
      }
      <text class="name" text-anchor="middle" [attr.x]="d.left + size() / 2" [attr.y]="size() + 31">x</text>
      <text class="name" text-anchor="middle" x="5" [attr.y]="size() / 2 + 4">p</text>
      @for (circle of d.circles; track $index) {
        <circle
          [class.start]="$first"
          [class.end]="$last"
          [attr.cx]="circle.x"
          [attr.cy]="circle.y"
          [attr.r]="circle.r"
        />
      }
      <path class="way" [attr.d]="d.way" />
      <circle class="dot" r="3" [attr.cx]="d.end.x" [attr.cy]="d.end.y" />
    </svg>
  `,
  styleUrl: './amplitude-path.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AmplitudePath {
  readonly steps = input.required<readonly PathStep[]>();
  /** The side of the picture in px. */
  readonly size = input(176);

  protected readonly drawing = computed(() => {
    const steps = this.steps();
    const size = this.size();
    const ends = (of: 'x' | 'p') => [
      Math.min(0, ...steps.map((step) => step[of] - step.spread)),
      Math.max(0, ...steps.map((step) => step[of] + step.spread)),
    ];
    const [[x0 = 0, x1 = 0], [p0 = 0, p1 = 0]] = [ends('x'), ends('p')];
    const half = (Math.max(x1 - x0, p1 - p0, 1e-9) / 2) * 1.06;
    const [xm, pm] = [(x0 + x1) / 2, (p0 + p1) / 2];
    const across = (x: number) => left + ((x - xm + half) / (2 * half)) * size;
    const up = (p: number) => ((pm + half - p) / (2 * half)) * size;
    const circle = ({ x, p, spread }: PathStep) => ({ x: across(x), y: up(p), r: (spread / (2 * half)) * size });
    const count = steps.length;
    const shown = Array.from(
      { length: between + 2 },
      (_, index) => steps[Math.round((index * (count - 1)) / (between + 1))],
    ).filter((step) => step !== undefined);
    const round = (value: number) => String(Math.round(value * 100) / 100);
    const circles = shown.map(circle);
    return {
      left,
      width: left + size + 1,
      height: size + foot,
      frame: `M${String(left + 0.5)} 0.5h${String(size - 1)}v${String(size - 1)}h${String(1 - size)}z`,
      zeros: `M${String(left)} ${round(up(0))}h${String(size)}M${round(across(0))} 0v${String(size)}`,
      across: axisTicks(xm - half, xm + half, left, left + size),
      up: axisTicks(pm - half, pm + half, size, 0),
      circles,
      end: circles.at(-1) ?? { x: 0, y: 0, r: 0 },
      way: steps.map(({ x, p }, index) => `${index === 0 ? 'M' : 'L'}${round(across(x))} ${round(up(p))}`).join(''),
    };
  });

  protected readonly sentence = computed(() => {
    const [start, end] = [this.steps()[0], this.steps().at(-1)];
    if (!start || !end) return 'No path';
    const at = ({ x, p, spread }: PathStep) =>
      `(${printNumber(x, 3)}, ${printNumber(p, 3)}) with a spread of ${printNumber(spread, 3)}`;
    return `Mean amplitude in phase space, from ${at(start)} to ${at(end)}.`;
  });
}
