import Database from 'better-sqlite3';
import { drizzle } from 'drizzle-orm/better-sqlite3';
import { keepStatements } from './kept-statements.ts';

export type Db = ReturnType<typeof openDatabase>;
export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0];
/** What a query needs: the database, or a transaction in it. */
export type Reader = Db | Tx;

/** Opens a database file, or `:memory:`, with the settings that everything rests on. */
export function openDatabase(file: string) {
  const raw = new Database(file);
  try {
    applyPragmas(raw, file);
    keepStatements(raw);
  } catch (error) {
    raw.close();
    throw error;
  }
  return drizzle({ client: raw, casing: 'snake_case' });
}

function applyPragmas(raw: Database.Database, file: string): void {
  raw.pragma('journal_mode = WAL');
  // An existing file is reopened with NORMAL, which may lose acknowledged commits when the power fails.
  raw.pragma('synchronous = FULL');
  raw.pragma('foreign_keys = ON');
  raw.pragma('busy_timeout = 5000');
  raw.pragma('trusted_schema = OFF');
  raw.pragma('cell_size_check = ON');
  raw.pragma('journal_size_limit = 67108864');
  raw.pragma('temp_store = MEMORY');
  assertPragmas(raw, file);
}

const fullSynchronous = 2;

function assertPragmas(raw: Database.Database, file: string): void {
  const expected: [string, unknown][] = [
    ['journal_mode', file === ':memory:' ? 'memory' : 'wal'],
    ['synchronous', fullSynchronous],
    ['foreign_keys', 1],
    ['trusted_schema', 0],
  ];
  for (const [name, value] of expected) {
    const found: unknown = raw.pragma(name, { simple: true });
    if (found !== value)
      throw new Error(`The database did not take ${name} = ${String(value)} (it says ${String(found)}).`);
  }
}
