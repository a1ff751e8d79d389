import { PDFArray, PDFDict, PDFDocument, PDFName, PDFStream, type PDFObject } from 'pdf-lib';
import { wrongMediaType } from '../http/errors';
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

/**
 * A PDF that opens, with a sensible number of pages and nothing that acts, without the names of its maker and program.
 *
 * @throws RequestError 415 where it is encrypted, broken, too long, or carries scripts or other files
 */
export async function cleanPdf(upload: Uint8Array, mostPages: number): Promise<CleanFile> {
  const document = await open(upload);
  if (carriesScripts(document))
    throw wrongMediaType(
      'The PDF carries a script, a form or another file, which is not taken. Print it to a new PDF, and add that.',
    );
  const pageCount = document.getPageCount();
  if (pageCount === 0) throw wrongMediaType('The PDF has no pages.');
  if (pageCount > mostPages)
    throw wrongMediaType(
      `The PDF has ${String(pageCount)} pages; at most ${String(mostPages)} are taken. Leave out what is not needed.`,
    );
  document.context.trailerInfo.Info = undefined;
  document.catalog.delete(PDFName.of('Metadata'));
  document.catalog.delete(PDFName.of('OpenAction'));
  document.catalog.delete(PDFName.of('AA'));
  try {
    return { bytes: await document.save({ addDefaultPage: false }), mediaType: 'application/pdf', pageCount };
  } catch {
    // Whatever stands in it that cannot be written again.
    throw wrongMediaType(broken);
  }
}

const broken = 'The PDF is broken and cannot be opened. Export or print it again, and add that.';

async function open(upload: Uint8Array): Promise<PDFDocument> {
  try {
    const document = await PDFDocument.load(upload, { updateMetadata: false, throwOnInvalidObject: true });
    // A file without a page tree loads, but falls apart here.
    document.getPageCount();
    return document;
  } catch (error) {
    throw wrongMediaType(
      // Its class does not survive the library's translation to older JavaScript; its words do.
      error instanceof Error && error.message.includes('is encrypted')
        ? 'The PDF is protected by a password. Save it without one, and add that.'
        : broken,
    );
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
