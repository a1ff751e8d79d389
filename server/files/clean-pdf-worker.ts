import { cleanPdf, type CleanedPdf } from './clean-pdf';

/** What a worker is sent. */
export interface PdfTask {
  readonly upload: Uint8Array;
  readonly mostPages: number;
}

export default ({ upload, mostPages }: PdfTask): Promise<CleanedPdf> => cleanPdf(upload, mostPages);
