import { pipeline } from 'node:stream/promises';
import type { Response } from 'express';
import type { FileStore } from './file-store';

/** A file on its way out. */
export interface SentFile {
  readonly storageKey: string;
  readonly mediaType: string;
  readonly bytes: number;
  /** Without a student's name. */
  readonly fileName: string;
}

/**
 * Sends a file that somebody uploaded: as what it was found to be, in a sandbox of its own, a PDF as a download. It is never
 * kept by caches that others share.
 */
export async function sendFile(files: FileStore, response: Response, file: SentFile): Promise<void> {
  const disposition = file.mediaType === 'application/pdf' ? 'attachment' : 'inline';
  response.set({
    'Content-Type': file.mediaType,
    'Content-Length': String(file.bytes),
    'Content-Disposition': `${disposition}; filename="${file.fileName}"`,
    'Content-Security-Policy': "sandbox; default-src 'none'",
    'X-Content-Type-Options': 'nosniff',
    'Cross-Origin-Resource-Policy': 'same-origin',
    'Cache-Control': 'private, max-age=3600',
  });
  try {
    await pipeline(files.read(file.storageKey), response);
  } catch (error) {
    // Somebody who turned the page before it had come; everything else is a fault of ours.
    if ((error as NodeJS.ErrnoException).code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error;
  }
}
