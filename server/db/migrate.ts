import { existsSync, mkdirSync, readFileSync, statSync } from 'node:fs';
import path from 'node:path';
import { migrate } from 'drizzle-orm/better-sqlite3/migrator';
import { z } from 'zod';
import { openDatabase, type Db } from './client.ts';

const journalSchema = z.object({ entries: z.array(z.object({ when: z.number() })) });

/** Opens the database file, backs it up where migrations are pending, and brings it up to date. */
export async function openMigratedDatabase(
  file: string,
  migrationsFolder: string,
  nowMs: number,
): Promise<Db> {
  mkdirSync(path.dirname(file), { recursive: true });
  const existed = existsSync(file) && statSync(file).size > 0;
  const db = openDatabase(file);
  if (countPending(db, migrationsFolder) === 0) return db;
  if (existed)
    await db.$client.backup(`${file}.before-${new Date(nowMs).toISOString().replaceAll(':', '-')}`);
  migrateDatabase(db, migrationsFolder);
  return db;
}

/**
 * Foreign keys are off around the migration: rebuilding a table inside it otherwise cascades into child rows, since
 * SQLite ignores the pragma within the migrator's own transaction.
 */
export function migrateDatabase(db: Db, migrationsFolder: string): void {
  const raw = db.$client;
  raw.pragma('foreign_keys = OFF');
  try {
    migrate(db, { migrationsFolder });
    const broken = raw.pragma('foreign_key_check');
    if (Array.isArray(broken) && broken.length > 0) {
      throw new Error(`After migrating, ${broken.length} rows point to rows that are not there.`);
    }
  } finally {
    raw.pragma('foreign_keys = ON');
  }
}

function countPending(db: Db, migrationsFolder: string): number {
  const text = readFileSync(path.join(migrationsFolder, 'meta', '_journal.json'), 'utf8');
  const journal = journalSchema.parse(JSON.parse(text));
  const known = db.$client.prepare("select 1 from sqlite_master where name = '__drizzle_migrations'").get();
  if (known === undefined) return journal.entries.length;
  const last = db.$client.prepare('select max(created_at) from __drizzle_migrations').pluck().get();
  return journal.entries.filter((entry) => typeof last !== 'number' || entry.when > last).length;
}
