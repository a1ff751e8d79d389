import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  effect,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { MatIconModule } from '@angular/material/icon';
import type { SheetPage } from '@shared/scripts';
import { PdfPages } from '../../ui/worked-pages/pdf-pages';

/** A small picture of a worked page; of a PDF its first page. It leads to the file. */
@Component({
  selector: 'app-page-thumbnail',
  imports: [MatIconModule],
  template: `
    <a [href]="address()" target="_blank" rel="noopener" [attr.aria-label]="label() + ', open the file'">
      @if (failed()) {
        <mat-icon [svgIcon]="isPdf() ? 'picture_as_pdf' : 'description'" aria-hidden="true" />
      } @else if (isPdf()) {
        <canvas #canvas aria-hidden="true"></canvas>
      } @else {
        <img [src]="address()" alt="" (error)="failed.set(true)" />
      }
    </a>
  `,
  styleUrl: './page-thumbnail.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PageThumbnail {
  private readonly pdf = inject(PdfPages);
  private readonly canvas = viewChild<ElementRef<HTMLCanvasElement>>('canvas');

  readonly page = input.required<Pick<SheetPage, 'path' | 'mediaType'>>();
  readonly label = input.required<string>();

  protected readonly address = computed(() => `/api${this.page().path}`);
  protected readonly isPdf = computed(() => this.page().mediaType === 'application/pdf');
  protected readonly failed = signal(false);

  constructor() {
    effect((onCleanup) => {
      const canvas = this.canvas()?.nativeElement;
      if (!canvas || !this.isPdf()) return;
      const address = this.address();
      // What draws a PDF is larger than the whole sheet: it is fetched for what somebody looks at.
      const watch = new IntersectionObserver((seen) => {
        if (!seen.some(({ isIntersecting }) => isIntersecting)) return;
        watch.disconnect();
        this.pdf.draw(address, 1, canvas, 100).catch(() => {
          // No connection, or a file that cannot be drawn: a sign stands for it, and the link still leads to it.
          this.failed.set(true);
        });
      });
      watch.observe(canvas);
      onCleanup(() => watch.disconnect());
    });
  }
}
