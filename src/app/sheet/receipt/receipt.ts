import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { RouterLink } from '@angular/router';
import { canonicalForm, type Receipt } from '@shared/scripts';
import { fullMomentOf, secondOf, zoneOf } from '@shared/times';
import { sentenceOf } from '../../core/api/request-failure';
import { ScriptsApi } from '../../core/api/scripts-api';
import { PageTitle } from '../../core/page-title';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { sizeInWords } from '../page-files/size-in-words';

/** Proof of what was handed in and when. */
@Component({
  selector: 'app-receipt',
  imports: [ErrorState, LoadingBars, MatButtonModule, MatIconModule, RouterLink],
  templateUrl: './receipt.html',
  styleUrl: './receipt.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ReceiptPage {
  private readonly api = inject(ScriptsApi);
  private readonly pageTitle = inject(PageTitle);

  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();

  protected readonly sizeInWords = sizeInWords;
  protected readonly fetched = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.receipt(params),
  });
  protected readonly problem = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly receipt = computed(() => (this.fetched.hasValue() ? this.fetched.value() : null));
  /** Whether this browser comes to the same digest; null where it cannot compute it. */
  protected readonly agrees = signal<boolean | null>(null);
  protected readonly isCopied = signal(false);

  protected readonly time = computed(() => {
    const its = this.receipt();
    if (!its) return '';
    const { at } = its.submission;
    const day = fullMomentOf(at, its.timeZone).split(',')[0] ?? '';
    return `${day}, ${secondOf(at, its.timeZone)} ${zoneOf(at, its.timeZone)}`;
  });
  protected readonly earlier = computed(() => {
    const its = this.receipt();
    return (its?.earlier ?? []).map((each) => ({
      ...each,
      time: fullMomentOf(each.at, its?.timeZone ?? 'UTC'),
    }));
  });
  protected readonly closing = computed(() => {
    const its = this.receipt();
    return its?.closesAt == null ? '' : fullMomentOf(its.closesAt, its.timeZone);
  });
  protected readonly answered = computed(
    () => this.receipt()?.parts.filter((part) => part.text.trim() !== '' || part.pages.length > 0).length ?? 0,
  );

  constructor() {
    effect(() => {
      const its = this.receipt();
      if (!its) return;
      this.pageTitle.set(`Receipt for Set ${String(its.number)}`);
      void digestInBrowser(its).then((digest) => {
        this.agrees.set(digest === null ? null : digest === its.submission.digest);
      });
    });
  }

  /** The receipt as a file: what was signed, the signature, the public key, and what the digest is of. */
  protected download(its: Receipt): void {
    const file = JSON.stringify({ ...its.signed, content: its.content }, null, 2);
    const address = URL.createObjectURL(new Blob([file], { type: 'application/json' }));
    const link = document.createElement('a');
    link.href = address;
    link.download = `receipt-set-${String(its.number)}-${its.code}-submission-${String(its.submission.number)}.json`;
    link.click();
    URL.revokeObjectURL(address);
  }

  protected async copy(its: Receipt): Promise<void> {
    await navigator.clipboard.writeText(its.submission.digest);
    this.isCopied.set(true);
  }

  protected print(): void {
    window.print();
  }
}

/** SHA-256 of the canonical form, in hexadecimal; null where the browser offers none, as over plain HTTP. */
async function digestInBrowser({ content }: Receipt): Promise<string | null> {
  const subtle = globalThis.crypto.subtle as SubtleCrypto | undefined;
  if (!subtle) return null;
  const bytes = await subtle.digest('SHA-256', new TextEncoder().encode(canonicalForm(content)));
  return Array.from(new Uint8Array(bytes), (byte) => byte.toString(16).padStart(2, '0')).join('');
}
