import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { z } from 'zod';
import { write } from '../../../server/db/transaction.ts';
import { defineJob, HopelessJobError, JobLostError, type JobHandler } from '../../../server/jobs/registry.ts';
import { leaseMs } from '../../../server/jobs/queue.ts';
import { createJobRunner } from '../../../server/jobs/runner.ts';
import { createTestGround, type TestGround } from '../../support/server/test-ground.ts';

let ground: TestGround;
beforeEach(() => {
  ground = createTestGround();
});
afterEach(() => ground.close());

const payload = z.object({ recordingId: z.string() });

function runnerOf(handlers: JobHandler[]) {
  return createJobRunner({ queue: ground.jobs, handlers, log: ground.log, lanes: { compute: 1, light: 1 } });
}

function enqueue(kind: string, recordingId = 'r1'): void {
  write(ground.db, (tx) => ground.jobs.enqueue(tx, { kind, payload: { recordingId } }));
}

describe('the runner', () => {
  test('hands the parsed payload to the handler of its kind', async () => {
    const seen: string[] = [];
    const measure = defineJob({
      kind: 'measure',
      lane: 'compute',
      payload,
      run: async ({ recordingId }) => void seen.push(recordingId),
    });
    enqueue('measure', 'r7');
    expect(await runnerOf([measure]).runUntilIdle()).toBe(1);
    expect(seen).toEqual(['r7']);
    expect(ground.jobs.counts()).toEqual({ queued: 0, running: 0, parked: 0 });
  });

  test('parks what the handler calls hopeless, and tells it', async () => {
    const parked: string[] = [];
    const measure = defineJob({
      kind: 'measure',
      lane: 'compute',
      payload,
      run: async () => {
        throw new HopelessJobError('This is no sound file.');
      },
      onParked: ({ recordingId }, reason) => parked.push(`${recordingId}: ${reason}`),
    });
    enqueue('measure');
    await runnerOf([measure]).runUntilIdle();
    expect(parked).toEqual(['r1: This is no sound file.']);
  });

  test('tries again after an error that may pass', async () => {
    let tries = 0;
    const measure = defineJob({
      kind: 'measure',
      lane: 'compute',
      payload,
      run: async () => {
        tries += 1;
        if (tries === 1) throw new Error('The disk was busy.');
      },
    });
    enqueue('measure');
    await runnerOf([measure]).runUntilIdle();
    ground.clock.advance(5000);
    await runnerOf([measure]).runUntilIdle();
    expect(tries).toBe(2);
    expect(ground.jobs.counts()).toEqual({ queued: 0, running: 0, parked: 0 });
  });

  test('a result of a job that was taken over is refused inside its transaction', async () => {
    const errors: unknown[] = [];
    const measure = defineJob({
      kind: 'measure',
      lane: 'compute',
      payload,
      run: async (_payload, { assertHeld }) => {
        ground.clock.advance(leaseMs + 1);
        ground.jobs.claim(['measure']);
        try {
          write(ground.db, (tx) => assertHeld(tx));
        } catch (error) {
          errors.push(error);
        }
      },
    });
    enqueue('measure');
    await runnerOf([measure]).runUntilIdle();
    expect(errors[0]).toBeInstanceOf(JobLostError);
    expect(ground.jobs.counts().running).toBe(1);
  });

  test('starts at once when something is enqueued, and light jobs pass by computing ones', async () => {
    const done: string[] = [];
    let finish = () => undefined as void;
    const long = new Promise<void>((resolve) => (finish = resolve));
    const measure = defineJob({ kind: 'measure', lane: 'compute', payload, run: () => long });
    const mail = defineJob({ kind: 'mail', lane: 'light', payload, run: async () => void done.push('mail') });
    const runner = runnerOf([measure, mail]);
    runner.start();
    enqueue('measure');
    enqueue('measure');
    enqueue('mail');
    await vi.waitFor(() => expect(done).toEqual(['mail']));
    expect(ground.jobs.counts()).toEqual({ queued: 1, running: 1, parked: 0 });
    const stopped = runner.stop(1000);
    finish();
    await stopped;
  });

  test('a stop asks handlers to end and gives back what does not, without taking a try from it', async () => {
    let aborted = false;
    const measure = defineJob({
      kind: 'measure',
      lane: 'compute',
      payload,
      run: (_payload, { signal }) =>
        new Promise((_resolve, reject) => {
          signal.addEventListener('abort', () => {
            aborted = true;
            reject(new Error('stopped'));
          });
        }),
    });
    const runner = runnerOf([measure]);
    enqueue('measure');
    runner.start();
    await vi.waitFor(() => expect(ground.jobs.counts().running).toBe(1));
    await runner.stop(1000);
    expect(aborted).toBe(true);
    expect(ground.jobs.counts()).toEqual({ queued: 1, running: 0, parked: 0 });
    expect(ground.jobs.claim(['measure'])?.attempts).toBe(1);
  });
});
