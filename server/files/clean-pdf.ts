import { PDFArray, PDFDict, PDFDocument, PDFName, PDFStream, type PDFObject } from 'pdf-lib';
import type { CleanFile } from './clean-file';

/** Names in a PDF that make it do something, or carry other files. */
const actingNames = [
  'JS',
  'JavaScript',
  'Launch',
  'EmbeddedFile',
  'EmbeddedFiles',
  'RichMedia',
  'XFA',
  'SubmitForm',
  'ImportData',
];

/** A PDF as it can be kept, or why it cannot. */
export type CleanedPdf = CleanFile | { readonly refused: string };

export const brokenPdf = 'The PDF is broken and cannot be opened. Export or print it again, and add that.';

/**
 * A PDF that opens, with a sensible number of pages and nothing that acts, without the names of its maker and program; or
 * a sentence where it is encrypted, broken, too long, or carries scripts or other files. A small file can unfold into one
 * that takes minutes: `cleanPdfApart` bounds it.
 */
export async function cleanPdf(upload: Uint8Array, mostPages: number): Promise<CleanedPdf> {
  const document = await open(upload);
  if (typeof document === 'string') return { refused: document };
  if (carriesScripts(document))
    return {
      refused:
        'The PDF carries a script, a form or another file, which is not taken. Print it to a new PDF, and add that.',
    };
  const pageCount = document.getPageCount();
  if (pageCount === 0) return { refused: 'The PDF has no pages.' };
  if (pageCount > mostPages)
    return {
      refused: `The PDF has ${String(pageCount)} pages; at most ${String(mostPages)} are taken. Leave out what is not needed.`,
    };
  document.context.trailerInfo.Info = undefined;
  document.catalog.delete(PDFName.of('Metadata'));
  document.catalog.delete(PDFName.of('OpenAction'));
  document.catalog.delete(PDFName.of('AA'));
  try {
    return { bytes: await document.save({ addDefaultPage: false }), mediaType: 'application/pdf', pageCount };
  } catch {
    // Whatever stands in it that cannot be written again.
    return { refused: brokenPdf };
  }
}

/** The document, or why it cannot be opened. */
async function open(upload: Uint8Array): Promise<PDFDocument | string> {
  try {
    const document = await PDFDocument.load(upload, { updateMetadata: false, throwOnInvalidObject: true });
    // A file without a page tree loads, but falls apart here.
    document.getPageCount();
    return document;
  } catch (error) {
    // Its class does not survive the library's translation to older JavaScript; its words do.
    return error instanceof Error && error.message.includes('is encrypted')
      ? 'The PDF is protected by a password. Save it without one, and add that.'
      : brokenPdf;
  }
}

function carriesScripts(document: PDFDocument): boolean {
  return document.context.enumerateIndirectObjects().some(([, object]) => acts(object));
}

function acts(object: PDFObject | undefined): boolean {
  if (object instanceof PDFStream) return acts(object.dict);
  if (object instanceof PDFArray) return object.asArray().some(acts);
  if (!(object instanceof PDFDict)) return object instanceof PDFName && isActing(object);
  return object.entries().some(([name, value]) => isActing(name) || acts(value));
}

function isActing(name: PDFName): boolean {
  return actingNames.includes(name.decodeText());
}
