import { randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, open, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import type { Readable } from 'node:stream';

/** Where uploaded files are kept: outside the web root, under names that tell nothing. */
export interface FileStore {
  /** Keeps bytes for good before it returns. @returns the key under which they are found */
  keep(bytes: Uint8Array): Promise<string>;
  /** The bytes of a key, as a stream. It fails where there are none. */
  read(key: string): Readable;
  /** Forgets a file that nothing names any more. */
  drop(key: string): Promise<void>;
}

const keyForm = /^[0-9a-f]{2}\/[0-9a-f-]{36}$/;

/** A store in a folder. */
export function createFileStore(folder: string): FileStore {
  const pathOf = (key: string): string => {
    if (!keyForm.test(key)) throw new Error('This is no key of the file store.');
    return join(folder, key);
  };
  return {
    async keep(bytes) {
      const id = randomUUID();
      const key = `${id.slice(0, 2)}/${id}`;
      const path = pathOf(key);
      await mkdir(dirname(path), { recursive: true });
      // Written beside, flushed, then renamed: a key never names half a file, not even after a power cut.
      const half = `${path}.half`;
      const file = await open(half, 'wx', 0o600);
      try {
        await file.writeFile(bytes);
        await file.sync();
      } finally {
        await file.close();
      }
      await rename(half, path);
      return key;
    },
    read: (key) => createReadStream(pathOf(key)),
    drop: (key) => rm(pathOf(key), { force: true }),
  };
}
