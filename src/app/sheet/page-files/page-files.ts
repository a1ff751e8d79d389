import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { firstValueFrom, lastValueFrom, tap } from 'rxjs';
import { largestUpload, pageMediaTypes, type SheetPage } from '@shared/scripts';
import { secondOf } from '@shared/times';
import { newIdempotencyKey } from '../../core/api/api-client';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { ScriptsApi } from '../../core/api/scripts-api';
import type { PartInHand } from '../sheet-keeper';
import { PageThumbnail } from './page-thumbnail';
import { sizeInWords } from './size-in-words';

/** A file on its way, or one that did not arrive. */
interface Upload {
  readonly key: string;
  readonly file: File;
  /** 0 to 1. */
  readonly share: number;
  readonly failure: string;
  /** Whether sending it again can help. */
  readonly again: boolean;
}

/** The worked pages of one part: what is kept, what is on its way, and the place to add one. */
@Component({
  selector: 'app-page-files',
  imports: [MatButtonModule, MatIconModule, PageThumbnail],
  templateUrl: './page-files.html',
  styleUrl: './page-files.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PageFiles {
  private readonly api = inject(ScriptsApi);

  readonly inHand = input.required<PartInHand>();
  readonly timeZone = input.required<string>();
  readonly readonly = input(false);

  protected readonly accepted = pageMediaTypes.join(',');
  protected readonly uploads = signal<readonly Upload[]>([]);
  protected readonly removed = signal<SheetPage | null>(null);
  protected readonly failure = signal('');
  protected readonly isOver = signal(false);

  /** The pages with the words under them: `page 1`, `pages 2 to 4`. */
  protected readonly files = computed(() => {
    let before = 0;
    return this.inHand()
      .pages()
      .map((page) => {
        const first = before + 1;
        before += page.pageCount;
        return {
          page,
          name: page.pageCount === 1 ? `page ${String(first)}` : `pages ${String(first)} to ${String(before)}`,
        };
      });
  });
  protected readonly summary = computed(() => {
    const pages = this.inHand().pages();
    const count = pages.reduce((sum, page) => sum + page.pageCount, 0);
    if (count === 0) return '';
    const bytes = pages.reduce((sum, page) => sum + page.bytes, 0);
    const last = Math.max(...pages.map((page) => page.addedAt));
    return `${String(count)} ${count === 1 ? 'page' : 'pages'} kept, ${sizeInWords(bytes)}, ${secondOf(last, this.timeZone())}`;
  });

  protected pick(event: Event): void {
    const field = event.target as HTMLInputElement;
    void this.uploadAll([...(field.files ?? [])]);
    field.value = '';
  }

  protected drop(event: DragEvent): void {
    event.preventDefault();
    this.isOver.set(false);
    void this.uploadAll([...(event.dataTransfer?.files ?? [])]);
  }

  protected drag(event: DragEvent, isOver: boolean): void {
    event.preventDefault();
    this.isOver.set(isOver);
  }

  protected dismiss(key: string): void {
    this.uploads.update((all) => all.filter((each) => each.key !== key));
  }

  protected async upload(file: File, key: string): Promise<void> {
    this.removed.set(null);
    this.put({ key, file, share: 0, failure: '', again: false });
    if (file.size > largestUpload) {
      const failure = `${file.name} has ${sizeInWords(file.size)}; at most ${sizeInWords(largestUpload)} are taken.`;
      this.put({ key, file, share: 0, failure, again: false });
      return;
    }
    try {
      await lastValueFrom(
        this.api.addPage(this.inHand().part.answerId, file, key).pipe(
          tap((news) => {
            if ('share' in news) this.put({ key, file, share: news.share, failure: '', again: false });
            else this.inHand().addPage(news.page);
          }),
        ),
      );
      this.dismiss(key);
    } catch (error) {
      const status = error instanceof RequestFailure ? error.details.status : -1;
      // No answer, or a server in trouble: the same file may pass the next time, under the same key.
      const again = status <= 0 || status >= 500;
      this.put({ key, file, share: 0, failure: `${file.name}: ${sentenceOf(error)}`, again });
    }
  }

  /** One after another, so that pages keep the order in which they were chosen. */
  private async uploadAll(files: readonly File[]): Promise<void> {
    for (const file of files) await this.upload(file, newIdempotencyKey());
  }

  protected async remove(page: SheetPage): Promise<void> {
    await this.attempt(async () => {
      await firstValueFrom(this.api.removePage(page.id));
      this.inHand().removePage(page);
      this.removed.set(page);
    });
  }

  protected async putBack(page: SheetPage): Promise<void> {
    await this.attempt(async () => {
      this.inHand().addPage(await firstValueFrom(this.api.restorePage(page.id)));
      this.removed.set(null);
    });
  }

  private async attempt(act: () => Promise<void>): Promise<void> {
    this.failure.set('');
    try {
      await act();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }

  private put(upload: Upload): void {
    this.uploads.update((all) =>
      all.some((each) => each.key === upload.key)
        ? all.map((each) => (each.key === upload.key ? upload : each))
        : [...all, upload],
    );
  }
}
