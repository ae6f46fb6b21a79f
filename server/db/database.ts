import { chmodSync, copyFileSync, existsSync, mkdirSync, rmSync } from 'node:fs';
import { dirname } from 'node:path';
import Sqlite from 'better-sqlite3';
import { type BetterSQLite3Database, drizzle } from 'drizzle-orm/better-sqlite3';
import { MigrationFailed, migrateDatabase } from './migrate';
import * as schema from './schema';

export type Database = BetterSQLite3Database<typeof schema> & { $client: Sqlite.Database };

/** Older engines can corrupt a WAL file when two connections checkpoint. */
const OLDEST_ENGINE = [3, 51, 3];

/**
 * Opens (or makes) the one database connection of the server, durable and migrated.
 * @throws Error when the engine is too old, a setting does not hold, or a migration fails
 */
export function openDatabase(
  file: string,
  migrationsFolder: string,
  log: (message: string) => void,
): Database {
  mkdirSync(dirname(file), { recursive: true, mode: 0o700 });
  const isNew = !existsSync(file);
  const client = new Sqlite(file);
  chmodSync(file, 0o600);
  assertEngine(client);
  client.pragma('busy_timeout = 5000');
  client.pragma('journal_mode = WAL');
  // FULL at every open: the default under WAL may lose what a person was told is saved.
  client.pragma('synchronous = FULL');
  client.pragma('foreign_keys = ON');
  // Without it REPLACE would take rows away past the triggers that guard them.
  client.pragma('recursive_triggers = ON');
  const holds: [string, unknown][] = [
    ['journal_mode', 'wal'],
    ['synchronous', 2],
    ['foreign_keys', 1],
    ['recursive_triggers', 1],
  ];
  for (const [name, value] of holds) {
    const actual = client.pragma(name, { simple: true });
    if (actual !== value)
      throw new Error(`SQLite setting ${name} is ${String(actual)}, not ${String(value)}`);
  }
  try {
    const copy = migrateDatabase(client, file, migrationsFolder, isNew);
    if (copy) log(`The tables were brought up to date; the file as it was is kept as ${copy}`);
  } catch (error) {
    client.close();
    if (error instanceof MigrationFailed && error.copy) putBack(error.copy, file);
    throw error;
  }
  return drizzle(client, { schema });
}

/** The file as it was before the migration; its WAL belongs to what failed. */
function putBack(copy: string, file: string): void {
  for (const side of ['-wal', '-shm']) rmSync(file + side, { force: true });
  copyFileSync(copy, file);
}

function assertEngine(client: Sqlite.Database): void {
  const version = String(client.prepare('select sqlite_version()').pluck().get());
  const parts = version.split('.').map(Number);
  for (const [i, least] of OLDEST_ENGINE.entries()) {
    if ((parts[i] ?? 0) > least) return;
    if ((parts[i] ?? 0) < least)
      throw new Error(`SQLite ${version} is older than ${OLDEST_ENGINE.join('.')}`);
  }
}
