import { existsSync, mkdirSync, renameSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { openDatabase } from '@drizzle/client';
import { users } from '@drizzle/schema';
import { databaseName, filesName, type Context } from '../server/context';
import { createFileStore } from '../server/files/file-store';
import { loadDemonstration } from './load-demonstration';

/**
 * Fills a data folder whose database is missing or empty with the demonstration course. It is made in a folder beside
 * and moved into place once it is whole: who interrupts it finds an empty installation, and it begins anew.
 *
 * @param outer all that a context has but for the database and the files, which are made here
 * @param tell is given a line on how far it is
 * @param studentCount fewer, for tests
 * @returns whether there was anything to fill
 */
export async function fillDataFolder(
  outer: Omit<Context, 'db' | 'files'>,
  tell: (line: string) => void,
  studentCount?: number,
): Promise<boolean> {
  const { dataDir } = outer.config;
  if (!isEmpty(join(dataDir, databaseName))) return false;
  const loading = join(dataDir, 'loading');
  rmSync(loading, { recursive: true, force: true });
  mkdirSync(loading, { recursive: true });
  const database = openDatabase(join(loading, databaseName), 'migrations');
  // What is not yet in place need not survive a power cut; before it is, everything is written through.
  database.sqlite.pragma('synchronous = OFF');
  try {
    const files = createFileStore(join(loading, filesName));
    await loadDemonstration({ ...outer, db: database.db, files }, tell, studentCount);
    database.sqlite.pragma('synchronous = FULL');
    database.sqlite.pragma('wal_checkpoint(TRUNCATE)');
  } finally {
    database.close();
  }
  // The database comes last: without it the folder counts as empty.
  for (const name of [filesName, databaseName]) {
    rmSync(join(dataDir, name), { recursive: true, force: true });
    if (existsSync(join(loading, name))) renameSync(join(loading, name), join(dataDir, name));
  }
  rmSync(loading, { recursive: true, force: true });
  return true;
}

function isEmpty(path: string): boolean {
  if (!existsSync(path)) return true;
  const database = openDatabase(path, 'migrations');
  try {
    return database.db.select({ id: users.id }).from(users).limit(1).get() === undefined;
  } finally {
    database.close();
  }
}
