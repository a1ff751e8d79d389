import { ChangeDetectionStrategy, Component } from '@angular/core';

/** Photons of one pulse: how many came, and how many of them went straight on. */
interface Pulse {
  readonly came: number;
  readonly straight: number;
}

/** Invented counts: each pulse's quanta, parted at a half-silvered mirror. */
const pulses: readonly Pulse[] = [
  { came: 5, straight: 3 },
  { came: 7, straight: 4 },
  { came: 4, straight: 1 },
  { came: 6, straight: 3 },
  { came: 9, straight: 5 },
  { came: 3, straight: 2 },
  { came: 6, straight: 2 },
  { came: 8, straight: 5 },
  { came: 3, straight: 2 },
];

const pitch = 38;
const dotPitch = 10;

interface Column {
  readonly x: number;
  readonly y: number;
  readonly count: number;
  readonly dots: readonly { readonly x: number; readonly y: number }[];
}

/** The picture beside the sign-in: counts along a beam before and behind a splitter. They add up, pulse by pulse. */
@Component({
  selector: 'app-pulse-count',
  template: `
    <svg width="1256" height="520" viewBox="0 0 1256 520" aria-hidden="true">
      <path class="beam strong" d="M0 440H600" />
      <path class="beam" d="M600 440H1256M600 440V0" />
      <path class="mirror" d="M528 368h144v144h-144zM528 512 672 368" />
      @for (column of columns; track $index) {
        @for (dot of column.dots; track $index) {
          <circle [attr.cx]="dot.x" [attr.cy]="dot.y" r="3" />
        }
        <text [attr.x]="column.x" [attr.y]="column.y">{{ column.count }}</text>
      }
    </svg>
  `,
  styles: `
    svg {
      display: block;
      fill: none;
    }
    .beam {
      stroke: var(--line);
      stroke-width: 2;
    }
    .strong {
      stroke-width: 4;
    }
    .mirror {
      stroke: var(--silver-4);
      stroke-width: 1.5;
    }
    circle {
      fill: var(--ink);
    }
    text {
      fill: var(--silver-4);
      text-anchor: middle;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PulseCount {
  protected readonly columns: readonly Column[] = pulses.flatMap(({ came, straight }, index) => [
    this.standing(496 - index * pitch, came),
    this.standing(704 + index * pitch, straight),
    this.lying(336 - index * pitch, came - straight),
  ]);

  private standing(x: number, count: number): Column {
    const dots = Array.from({ length: count }, (_, index) => ({ x, y: 424 - index * dotPitch }));
    return { x, y: 464, count, dots };
  }

  private lying(y: number, count: number): Column {
    const dots = Array.from({ length: count }, (_, index) => ({ x: 616 + index * dotPitch, y }));
    return { x: 584, y: y + 4, count, dots };
  }
}
