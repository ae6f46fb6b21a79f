import { chmodSync, existsSync, mkdirSync } from 'node:fs';
import { dirname } from 'node:path';
import Sqlite from 'better-sqlite3';
import { type BetterSQLite3Database, drizzle } from 'drizzle-orm/better-sqlite3';
import { migrateDatabase } from './migrate';
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
  if (isNew) chmodSync(file, 0o600);
  assertEngine(client);
  client.pragma('busy_timeout = 5000');
  client.pragma('journal_mode = WAL');
  // FULL at every open: the default under WAL may lose what a person was told is saved.
  client.pragma('synchronous = FULL');
  client.pragma('foreign_keys = ON');
  const holds: [string, unknown][] = [
    ['journal_mode', 'wal'],
    ['synchronous', 2],
    ['foreign_keys', 1],
  ];
  for (const [name, value] of holds) {
    const actual = client.pragma(name, { simple: true });
    if (actual !== value)
      throw new Error(`SQLite setting ${name} is ${String(actual)}, not ${String(value)}`);
  }
  migrateDatabase(client, file, migrationsFolder, isNew, log);
  return drizzle(client, { schema });
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
