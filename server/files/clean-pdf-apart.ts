import { Piscina } from 'piscina';
import { workerFile } from '../keys/worker-file';
import { wrongMediaType } from '../http/errors';
import type { CleanFile } from './clean-file';
import { brokenPdf, type CleanedPdf } from './clean-pdf';
import type { PdfTask } from './clean-pdf-worker';

/** How long one PDF may take, in milliseconds; pages from a telephone take a tenth of a second. */
const longest = 8_000;
/** Memory of the worker in MiB, beside the file itself. */
const memory = 512;

let workers: Promise<Piscina> | undefined;

/**
 * Cleans a PDF in a worker, one at a time, so that a file which unfolds without end delays nobody else.
 *
 * @throws RequestError 415 with what to do instead
 */
export async function cleanPdfApart(upload: Uint8Array, mostPages: number): Promise<CleanFile> {
  workers ??= workerFile('clean-pdf-worker', import.meta.url).then(
    (filename) =>
      new Piscina({
        filename,
        minThreads: 0,
        maxThreads: 1,
        idleTimeout: 30_000,
        resourceLimits: { maxOldGenerationSizeMb: memory },
      }),
  );
  const task: PdfTask = { upload, mostPages };
  let cleaned: CleanedPdf;
  try {
    cleaned = (await (await workers).run(task, { signal: AbortSignal.timeout(longest) })) as CleanedPdf;
  } catch {
    // It ran out of time or memory, and its worker is gone.
    throw wrongMediaType(brokenPdf);
  }
  if ('refused' in cleaned) throw wrongMediaType(cleaned.refused);
  return cleaned;
}
