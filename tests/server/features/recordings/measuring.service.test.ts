import { existsSync, readdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { Activity } from '../../../../shared/contract/activity.ts';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { candidates, detectorRuns, measurements } from '../../../../server/db/schema/measurements.ts';
import { createMeasuringService } from '../../../../server/features/recordings/measuring.service.ts';
import { selectRecordingRow } from '../../../../server/features/recordings/recordings.queries.ts';
import { createViewFolders } from '../../../../server/features/recordings/view-folders.ts';
import type { MeasureResult } from '../../../../server/measuring/join-segments.ts';
import { measureFile } from '../../../../server/measuring/measure-file.ts';
import { measureHere, seedRecording, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

type MeasureFile = Parameters<typeof createMeasuringService>[0]['measureFile'];
const rowOf = (id: string) => selectRecordingRow(app.deps.db, id);
const viewNames = (id: string) => {
  const folder = path.join(app.deps.config.paths.views, id);
  return existsSync(folder) ? readdirSync(folder) : [];
};
const measureWith = (
  id: string,
  measure: MeasureFile,
  assertHeld = () => undefined as void,
  { signal = new AbortController().signal, again = false } = {},
) => {
  const viewFolders = createViewFolders(app.deps.config.paths.views);
  const { audit, readStoredAudio } = app.deps.services;
  const parts = { ...app.deps, audit, readStoredAudio, viewFolders, measureFile: measure };
  const task = { again, signal, onProgress: () => undefined, assertHeld };
  return createMeasuringService(parts).measure(id, task);
};

describe('measuring', () => {
  test('shares what nothing speaks against, and says so in the audit log as the server itself', async () => {
    const id = await seedRecording(app);
    await measureHere(app, id);
    expect(rowOf(id)).toMatchObject({
      processing: 'measured',
      progress: 1,
      sharing: 'shared',
      heldAtMs: null,
    });
    const [row] = app.deps.db
      .select()
      .from(auditLog)
      .all()
      .filter(({ action }) => action === 'recording.measured');
    expect(row).toMatchObject({ personId: null, subjectId: id, detail: { sharing: 'shared' } });
    expect(viewNames(id)).toEqual([app.deps.db.select().from(measurements).get()?.id]);
  });

  test('holds what was declared sensitive, from the moment of the decision on', async () => {
    const id = await seedRecording(app, { sensitivity: ['partner-agreement'] });
    await measureHere(app, id);
    expect(rowOf(id)).toMatchObject({ sharing: 'held', heldAtMs: app.clock.nowMs() });
  });

  test('run twice for one recording changes nothing', async () => {
    const id = await seedRecording(app);
    await measureHere(app, id);
    const before = [rowOf(id), viewNames(id)];
    await measureHere(app, id);
    expect([rowOf(id), viewNames(id)]).toEqual(before);
    expect(app.deps.db.select().from(measurements).all()).toHaveLength(1);
  });

  test('stores as many candidates as the detector wrote, in their order', async () => {
    const id = await seedRecording(app);
    let written: MeasureResult | undefined;
    await measureWith(id, async (input, controls) => (written = await measureFile(input, controls)));
    const rows = app.deps.db.select().from(candidates).all();
    expect(rows.map(({ ordinal }) => ordinal)).toEqual(
      Array.from({ length: written?.candidateCount ?? -1 }, (_, n) => n),
    );
    expect(app.deps.db.select().from(detectorRuns).get()?.candidateCount).toBe(written?.candidateCount);
  });

  test('that breaks leaves no view, and the next try starts anew over what was half stored', async () => {
    const id = await seedRecording(app);
    await expect(measureWith(id, () => Promise.reject(new Error('broken')))).rejects.toThrow('broken');
    expect(viewNames(id)).toEqual([]);
    const afterStoring: MeasureFile = async (input, controls) => {
      const result = await measureFile(input, controls);
      // The summary is stored, the candidates cannot be read any more.
      rmSync(result.candidatesPath);
      return result;
    };
    await expect(measureWith(id, afterStoring)).rejects.toThrow('ENOENT');
    expect(app.deps.db.select().from(measurements).all()).toHaveLength(1);
    expect(rowOf(id)?.processing).toBe('measuring');
    await measureHere(app, id);
    expect(app.deps.db.select().from(measurements).all()).toHaveLength(1);
    expect(viewNames(id)).toHaveLength(1);
  });

  test('whose job was taken over writes nothing', async () => {
    const id = await seedRecording(app);
    const lost = () => {
      throw new Error('taken over');
    };
    await expect(measureWith(id, (input) => measureFile(input), lost)).rejects.toThrow('taken over');
    expect(rowOf(id)?.processing).toBe('queued');
  });

  test('tells open pages of the lab how far it is', async () => {
    const id = await seedRecording(app);
    const told: [Activity, string | undefined][] = [];
    app.deps.activity.subscribe(({ activity, audience }) => told.push([activity, audience.labId]));
    await measureHere(app, id);
    expect(told[0]).toMatchObject([{ id, processing: 'measuring', progress: 0 }, app.ownLabId]);
    expect(told.at(-1)).toMatchObject([
      { id, processing: 'measured', sharing: 'shared', progress: 1 },
      app.ownLabId,
    ]);
  });

  test('given up is said in a sentence, without paths of the server', async () => {
    const id = await seedRecording(app);
    app.deps.services.measuring.giveUp(id, "ENOENT: no such file or directory, open '/srv/data/blobs/ab'");
    expect(rowOf(id)).toMatchObject({
      processing: 'failed',
      failure: 'The server could not read or write the files it needs for measuring.',
    });
    app.deps.services.measuring.giveUp(id, 'The audio file ends before the length that its header gives.');
    expect(rowOf(id)?.failure).toBe('The audio file ends before the length that its header gives.');
  });

  test('of a file with more than a trace of samples that are no numbers fails at once, in a sentence', async () => {
    const withNaN = (count: number) => {
      const samples = Float32Array.from({ length: 5000 }, (_, n) => (n < count ? NaN : Math.sin(n) / 2));
      return smallWav({ channels: [samples], encoding: 'float', bitsPerSample: 32 });
    };
    const trace = await seedRecording(app, { wav: withNaN(5) });
    const more = await seedRecording(app, { wav: withNaN(6) });
    expect(await app.runJobs()).toBe(2);
    expect(rowOf(trace)?.processing).toBe('measured');
    const [row] = app.deps.db.select().from(measurements).all();
    expect(row?.summary.quality.map(({ code }) => code)).toContain('non-finite');
    expect(rowOf(more)?.processing).toBe('failed');
    expect(rowOf(more)?.failure).toContain('6 of 5,000 samples are not a number or infinite');
    expect(viewNames(more)).toEqual([]);
  });

  test('whose bytes are gone is tried five times, then given up, and can be tried again', async () => {
    const id = await seedRecording(app);
    const sha256 = rowOf(id)?.sha256 ?? '';
    const bytes = app.deps.store.pathOf(sha256);
    rmSync(bytes);
    for (let n = 0; n < 5; n++) {
      expect(await app.runJobs()).toBe(1);
      app.clock.advance(10 * 60_000);
    }
    expect(await app.runJobs()).toBe(0);
    expect(rowOf(id)?.processing).toBe('failed');
    app.deps.services.measuringRequests.measureAgain(app.actor('contributor'), id);
    expect(await app.runJobs()).toBe(1);
  });
});
