import { existsSync } from 'node:fs';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { candidates, measurements } from '../../../../server/db/schema/measurements.ts';
import { jobs } from '../../../../server/db/schema/jobs.ts';
import { createMeasuringService } from '../../../../server/features/recordings/measuring.service.ts';
import {
  selectNewestMeasurementId,
  selectRecordingRow,
  updateRecording,
} from '../../../../server/features/recordings/recordings.queries.ts';
import { createViewFolders } from '../../../../server/features/recordings/view-folders.ts';
import { measureFile } from '../../../../server/measuring/measure-file.ts';
import { measureHere, seedMeasured, seedRecording } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const rowOf = (id: string) => selectRecordingRow(app.deps.db, id)!;
const again = (id: string, who: 'contributor' | 'reviewer' = 'contributor') =>
  app.deps.services.measuringRequests.measureAgain(app.actor(who), id);
const stop = (id: string, who: 'contributor' | 'reviewer' = 'contributor') =>
  app.deps.services.measuringRequests.stop(app.actor(who), id);
const openJobs = () =>
  app.deps.db
    .select()
    .from(jobs)
    .all()
    .filter((job) => job.kind === 'measure' && (job.state === 'queued' || job.state === 'running'));

/** The measuring service, with a measurement that does what a test wants in the middle. */
function measureWith(id: string, inTheMiddle: () => void, signal: AbortSignal) {
  const { audit, readStoredAudio } = app.deps.services;
  const viewFolders = createViewFolders(app.deps.config.paths.views);
  const service = createMeasuringService({
    ...app.deps,
    audit,
    readStoredAudio,
    viewFolders,
    measureFile: async (input, controls) => {
      await measureFile(
        input,
        {},
        {
          atOnce: 1,
          measureSegment: async (task, index, own) => {
            const { measureSegment } = await import('../../../../server/measuring/measure-segment.ts');
            await measureSegment(task, index, own);
            inTheMiddle();
          },
          joinSegments: () => Promise.reject(new Error('ended')),
        },
      );
      return controls.signal?.throwIfAborted() as never;
    },
  });
  const task = { again: false, signal, onProgress: () => undefined, assertHeld: () => undefined };
  return service.measure(id, task);
}

describe('measuring again', () => {
  test('what failed goes back to the queue, for the contributors of its lab alone', async () => {
    const id = await seedRecording(app);
    updateRecording(app.deps.db, id, { processing: 'failed', failure: 'The disk was full.' });
    expect(() => again(id, 'reviewer')).toThrow('forbidden');
    expect(again(id)).toMatchObject({ processing: 'queued', failure: null });
    expect(() => again(id)).toThrow('measured already');
  });

  test('what is measured stays to be seen until the new measurement is finished, and its old candidates stay', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    const first = selectNewestMeasurementId(app.deps.db, id)!;
    const before = app.deps.db.select().from(candidates).all().length;
    app.clock.advance(1000);
    expect(again(id)).toMatchObject({ processing: 'measured', progress: 0, sharing: 'shared' });
    expect(selectNewestMeasurementId(app.deps.db, id)).toBe(first);
    await measureHere(app, id, true);
    const second = selectNewestMeasurementId(app.deps.db, id)!;
    expect(second).not.toBe(first);
    expect(rowOf(id)).toMatchObject({ processing: 'measured', progress: 1, sharing: 'shared' });
    expect(app.deps.db.select().from(candidates).all()).toHaveLength(2 * before);
    const views = createViewFolders(app.deps.config.paths.views);
    expect(existsSync(views.ofMeasurement(id, second))).toBe(true);
    expect(existsSync(views.ofMeasurement(id, first))).toBe(false);
  });

  test('keeps what there is when the new measurement fails for good', async () => {
    const id = await seedMeasured(app);
    again(id);
    app.deps.services.measuring.giveUp(id, 'The disk was full.');
    expect(rowOf(id)).toMatchObject({ processing: 'measured', progress: 1, failure: 'The disk was full.' });
    expect(again(id)).toMatchObject({ processing: 'measured', failure: null });
  });
});

describe('stopping a measurement', () => {
  test('takes it out of the queue, says so, and leaves it to be measured again', async () => {
    const id = await seedRecording(app);
    expect(openJobs()).toHaveLength(1);
    expect(() => stop(id, 'reviewer')).toThrow('forbidden');
    expect(stop(id)).toMatchObject({
      processing: 'failed',
      failure: expect.stringContaining('stopped') as string,
    });
    expect(openJobs()).toHaveLength(0);
    expect(() => stop(id)).toThrow('not being measured');
    const actions = app.deps.db
      .select()
      .from(auditLog)
      .all()
      .map((row) => row.action);
    expect(actions).toContain('recording.measuring-stopped');
    expect(again(id)).toMatchObject({ processing: 'queued' });
    expect(openJobs()).toHaveLength(1);
  });

  test('of what was measured before brings the old measurement back', async () => {
    const id = await seedMeasured(app);
    again(id);
    expect(stop(id)).toMatchObject({ processing: 'measured', progress: 1, failure: null });
    expect(openJobs().filter((job) => job.payload.again === true)).toHaveLength(0);
  });

  test('while it runs keeps the segments that were finished, and whoever runs it writes nothing more', async () => {
    const id = await seedRecording(app);
    const abort = new AbortController();
    const stopped = measureWith(
      id,
      () => {
        stop(id);
        abort.abort();
      },
      abort.signal,
    );
    await expect(stopped).rejects.toThrow();
    expect(rowOf(id).processing).toBe('failed');
    expect(existsSync(path.join(app.deps.config.paths.views, id, 'unfinished', 'segments', '0.part'))).toBe(
      true,
    );
    again(id);
    await measureHere(app, id);
    expect(rowOf(id).processing).toBe('measured');
    expect(app.deps.db.select().from(measurements).all()).toHaveLength(1);
  });
});
