import Sqlite from 'better-sqlite3';
import { drizzle } from 'drizzle-orm/better-sqlite3';
import { migrate } from 'drizzle-orm/better-sqlite3/migrator';
import * as relations from './relations';
import * as schema from './schema';

/**
 * Opens the installation's one database file and applies the migrations.
 *
 * @param file path of the database, or `:memory:` for tests
 * @param migrationsFolder the folder that drizzle-kit writes
 */
export function openDatabase(file: string, migrationsFolder: string) {
  const sqlite = new Sqlite(file);
  // Readers go on while one writes, which a bench full of markers needs.
  sqlite.pragma('journal_mode = WAL');
  // An acknowledged save must survive a power cut as well as a killed process.
  sqlite.pragma('synchronous = FULL');
  // A second process (a back-up, a second server) may hold the write lock for a moment.
  sqlite.pragma('busy_timeout = 5000');
  // 64 MiB of pages: the demonstration's whole database stays in memory.
  sqlite.pragma('cache_size = -65536');
  const db = drizzle(sqlite, { schema: { ...schema, ...relations }, casing: 'snake_case' });
  // Migrations may rebuild tables, so references are enforced only afterwards.
  sqlite.pragma('foreign_keys = OFF');
  migrate(db, { migrationsFolder });
  sqlite.pragma('foreign_keys = ON');
  return { db, sqlite, close: () => sqlite.close() };
}

/** An open database with its tables. */
export type Database = ReturnType<typeof openDatabase>['db'];

/** A database or a transaction on it: what every query takes first. */
export type Queryable = Pick<
  Database,
  'select' | 'selectDistinct' | 'insert' | 'update' | 'delete' | 'query' | 'get' | 'all' | 'run'
>;
