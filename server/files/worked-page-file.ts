import { fileTypeFromBuffer } from 'file-type';
import { mostPages } from '@shared/scripts';
import { wrongMediaType } from '../http/errors';
import { cleanImage } from './clean-image';
import { cleanPdfApart } from './clean-pdf-apart';
import type { CleanFile } from './clean-file';

/**
 * Makes of an upload what can be kept: its kind by content, never by name; a picture upright and without metadata; a PDF
 * that opens, holds no script and is not encrypted.
 *
 * @throws RequestError 415 with what to do instead
 */
export async function workedPageFile(upload: Buffer): Promise<CleanFile> {
  const kind = (await fileTypeFromBuffer(upload))?.mime ?? '';
  switch (kind) {
    case 'application/pdf':
      return cleanPdfApart(upload, mostPages);
    case 'image/jpeg':
    case 'image/png':
    case 'image/webp':
      return cleanImage(upload, kind);
    case 'image/heic':
    case 'image/heif':
    case 'image/avif':
      throw wrongMediaType(
        'This is a HEIC picture, which browsers cannot show. Set the camera to its most compatible format (JPEG), or take a screenshot of the picture, and add that.',
      );
    default:
      throw wrongMediaType('A worked page is a PDF, or a picture in JPEG, PNG or WebP. This file is none of them.');
  }
}
