import { Injectable } from '@angular/core';
import type { PDFDocumentProxy } from 'pdfjs-dist';

/** Draws pages of PDF files. The library and its worker load with the first file; what was opened once stays for a while. */
@Injectable({ providedIn: 'root' })
export class PdfPages {
  /** The newest last. */
  private readonly files = new Map<string, Promise<PDFDocumentProxy>>();

  /**
   * Draws one page into a canvas, as wide as asked for, sharp on this screen.
   *
   * @param number from 1
   */
  async draw(address: string, number: number, canvas: HTMLCanvasElement, width: number): Promise<void> {
    const file = await this.open(address);
    const page = await file.getPage(number);
    const scale = (width * Math.min(3, window.devicePixelRatio || 1)) / page.getViewport({ scale: 1 }).width;
    const viewport = page.getViewport({ scale });
    canvas.width = Math.floor(viewport.width);
    canvas.height = Math.floor(viewport.height);
    await page.render({ canvas, viewport }).promise;
  }

  private open(address: string): Promise<PDFDocumentProxy> {
    const before = this.files.get(address);
    if (before) return before;
    const opened = load(address);
    this.files.set(address, opened);
    opened.catch(() => this.files.delete(address));
    for (const [oldest, file] of this.files) {
      if (this.files.size <= 8) break;
      this.files.delete(oldest);
      void file.then((document) => document.loadingTask.destroy());
    }
    return opened;
  }
}

/** The library with one worker for all files: each of its own would be fetched and compiled again. */
const library = async () => {
  const pdf = await import('pdfjs-dist');
  pdf.GlobalWorkerOptions.workerSrc = '/pdf/pdf.worker.min.mjs';
  return { pdf, worker: new pdf.PDFWorker({}) };
};
let loaded: ReturnType<typeof library> | undefined;

async function load(address: string): Promise<PDFDocumentProxy> {
  loaded ??= library().catch((error: unknown) => {
    loaded = undefined;
    throw error;
  });
  const { pdf, worker } = await loaded;
  return pdf.getDocument({
    url: address,
    worker,
    isEvalSupported: false,
    enableXfa: false,
    // Fonts that a file uses without carrying them; they ship with the library.
    standardFontDataUrl: '/pdf/standard_fonts/',
    cMapUrl: '/pdf/cmaps/',
    cMapPacked: true,
    useSystemFonts: false,
  }).promise;
}
