import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { jobs } from '../../../server/db/schema/jobs.ts';
import { write } from '../../../server/db/transaction.ts';
import { leaseMs, maxAttempts, type ClaimedJob } from '../../../server/jobs/queue.ts';
import { retryDelayMs } from '../../../server/jobs/retry-delay.ts';
import { createTestGround, type TestGround } from '../../support/server/test-ground.ts';

let ground: TestGround;
beforeEach(() => {
  ground = createTestGround();
});
afterEach(() => ground.close());

const kinds = ['measure'];

function enqueue(runAfterMs?: number): string {
  const request = { kind: 'measure', payload: { recordingId: 'r1' } };
  return write(ground.db, (tx) =>
    ground.jobs.enqueue(tx, { ...request, ...(runAfterMs === undefined ? {} : { runAfterMs }) }),
  );
}

function claim(): ClaimedJob {
  const job = ground.jobs.claim(kinds);
  if (job === null) throw new Error('There was nothing to claim.');
  return job;
}

function rowOf(id: string) {
  return ground.db.select().from(jobs).where(eq(jobs.id, id)).get();
}

describe('enqueueing', () => {
  test('a job whose transaction is rolled back does not exist', () => {
    expect(() =>
      write(ground.db, (tx) => {
        ground.jobs.enqueue(tx, { kind: 'measure', payload: {} });
        throw new Error('the change failed');
      }),
    ).toThrow('the change failed');
    expect(ground.jobs.claim(kinds)).toBeNull();
  });

  test('the oldest due job is claimed first', () => {
    const first = enqueue();
    ground.clock.advance(1);
    enqueue();
    expect(claim().id).toBe(first);
  });

  test('a job for later waits until its time', () => {
    enqueue(ground.clock.nowMs() + 1000);
    expect(ground.jobs.claim(kinds)).toBeNull();
    ground.clock.advance(1000);
    expect(ground.jobs.claim(kinds)).not.toBeNull();
  });
});

describe('claiming', () => {
  test('a claimed job is nobody else’s', () => {
    enqueue();
    claim();
    expect(ground.jobs.claim(kinds)).toBeNull();
  });

  test('other kinds are left alone', () => {
    enqueue();
    expect(ground.jobs.claim(['archive'])).toBeNull();
    expect(ground.jobs.claim([])).toBeNull();
  });

  test('a job whose lease has run out is claimed again, with a higher fence', () => {
    enqueue();
    const lost = claim();
    ground.clock.advance(leaseMs + 1);
    const taken = claim();
    expect(taken.id).toBe(lost.id);
    expect(taken.fence).toBe(lost.fence + 1);
  });

  test('whoever lost a job can neither finish, fail nor prolong it', () => {
    const id = enqueue();
    const lost = claim();
    ground.clock.advance(leaseMs + 1);
    const taken = claim();
    expect(ground.jobs.heartbeat(lost, 0.9)).toBe(false);
    expect(ground.jobs.complete(lost)).toBe(false);
    expect(ground.jobs.fail(lost, 'too late')).toBe('lost');
    expect(ground.jobs.holds(ground.db, lost)).toBe(false);
    expect(ground.jobs.holds(ground.db, taken)).toBe(true);
    expect(rowOf(id)).toMatchObject({ state: 'running', progress: 0, error: null });
  });

  test('a heartbeat keeps the lease and tells the progress', () => {
    const id = enqueue();
    const job = claim();
    ground.clock.advance(leaseMs - 1);
    expect(ground.jobs.heartbeat(job, 0.5)).toBe(true);
    ground.clock.advance(leaseMs - 1);
    expect(ground.jobs.claim(kinds)).toBeNull();
    expect(rowOf(id)?.progress).toBe(0.5);
  });
});

describe('failing', () => {
  test('a failed job comes back after a growing delay', () => {
    enqueue();
    const delays: number[] = [];
    for (let attempt = 1; attempt < maxAttempts; attempt += 1) {
      expect(ground.jobs.fail(claim(), 'no room')).toBe('queued');
      delays.push(retryDelayMs(attempt));
      ground.clock.advance(retryDelayMs(attempt) - 1);
      expect(ground.jobs.claim(kinds)).toBeNull();
      ground.clock.advance(1);
    }
    expect(delays).toEqual([5000, 20_000, 80_000, 320_000]);
  });

  test('the fifth failure parks it with the reason', () => {
    const id = enqueue();
    for (let attempt = 1; attempt < maxAttempts; attempt += 1) {
      ground.jobs.fail(claim(), 'no room');
      ground.clock.advance(retryDelayMs(attempt));
    }
    expect(ground.jobs.fail(claim(), 'still no room')).toBe('parked');
    expect(rowOf(id)).toMatchObject({ state: 'parked', error: 'still no room', attempts: maxAttempts });
    expect(ground.jobs.counts()).toEqual({ queued: 0, running: 0, parked: 1 });
  });

  test('a hopeless job is parked at once', () => {
    enqueue();
    expect(ground.jobs.fail(claim(), 'this is no sound file', 'never')).toBe('parked');
  });

  test('a job that took the process down five times is parked with a reason of ours', () => {
    const id = enqueue();
    for (let attempt = 1; attempt <= maxAttempts; attempt += 1) {
      claim();
      expect(ground.jobs.parkExhausted()).toEqual([]);
      ground.clock.advance(leaseMs + 1);
    }
    expect(ground.jobs.claim(kinds)).toBeNull();
    expect(ground.jobs.parkExhausted()).toMatchObject([
      { id, kind: 'measure', payload: { recordingId: 'r1' } },
    ]);
    expect(rowOf(id)?.state).toBe('parked');
  });

  test('a parked job can be tried again from the beginning', () => {
    const id = enqueue();
    ground.jobs.fail(claim(), 'this is no sound file', 'never');
    expect(ground.jobs.retry(id)).toBe(true);
    expect(claim()).toMatchObject({ id, attempts: 1 });
    expect(ground.jobs.retry(id)).toBe(false);
  });

  test('a released job has lost no try', () => {
    enqueue();
    ground.jobs.release(claim());
    expect(claim().attempts).toBe(1);
  });

  test.each([0, 1.5, Number.NaN])('a delay after %d tries does not exist', (attempts) => {
    expect(() => retryDelayMs(attempts)).toThrow(RangeError);
  });
});
