import {
  chmodSync,
  cpSync,
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Sqlite from 'better-sqlite3';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { AuditLog } from '../../server/audit/audit-log';
import { type Database, openDatabase } from '../../server/db/database';
import { MIGRATIONS, PASSWORD, startPlayedServer } from '../support/played-server';

let folder: string;
let file: string;
let open: Database[];
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'elbowroom-db-'));
  file = join(folder, 'elbowroom.sqlite');
  open = [];
});
afterEach(() => {
  for (const db of open) db.$client.close();
  rmSync(folder, { recursive: true, force: true });
});

function openHere(migrations = MIGRATIONS, log: (message: string) => void = () => {}): Database {
  const db = openDatabase(file, migrations, log);
  open.push(db);
  return db;
}
const close = (db: Database) => {
  db.$client.close();
  open.splice(open.indexOf(db), 1);
};
const pragma = (db: Database, name: string) => db.$client.pragma(name, { simple: true });

/** The migrations folder with one more migration at the end, as a later version of the product brings it. */
function withMigration(sql: string, when?: number): string {
  const extended = join(folder, 'drizzle');
  cpSync(MIGRATIONS, extended, { recursive: true });
  const journalFile = join(extended, 'meta', '_journal.json');
  const journal = JSON.parse(readFileSync(journalFile, 'utf8'));
  const newest = journal.entries.at(-1);
  journal.entries.push({ ...newest, idx: newest.idx + 1, tag: 'later', when: when ?? newest.when + 1000 });
  writeFileSync(journalFile, JSON.stringify(journal));
  writeFileSync(join(extended, 'later.sql'), sql);
  return extended;
}

function fill(db: Database): void {
  const c = db.$client;
  c.exec(`insert into arms (id, name, revision, updated_at_ms) values ('h', 'Heron', 1, 5);
    insert into poses (id, arm_id, name, note, tags, revision) values ('p', 'h', 'Perch', '', '[]', 1);
    insert into pose_revisions (pose_id, revision, q, gripper, trust, origin, by, at_ms, arm_revision)
      values ('p', 1, '[0.1,1]', '0.5', 'declared', 'typed', 'Ines', 7, 1);`);
}
const poseRows = (db: Database) => db.$client.prepare('select * from pose_revisions').all();

describe('the database', () => {
  it('is durable at every open, also after the first write, when SQLite’s own default would no longer be', () => {
    for (let time = 0; time < 3; time++) {
      const db = openHere();
      db.$client.exec('create table if not exists t (a); insert into t values (1)');
      // SQLite: 2 is FULL; a WAL file opened afresh would be at 1, NORMAL.
      expect([pragma(db, 'journal_mode'), pragma(db, 'synchronous'), pragma(db, 'foreign_keys')]).toEqual([
        'wal',
        2,
        1,
      ]);
      expect(pragma(db, 'busy_timeout')).toBeGreaterThanOrEqual(5000);
      close(db);
    }
    const plain = new Sqlite(file);
    plain.exec('insert into t values (2)');
    expect(plain.pragma('synchronous', { simple: true })).toBe(1);
    plain.close();
  });

  it('runs on an engine without the WAL-reset race (fixed in SQLite 3.51.3)', () => {
    const version = String(openHere().$client.prepare('select sqlite_version()').pluck().get());
    const [major, minor, patch] = version.split('.').map(Number) as [number, number, number];
    expect(major * 1e6 + minor * 1e3 + patch).toBeGreaterThanOrEqual(3_051_003);
  });

  it('is nobody else’s to read, whatever its mode was, nor are the files beside it', () => {
    close(openHere());
    chmodSync(file, 0o644);
    const db = openHere(withMigration('create table more (a integer);'));
    fill(db);
    const files = readdirSync(folder).filter((name) => name.startsWith('elbowroom.sqlite'));
    expect(files.length).toBeGreaterThanOrEqual(3);
    for (const name of files) expect(statSync(join(folder, name)).mode & 0o077, name).toBe(0);
  });

  it('holds no password and no session token, in any of its files', async () => {
    const server = await startPlayedServer({ folder });
    await server.team();
    const page = server.browser();
    await page.post('/session', { email: 'owner@tidemill.example', password: PASSWORD });
    const token = page.cookie!.split('=')[1]!;
    for (const name of readdirSync(folder)) {
      const bytes = readFileSync(join(folder, name)).toString('latin1');
      expect(bytes.includes(token), name).toBe(false);
      expect(bytes.includes(PASSWORD), name).toBe(false);
    }
    await server.close();
  });
});

describe('a migration', () => {
  it('keeps a copy of the file as it was, and every row', () => {
    const before = openHere();
    fill(before);
    const rows = poseRows(before);
    close(before);
    const told: string[] = [];
    const db = openHere(withMigration('alter table poses add column colour text;'), (m) => told.push(m));
    expect(poseRows(db)).toEqual(rows);
    const copy = /kept as (\S+)/.exec(told.join())![1]!;
    const old = new Sqlite(copy, { readonly: true });
    expect(old.prepare('select * from pose_revisions').all()).toEqual(rows);
    expect(old.pragma('table_info(poses)')).not.toContainEqual(expect.objectContaining({ name: 'colour' }));
    old.close();
  });

  it('that rebuilds a table leaves the rows that hang on it alone', () => {
    const before = openHere();
    before.$client.exec(
      `insert into people (id, name, email, role, password_hash, created_at_ms) values ('a', 'Ada', 'a@x', 'owner', '-', 1);
       insert into sessions values ('s', 'hash', 'a', 1, 1, 2, '');`,
    );
    close(before);
    // What the generator writes for a changed column: copy, drop, rename. Sessions hang on people with "cascade".
    const columns = 'id, name, email, role, password_hash, disabled, created_at_ms, last_seen_ms';
    const db = openHere(
      withMigration(`CREATE TABLE new_people (id text primary key not null, name text not null, email text not null,
        role text not null, password_hash text not null, disabled integer not null default 0, created_at_ms integer not null, last_seen_ms integer);
--> statement-breakpoint
INSERT INTO new_people SELECT ${columns} FROM people;
--> statement-breakpoint
DROP TABLE people;
--> statement-breakpoint
ALTER TABLE new_people RENAME TO people;`),
    );
    expect(db.$client.prepare('select count(*) from sessions').pluck().get()).toBe(1);
    expect(pragma(db, 'foreign_keys')).toBe(1);
  });

  it.each([
    ['leaves rows without their parent', "delete from poses where id = 'p';", /lost their parent/],
    ['takes rows away', 'delete from pose_revisions;', /1 rows of pose_revisions are gone/],
    ['is wrong', 'alter table no_such add column x text;', /no such table/],
  ])('that %s is undone, at every start', (_what, sql, why) => {
    const before = openHere();
    fill(before);
    const rows = poseRows(before);
    close(before);
    const bad = withMigration(sql);
    for (let start = 0; start < 2; start++) expect(() => openHere(bad)).toThrow(why);
    const db = openHere();
    expect(poseRows(db)).toEqual(rows);
    expect(db.$client.prepare('select count(*) from poses').pluck().get()).toBe(1);
    expect(pragma(db, 'integrity_check')).toBe('ok');
  });

  it('with an old time stamp, which would be skipped without a word, is noticed', () => {
    close(openHere());
    const stale = withMigration('create table skipped_one (a integer);', 1);
    expect(() => openHere(stale)).toThrow(/skipped/);
  });

  it('comes after the one before it in time, for all of them', () => {
    const { entries } = JSON.parse(readFileSync(join(MIGRATIONS, 'meta', '_journal.json'), 'utf8')) as {
      entries: { when: number; tag: string }[];
    };
    for (const [i, { when, tag }] of entries.entries()) {
      if (i > 0) expect(when, tag).toBeGreaterThan(entries[i - 1]!.when);
      expect(existsSync(join(MIGRATIONS, `${tag}.sql`)), tag).toBe(true);
    }
  });
});

describe('the audit log', () => {
  const logOf = (db: Database, warnings: string[] = []) =>
    new AuditLog(db, () => 1_775_034_000_000, { warn: (message) => warnings.push(message) });

  it('refuses to have entries changed or taken away', () => {
    const db = openHere();
    logOf(db).append({ who: 'Ada', act: 'stop' });
    for (const sql of [
      "update audit_log set who = 'Eve'",
      'delete from audit_log',
      'replace into audit_log select * from audit_log',
    ])
      expect(() => db.$client.prepare(sql).run(), sql).toThrow(/append-only/);
    expect(logOf(db).page()).toHaveLength(1);
  });

  it.each([
    ['a changed entry', "update audit_log set who = 'Eve' where seq = 3", 3],
    ['a changed time', 'update audit_log set at_ms = at_ms + 1 where seq = 2', 2],
    ['a missing entry', 'delete from audit_log where seq = 2', 3],
    [
      'two entries swapped',
      'update audit_log set seq = case seq when 3 then 40 when 4 then 3 else seq end where seq in (3, 4)',
      3,
    ],
  ])('shows %s even to those who got around that', (_what, sql, at) => {
    const db = openHere();
    const log = logOf(db);
    for (const who of ['Ada', 'Moss', 'Ines', 'Juno', 'Otis']) log.append({ who, act: 'stop', arm: 'Heron' });
    expect(log.firstBroken()).toBeNull();
    db.$client.exec('drop trigger audit_log_keeps_entries; drop trigger audit_log_loses_none;');
    db.$client.exec(sql);
    expect(log.firstBroken()).toBe(at);
  });

  it('lets no line break forge an entry', () => {
    const log = logOf(openHere());
    log.append({ who: 'Eve\n2026 Ada did it', act: 'stop', detail: 'a\u2028b\r\nc\u0000d' });
    const [entry] = log.page();
    // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
    expect(JSON.stringify(Object.values(entry!))).not.toMatch(/\\[nru]|[\u0000-\u001f\u2028\u2029]/);
  });

  it('that cannot be written says so and throws nothing', () => {
    const db = openHere();
    const warnings: string[] = [];
    db.$client.pragma('query_only = ON');
    logOf(db, warnings).append({ who: 'Ada', act: 'stop' });
    expect(warnings.join()).toMatch(/could not be written/);
  });

  it('is handed out a hundred at a time, newest first, each once', () => {
    const log = logOf(openHere());
    for (let i = 1; i <= 250; i++) log.append({ who: `p${i}`, act: 'stop' });
    const first = log.page();
    const second = log.page(first.at(-1)!.seq);
    const third = log.page(second.at(-1)!.seq);
    expect([first.length, second.length, third.length]).toEqual([100, 100, 50]);
    expect([...first, ...second, ...third].map((e) => e.who)).toEqual(
      Array.from({ length: 250 }, (_, i) => `p${250 - i}`),
    );
  });
});
