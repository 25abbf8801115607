import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const read = (actor: Parameters<TestApp['as']>[0]) => app.as(actor).get('/api/health');

describe('health', () => {
  test('is told to everybody, figures to administrators only', async () => {
    expect((await read('anonymous')).body).toMatchObject({ database: 'ok', jobs: 'ok', details: null });
    expect((await read('curator')).body.details).toBeNull();
    const { details } = (await read('administrator')).body;
    expect(details.freeBytes).toBeGreaterThan(0);
    expect(details.jobs).toEqual({ queued: 0, running: 0, parked: 0 });
  });

  test('names a job that was given up', async () => {
    write(app.deps.db, (tx) => app.deps.jobs.enqueue(tx, { kind: 'test', payload: {} }));
    const job = app.deps.jobs.claim(['test']);
    if (job !== null) app.deps.jobs.fail(job, 'hopeless', 'never');
    expect((await read('anonymous')).body.jobs).toBe('parked');
  });
});
