import { eq, sql } from 'drizzle-orm';
import { integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openDatabase, type Db } from '../../../server/db/client.ts';
import { prepared } from '../../../server/db/prepared.ts';
import { write } from '../../../server/db/transaction.ts';

const crystals = sqliteTable('crystals', { id: integer().primaryKey(), name: text().notNull() });
let builds = 0;
const crystalById = prepared((db) => {
  builds++;
  return db
    .select()
    .from(crystals)
    .where(eq(crystals.id, sql.placeholder('id')))
    .prepare();
});

const opened: Db[] = [];
function open(name: string): Db {
  const db = openDatabase(':memory:');
  opened.push(db);
  db.run(sql`create table crystals (id integer primary key, name text not null)`);
  db.insert(crystals).values({ id: 1, name }).run();
  return db;
}

beforeEach(() => {
  builds = 0;
});
afterEach(() => {
  for (const db of opened.splice(0)) db.$client.close();
});

describe('a prepared query', () => {
  test('is built once for a database, and sees what was written since', () => {
    const db = open('plate');
    expect(crystalById(db).get({ id: 1 })).toEqual({ id: 1, name: 'plate' });
    db.update(crystals).set({ name: 'column' }).run();
    expect(crystalById(db).get({ id: 1 })).toEqual({ id: 1, name: 'column' });
    expect(crystalById(db).get({ id: 2 })).toBeUndefined();
    expect(builds).toBe(1);
  });

  test('asks the database it is given', () => {
    const [one, other] = [open('plate'), open('needle')];
    expect(crystalById(one).get({ id: 1 })?.name).toBe('plate');
    expect(crystalById(other).get({ id: 1 })?.name).toBe('needle');
  });

  test('sees what the transaction has written in which it is asked', () => {
    const db = open('plate');
    crystalById(db).get({ id: 1 });
    const seen = write(db, (tx) => {
      tx.insert(crystals).values({ id: 2, name: 'dendrite' }).run();
      return crystalById(tx).get({ id: 2 });
    });
    expect(seen?.name).toBe('dendrite');
  });
});
