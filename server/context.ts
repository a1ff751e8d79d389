import type { Logger } from 'pino';
import type { Database } from '@drizzle/client';
import type { Config } from './config';
import type { FileStore } from './files/file-store';
import type { KeyPool } from './keys';
import type { Live } from './live/live';

/** The names of the database and of the folder of files inside `DATA_DIR`. */
export const databaseName = 'halfsilver.db';
export const filesName = 'files';

/** Tells the time; injected, so that tests can set it. */
export interface Clock {
  /** UTC milliseconds. */
  now(): number;
}

/** The clock of the machine. */
export const systemClock: Clock = { now: () => Date.now() };

/** What every part of the server works with. Made once, in `main.ts` or by a test. */
export interface Context {
  readonly config: Config;
  readonly db: Database;
  readonly clock: Clock;
  readonly keys: KeyPool;
  readonly files: FileStore;
  readonly live: Live;
  readonly log: Logger;
}
