import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { sql } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openDatabase, type Db } from '../../../server/db/client.ts';
import { migrateDatabase, openMigratedDatabase } from '../../../server/db/migrate.ts';
import { write } from '../../../server/db/transaction.ts';
import { migrationsFolder } from '../../support/server/memory-database.ts';

let folder: string;
let opened: Db[];
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'recalesce-db-'));
  opened = [];
});
afterEach(() => {
  for (const db of opened) db.$client.close();
  rmSync(folder, { recursive: true, force: true });
});

function open(name: string): Db {
  const db = openDatabase(name === ':memory:' ? name : path.join(folder, name));
  opened.push(db);
  return db;
}

const pragma = (db: Db, name: string): unknown => db.$client.pragma(name, { simple: true });

describe('a connection', () => {
  test('has full synchronous also when an existing file is opened again', () => {
    open('a.sqlite').run(sql`create table t (x integer)`);
    const again = open('a.sqlite');
    expect(pragma(again, 'synchronous')).toBe(2);
    expect(pragma(again, 'journal_mode')).toBe('wal');
    expect(pragma(again, 'foreign_keys')).toBe(1);
    expect(pragma(again, 'busy_timeout')).toBe(5000);
    expect(pragma(again, 'trusted_schema')).toBe(0);
  });
});

describe('a writing transaction', () => {
  test('is undone as a whole when something throws', () => {
    const db = open(':memory:');
    db.run(sql`create table t (x integer)`);
    expect(() =>
      write(db, (tx) => {
        tx.run(sql`insert into t values (1)`);
        throw new Error('second thoughts');
      }),
    ).toThrow('second thoughts');
    expect(db.all(sql`select * from t`)).toEqual([]);
  });

  test('refuses a promise, and keeps nothing of what came before it', () => {
    const db = open(':memory:');
    db.run(sql`create table t (x integer)`);
    const change: () => unknown = async () => db.run(sql`insert into t values (1)`);
    expect(() => write(db, change)).toThrow(/promise/);
    expect(db.all(sql`select * from t`)).toEqual([]);
  });
});

describe('migrating', () => {
  const rebuild = `PRAGMA foreign_keys=OFF;--> statement-breakpoint
CREATE TABLE \`__new_parents\` (\`id\` text PRIMARY KEY NOT NULL, \`note\` text);--> statement-breakpoint
INSERT INTO \`__new_parents\`("id") SELECT "id" FROM \`parents\`;--> statement-breakpoint
DROP TABLE \`parents\`;--> statement-breakpoint
ALTER TABLE \`__new_parents\` RENAME TO \`parents\`;--> statement-breakpoint
PRAGMA foreign_keys=ON;`;
  const first = `CREATE TABLE \`parents\` (\`id\` text PRIMARY KEY NOT NULL);--> statement-breakpoint
CREATE TABLE \`children\` (\`id\` text PRIMARY KEY NOT NULL, \`parent_id\` text NOT NULL,
  FOREIGN KEY (\`parent_id\`) REFERENCES \`parents\`(\`id\`) ON DELETE cascade);`;

  function writeMigrations(files: string[]): string {
    const target = path.join(folder, `migrations-${files.length}`);
    mkdirSync(path.join(target, 'meta'), { recursive: true });
    const entries = files.map((text, index) => {
      writeFileSync(path.join(target, `000${index}_step.sql`), text);
      return { idx: index, version: '6', when: index + 1, tag: `000${index}_step`, breakpoints: true };
    });
    const journal = { version: '7', dialect: 'sqlite', entries };
    writeFileSync(path.join(target, 'meta', '_journal.json'), JSON.stringify(journal));
    return target;
  }

  test('a rebuilt parent table leaves the rows of its children alone', () => {
    const db = open(':memory:');
    migrateDatabase(db, writeMigrations([first]));
    db.run(sql`insert into parents values ('p')`);
    db.run(sql`insert into children values ('c', 'p')`);
    migrateDatabase(db, writeMigrations([first, rebuild]));
    expect(db.all(sql`select id from children`)).toEqual([{ id: 'c' }]);
    expect(pragma(db, 'foreign_keys')).toBe(1);
  });

  test('a migration that leaves rows pointing nowhere is reported', () => {
    const db = open(':memory:');
    migrateDatabase(db, writeMigrations([first]));
    db.run(sql`insert into parents values ('p')`);
    db.run(sql`insert into children values ('c', 'p')`);
    expect(() => migrateDatabase(db, writeMigrations([first, 'DELETE FROM parents;']))).toThrow(/1 rows/);
  });

  test('an existing file is copied before pending migrations, and only then', async () => {
    const file = path.join(folder, 'live.sqlite');
    const openLive = async (migrations: string) => {
      const db = await openMigratedDatabase(file, migrations, Date.UTC(2031, 0, 2));
      db.$client.close();
      return readdirSync(folder).filter((name) => name.includes('.before-'));
    };
    expect(await openLive(writeMigrations([first]))).toEqual([]);
    expect(await openLive(writeMigrations([first]))).toEqual([]);
    expect(await openLive(writeMigrations([first, rebuild]))).toEqual([
      'live.sqlite.before-2031-01-02T00-00-00.000Z',
    ]);
  });

  test('our own migrations run twice without a change', () => {
    const db = open(':memory:');
    migrateDatabase(db, migrationsFolder);
    const before = db.all(sql`select name, sql from sqlite_master order by name`);
    migrateDatabase(db, migrationsFolder);
    expect(db.all(sql`select name, sql from sqlite_master order by name`)).toEqual(before);
  });

  test('candidates from before get the columns that lists are ordered by out of their parameters', () => {
    const db = open(':memory:');
    const run = (tag: string) => {
      const text = readFileSync(path.join(migrationsFolder, `${tag}.sql`), 'utf8');
      db.$client.exec(text.replaceAll('--> statement-breakpoint', ''));
    };
    db.$client.pragma('foreign_keys = OFF');
    run('0000_first');
    const facts = {
      snrDb: 12.25,
      peakFrequencyHz: null,
      durationUs: 300,
      energyFs2S: 1e-9,
      ultrasonicShare: 0.5,
    };
    db.run(sql`insert into candidates
      (id, detector_run_id, ordinal, channel, onset_sample, end_sample, peak_db, hearing_class, parameters)
      values ('c', 'r', 0, 0, 10, 20, -3, 'above', ${JSON.stringify(facts)})`);
    run('0003_candidate-facts');
    const [row] = db.all(sql`
      select snr_db as snrDb, peak_frequency_hz as peakFrequencyHz, duration_us as durationUs,
        energy_fs2_s as energyFs2S, ultrasonic_share as ultrasonicShare from candidates`);
    expect(row).toEqual(facts);
  });

  test('the audit log takes rows and never lets one be changed or removed', () => {
    const db = open(':memory:');
    migrateDatabase(db, migrationsFolder);
    db.run(sql`insert into audit_log (id, sequence, at_ms, action, subject_type, subject_id, detail, hash)
      values ('a', 1, 0, 'lab.created', 'Lab', 'l', '{}', 'h')`);
    expect(() => db.$client.exec("update audit_log set action = 'x'")).toThrow(/append-only/);
    expect(() => db.$client.exec('delete from audit_log')).toThrow(/append-only/);
  });
});
