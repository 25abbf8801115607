import type Database from 'better-sqlite3';
import { LRUCache } from 'lru-cache';

const MOST_STATEMENTS = 500;

/**
 * Gives a statement that was prepared before once more: preparing costs more than most of the queries behind a mark, and the
 * query builder prepares anew each time. One that is being iterated over is left alone, and each starts in the plain mode.
 */
export function keepStatements(raw: Database.Database): void {
  const kept = new LRUCache<string, Database.Statement>({ max: MOST_STATEMENTS });
  const prepare = raw.prepare.bind(raw) as (source: string) => Database.Statement;

  function prepareOrReuse(source: string): Database.Statement {
    const known = kept.get(source);
    if (known && !known.busy) return known.reader ? known.raw(false).pluck(false) : known;
    const made = prepare(source);
    kept.set(source, made);
    return made;
  }

  raw.prepare = prepareOrReuse as typeof raw.prepare;
}
