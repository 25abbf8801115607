import type { Db, Tx } from './client.ts';

type Synchronous<Result> = Result extends PromiseLike<unknown> ? never : Result;

/**
 * Runs a change in one immediate, synchronous transaction. Immediate, because a read that turns into a write beside
 * a second writer fails at once in a deferred one; synchronous, because statements after an `await` would run outside.
 */
export function write<Result>(db: Db, change: (tx: Tx) => Synchronous<Result>): Result {
  return db.transaction(
    (tx): Result => {
      const result: Result = change(tx);
      if (result instanceof Promise) {
        result.catch(() => undefined);
        throw new TypeError('A transaction must not return a promise.');
      }
      return result;
    },
    { behavior: 'immediate' },
  );
}
