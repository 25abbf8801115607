import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { createWorkerPool, type WorkerPool } from '../../../server/jobs/worker-pool.ts';

let pool: WorkerPool<{ value: number }, number>;
beforeAll(() => {
  pool = createWorkerPool({ module: new URL('./fixtures/double-worker', import.meta.url), workers: 1 });
});
afterAll(() => pool.close());

describe('the pool of workers', () => {
  test('runs a module by its address without the ending', async () => {
    expect(await pool.run({ value: 21 })).toBe(42);
  });

  test('an error in a worker reaches whoever asked, with its message', async () => {
    await expect(pool.run({ value: -1 })).rejects.toThrow('value must not be negative, not -1');
  });

  test('a run that is not wanted any more is broken off', async () => {
    await expect(pool.run({ value: 1 }, { signal: AbortSignal.abort() })).rejects.toThrow();
  });
});
