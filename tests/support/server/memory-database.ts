import path from 'node:path';
import { openDatabase, type Db } from '../../../server/db/client.ts';
import { migrateDatabase } from '../../../server/db/migrate.ts';

export const projectRoot = path.resolve(import.meta.dirname, '../../..');
export const migrationsFolder = path.join(projectRoot, 'drizzle');

/** A real database in memory, with all migrations. */
export function openMemoryDatabase(): Db {
  const db = openDatabase(':memory:');
  migrateDatabase(db, migrationsFolder);
  return db;
}
