import Database from 'better-sqlite3';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { keepStatements } from '../../../server/db/kept-statements.ts';

let raw: Database.Database;
beforeEach(() => {
  raw = new Database(':memory:');
  raw.exec('create table t (x integer); insert into t values (1), (2)');
  keepStatements(raw);
});
afterEach(() => raw.close());

const all = 'select x from t order by x';

describe('a statement that was prepared before', () => {
  test('is given once more for the same text', () => {
    expect(raw.prepare(all)).toBe(raw.prepare(all));
    expect(raw.prepare(all)).not.toBe(raw.prepare('select x from t'));
  });

  test('starts in the plain mode, however it was read before', () => {
    expect(raw.prepare(all).raw().all()).toEqual([[1], [2]]);
    expect(raw.prepare(all).all()).toEqual([{ x: 1 }, { x: 2 }]);
    expect(raw.prepare(all).pluck().all()).toEqual([1, 2]);
    expect(raw.prepare(all).all()).toEqual([{ x: 1 }, { x: 2 }]);
  });

  test('is left alone while somebody iterates over it', () => {
    const seen: unknown[] = [];
    for (const row of raw.prepare(all).iterate()) {
      seen.push(row);
      expect(raw.prepare(all).all()).toHaveLength(2);
    }
    expect(seen).toEqual([{ x: 1 }, { x: 2 }]);
  });

  test('writes anew each time, and sees a table that has changed since', () => {
    const insert = 'insert into t values (?)';
    raw.prepare(insert).run(3);
    raw.prepare(insert).run(4);
    expect(raw.prepare('select * from t').all()).toHaveLength(4);
    raw.exec('alter table t add column y integer default 5');
    expect(raw.prepare('select * from t').get()).toEqual({ x: 1, y: 5 });
  });
});
