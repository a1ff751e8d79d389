import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  effect,
  inject,
  input,
  linkedSignal,
  signal,
  viewChild,
} from '@angular/core';
import type { WorkedPage } from '@shared/marking';
import { PdfPages } from './pdf-pages';

/** The worked pages of one answer: one at a time, and one large at a key press. */
@Component({
  selector: 'app-worked-pages',
  templateUrl: './worked-pages.html',
  styleUrl: './worked-pages.scss',
  host: { '(document:keydown)': 'steer($event)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WorkedPages {
  private readonly pdf = inject(PdfPages);
  private readonly canvas = viewChild<ElementRef<HTMLCanvasElement>>('canvas');
  private readonly largeCanvas = viewChild<ElementRef<HTMLCanvasElement>>('largeCanvas');
  private readonly dialog = viewChild<ElementRef<HTMLDialogElement>>('dialog');

  readonly pages = input.required<readonly WorkedPage[]>();
  /** Whose pages they are, for those who hear it: a script's code. */
  readonly label = input('');

  /** Every page of every file, in order. */
  private readonly sheets = computed(() =>
    this.pages().flatMap((page) =>
      Array.from({ length: page.pageCount }, (_, index) => ({
        address: `/api${page.path}`,
        isPdf: page.mediaType === 'application/pdf',
        number: index + 1,
      })),
    ),
  );
  protected readonly count = computed(() => this.sheets().length);
  protected readonly at = linkedSignal<number, number>({ source: this.count, computation: () => 0 });
  protected readonly sheet = computed(() => this.sheets()[this.at()]);
  protected readonly failed = linkedSignal<unknown, boolean>({ source: this.sheet, computation: () => false });
  protected readonly isLarge = signal(false);
  protected readonly words = computed(
    () => `Worked page ${String(this.at() + 1)} of ${String(this.count())}${this.label() ? `, ${this.label()}` : ''}`,
  );

  constructor() {
    effect(() => {
      this.draw(this.canvas()?.nativeElement, 480);
    });
    effect(() => {
      if (this.isLarge()) this.draw(this.largeCanvas()?.nativeElement, 1200);
    });
  }

  /** Turns to the page so many steps on; the ends hold. */
  turn(steps: number): void {
    this.at.update((at) => Math.min(Math.max(0, this.count() - 1), Math.max(0, at + steps)));
  }

  /** Shows the page large; again, or Escape, closes it. */
  toggleLarge(): void {
    const dialog = this.dialog()?.nativeElement;
    if (!dialog || this.count() === 0) return;
    if (dialog.open) dialog.close();
    else {
      this.isLarge.set(true);
      dialog.showModal();
    }
  }

  protected steer(event: KeyboardEvent): void {
    if (!this.isLarge() || event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey) return;
    if (event.key === 'ArrowRight' || event.key === '.') this.turn(1);
    else if (event.key === 'ArrowLeft' || event.key === ',') this.turn(-1);
    else if (event.key === 'o') this.toggleLarge();
  }

  private draw(canvas: HTMLCanvasElement | undefined, width: number): void {
    const sheet = this.sheet();
    if (!canvas || !sheet?.isPdf) return;
    this.pdf.draw(sheet.address, sheet.number, canvas, width).catch(() => {
      // Not a file that can be drawn, or no connection: the page offers the file itself.
      this.failed.set(true);
    });
  }
}
