import type { Reader } from './client.ts';

/**
 * A query that is built once for each database: what is asked at every request costs more to build than to run. In a
 * transaction it is built anew, like any other.
 */
export function prepared<Query>(build: (db: Reader) => Query): (db: Reader) => Query {
  const built = new WeakMap<Reader, Query>();
  return (db) => {
    const known = built.get(db);
    if (known !== undefined) return known;
    const query = build(db);
    built.set(db, query);
    return query;
  };
}
