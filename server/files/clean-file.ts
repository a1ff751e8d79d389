import type { pageMediaTypes } from '@shared/scripts';

/** A file as it is kept: what it is was found from its content, and what tells of its maker is gone. */
export interface CleanFile {
  readonly bytes: Uint8Array;
  readonly mediaType: (typeof pageMediaTypes)[number];
  readonly pageCount: number;
}
