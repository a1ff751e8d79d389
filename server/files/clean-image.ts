import sharp from 'sharp';
import { wrongMediaType } from '../http/errors';
import type { CleanFile } from './clean-file';

/** Most pixels of an upload: a 64-megapixel telephone just fits. */
const mostPixels = 70_000_000;

/** Longest edge that is kept; a page of A4 at 250 dots an inch. */
const longestEdge = 3000;

/**
 * A picture upright, of sensible size, and without metadata: where and by whom it was taken is nobody's business, and would
 * unmask a script.
 *
 * @throws RequestError 415 where it is broken, or has more pixels than are taken
 */
export async function cleanImage(
  upload: Buffer,
  mediaType: 'image/jpeg' | 'image/png' | 'image/webp',
): Promise<CleanFile> {
  try {
    const upright = sharp(upload, { limitInputPixels: mostPixels, failOn: 'error' })
      .rotate()
      .resize({ width: longestEdge, height: longestEdge, fit: 'inside', withoutEnlargement: true });
    const encoded = {
      'image/jpeg': () => upright.jpeg({ quality: 85 }),
      'image/png': () => upright.png({ compressionLevel: 9 }),
      'image/webp': () => upright.webp({ quality: 85 }),
    }[mediaType]();
    return { bytes: await encoded.toBuffer(), mediaType, pageCount: 1 };
  } catch (error) {
    // sharp tells of broken pictures and of too many pixels in words only.
    const tooMany = error instanceof Error && error.message.includes('pixel limit');
    throw wrongMediaType(
      tooMany
        ? 'The picture has more than 70 million pixels. Make it smaller, and add it again.'
        : 'The picture is broken and cannot be opened. Take it again, or export it as JPEG.',
    );
  }
}
