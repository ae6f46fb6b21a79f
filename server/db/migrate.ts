import { chmodSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import type Sqlite from 'better-sqlite3';
import { drizzle } from 'drizzle-orm/better-sqlite3';
import { migrate } from 'drizzle-orm/better-sqlite3/migrator';

/**
 * Brings the tables up to date, if they are not. Foreign keys are off meanwhile (a rebuilt table would
 * otherwise take its children with it); afterwards no row may have lost its parent, no table its rows, and
 * every migration of the journal must be in the ledger, because one with an old time stamp is skipped silently.
 *
 * @returns the copy that was kept of the file as it was, or null when nothing had to be done or the file is new
 * @throws MigrationFailed naming the copy: what was committed by then has to be undone from it
 */
export function migrateDatabase(
  client: Sqlite.Database,
  file: string,
  folder: string,
  isNew: boolean,
): string | null {
  const wanted = journal(folder);
  const applied = ledger(client);
  if (wanted.every((when) => applied.includes(when))) return null;
  const copy = isNew ? null : keepCopy(client, `${file}.before-${wanted.length}`);
  const rowsBefore = rowCounts(client);
  client.pragma('foreign_keys = OFF');
  try {
    migrate(drizzle(client), { migrationsFolder: folder });
    const orphans = client.pragma('foreign_key_check') as unknown[];
    if (orphans.length > 0) throw new Error(`${orphans.length} rows lost their parent`);
    for (const [table, rows] of rowCounts(client)) {
      const before = rowsBefore.get(table) ?? 0;
      if (rows < before) throw new Error(`${before - rows} rows of ${table} are gone`);
    }
    const now = ledger(client);
    const skipped = wanted.filter((when) => !now.includes(when));
    if (skipped.length > 0) throw new Error(`${skipped.length} were skipped: their time stamps are too old`);
  } catch (error) {
    // Drizzle's own message names the statement, its cause says what is wrong with it.
    const { message, cause } = error as Error;
    throw new MigrationFailed(cause instanceof Error ? `${message}: ${cause.message}` : message, copy);
  } finally {
    client.pragma('foreign_keys = ON');
  }
  return copy;
}

export class MigrationFailed extends Error {
  constructor(
    reason: string,
    /** Null when the file was new: then there was nothing to lose. */
    readonly copy: string | null,
  ) {
    super(`The tables could not be brought up to date: ${reason}`);
  }
}

/** A copy left by an attempt that failed is older than the file, so it makes room. */
function keepCopy(client: Sqlite.Database, copy: string): string {
  rmSync(copy, { force: true });
  client.prepare('vacuum into ?').run(copy);
  chmodSync(copy, 0o600);
  return copy;
}

function journal(folder: string): number[] {
  const text = readFileSync(join(folder, 'meta', '_journal.json'), 'utf8');
  return (JSON.parse(text) as { entries: { when: number }[] }).entries.map((entry) => entry.when);
}

function ledger(client: Sqlite.Database): number[] {
  if (!tables(client).includes('__drizzle_migrations')) return [];
  return client.prepare('select created_at from __drizzle_migrations').pluck().all().map(Number);
}

function tables(client: Sqlite.Database): string[] {
  return client.prepare("select name from sqlite_master where type = 'table'").pluck().all() as string[];
}

function rowCounts(client: Sqlite.Database): Map<string, number> {
  const count = (table: string) => client.prepare(`select count(*) from "${table}"`).pluck().get() as number;
  return new Map(tables(client).map((table) => [table, count(table)]));
}
