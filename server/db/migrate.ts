import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type Sqlite from 'better-sqlite3';
import { drizzle } from 'drizzle-orm/better-sqlite3';
import { migrate } from 'drizzle-orm/better-sqlite3/migrator';

/**
 * Brings the tables up to date. A copy of the file is kept before anything changes. Foreign keys are off
 * meanwhile (a rebuilt table would otherwise take its children with it) and checked afterwards; and every
 * migration of the journal must be in the ledger, because one with an old time stamp is skipped silently.
 * @throws Error when rows are left without their parent or a migration was not applied
 */
export function migrateDatabase(
  client: Sqlite.Database,
  file: string,
  folder: string,
  isNew: boolean,
  log: (message: string) => void,
): void {
  const wanted = journal(folder);
  const applied = ledger(client);
  if (wanted.every((when) => applied.includes(when))) return;
  if (!isNew) {
    const copy = `${file}.before-${wanted.length}`;
    client.prepare('vacuum into ?').run(copy);
    log(`Updating the tables; the file as it was is kept as ${copy}`);
  }
  client.pragma('foreign_keys = OFF');
  try {
    migrate(drizzle(client), { migrationsFolder: folder });
    const orphans = client.pragma('foreign_key_check') as unknown[];
    if (orphans.length > 0) throw new Error(`${orphans.length} rows lost their parent in a migration`);
  } finally {
    client.pragma('foreign_keys = ON');
  }
  const missing = wanted.filter((when) => !ledger(client).includes(when));
  if (missing.length > 0)
    throw new Error(`${missing.length} migrations were skipped: their time stamps are too old`);
}

function journal(folder: string): number[] {
  const text = readFileSync(join(folder, 'meta', '_journal.json'), 'utf8');
  return (JSON.parse(text) as { entries: { when: number }[] }).entries.map((entry) => entry.when);
}

function ledger(client: Sqlite.Database): number[] {
  const exists = client
    .prepare("select count(*) from sqlite_master where name = '__drizzle_migrations'")
    .pluck()
    .get();
  if (!exists) return [];
  return client.prepare('select created_at from __drizzle_migrations').pluck().all().map(Number);
}
