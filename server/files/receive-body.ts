import type { Request } from 'express';
import { invalidField, tooLarge } from '../http/errors';

/**
 * The raw body of a request, which must be a file.
 *
 * @param limit most bytes that are taken
 * @throws RequestError 413 as soon as more than the limit comes or is announced, 400 for an empty body
 */
export async function receiveBody(request: Request, limit: number): Promise<Buffer> {
  const refusal = () => tooLarge(`The file is larger than ${megabytes(limit)}. Nothing was added.`);
  if (Number(request.get('Content-Length') ?? 0) > limit) {
    // What is still on its way is read and forgotten, so that the browser gets to see the answer.
    request.resume();
    throw refusal();
  }
  // What called itself JSON was read as such already.
  if (request.readableEnded) throw invalidField(['file'], 'Send the file itself, with its own media type.');
  const pieces: Buffer[] = [];
  let size = 0;
  await new Promise<void>((resolve, reject) => {
    request.on('data', (piece: Buffer) => {
      size += piece.length;
      if (size <= limit) pieces.push(piece);
      else {
        request.removeAllListeners('data');
        request.resume();
        reject(refusal());
      }
    });
    request.on('end', resolve);
    request.on('aborted', () => {
      reject(invalidField(['file'], 'The connection broke before the file was here. Nothing was added.'));
    });
    request.on('error', reject);
  });
  if (size === 0) throw invalidField(['file'], 'The file is empty.');
  return Buffer.concat(pieces);
}

/** Bytes in words: `25 MB`. */
function megabytes(bytes: number): string {
  return `${String(Math.round(bytes / 1024 / 1024))} MB`;
}
